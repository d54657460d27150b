/**
 * Boxes in which an array is read: whole chunks, so that none is decompressed twice, and as much along the fastest axes
 * as the budget allows, so that contiguous data come in long runs.
 */
import { PennyweightError } from '#contract/error.ts';

export interface Slab {
  start: number[];
  count: number[];
}

/**
 * Sizes of one box: one chunk, then grown by whole chunks from the last axis to the first while it stays within
 * `budget` elements.
 */
export function slabSizes(shape: readonly number[], chunk: readonly number[] | null, budget: number): number[] {
  const sizes = shape.map((size, i) => Math.min(size, chunk?.[i] ?? 1));
  for (let axis = shape.length - 1; axis >= 0; axis--) {
    const step = chunk?.[axis] ?? 1;
    const others = sizes.reduce((product, size, i) => (i === axis ? product : product * size), 1);
    const room = Math.floor(budget / Math.max(1, others));
    sizes[axis] = Math.max(sizes[axis], Math.min(shape[axis], Math.floor(room / step) * step));
  }
  return sizes;
}

/** A chunk is decompressed whole, however little of it is asked for. */
export function refuseLargeChunks(path: string, chunk: readonly number[] | null, itemBytes: number, limitBytes: number): void {
  const bytes = (chunk ?? []).reduce((product, size) => product * size, itemBytes);
  if (chunk && bytes > limitBytes) {
    throw new PennyweightError('limit-exceeded', `${path} is stored in chunks of ${bytes} bytes, and ${limitBytes} are the most that are read; store it in smaller chunks.`, {
      path,
      expected: limitBytes,
      actual: bytes,
    });
  }
}

/** All boxes of `sizes` that cover `shape` from `from`; the axes in `order` from slowest to fastest. */
export function* slabs(shape: readonly number[], sizes: readonly number[], order: readonly number[]): Generator<Slab> {
  if (shape.some((size) => size === 0)) return;
  const start = shape.map(() => 0);
  for (;;) {
    yield { start: start.slice(), count: start.map((at, i) => Math.min(sizes[i], shape[i] - at)) };
    let level = order.length - 1;
    for (; level >= 0; level--) {
      const axis = order[level];
      start[axis] += sizes[axis];
      if (start[axis] < shape[axis]) break;
      start[axis] = 0;
    }
    if (level < 0) return;
  }
}

export interface Run {
  /** position in the whole */
  node: number;
  /** position in the box */
  at: number;
  length: number;
}

/** Visits the parts of a box that are contiguous in the whole of `shape` as well; both in C order. */
export function eachRun({ start, count }: Slab, shape: readonly number[], visit: (node: number, at: number, length: number) => void): void {
  let axis = shape.length;
  let length = 1;
  while (axis > 0) {
    axis--;
    length *= count[axis];
    if (count[axis] !== shape[axis]) break;
  }
  const index = start.slice();
  const total = count.reduce((product, size) => product * size, 1);
  for (let at = 0; at < total; at += length) {
    let node = 0;
    for (let i = 0; i < shape.length; i++) node = node * shape[i] + index[i];
    visit(node, at, length);
    for (let i = axis - 1; i >= 0; i--) {
      if (++index[i] < start[i] + count[i]) break;
      index[i] = start[i];
    }
  }
}

export function contiguousRuns(box: Slab, shape: readonly number[]): Run[] {
  const runs: Run[] = [];
  eachRun(box, shape, (node, at, length) => runs.push({ node, at, length }));
  return runs;
}
