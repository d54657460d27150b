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
 * `budget` elements. Axes in `last` grow only after all others.
 */
export function slabSizes(shape: readonly number[], chunk: readonly number[] | null, budget: number, last: readonly number[] = []): number[] {
  const sizes = shape.map((size, i) => Math.min(size, chunk?.[i] ?? 1));
  const order = shape.map((_, i) => i).reverse().filter((axis) => !last.includes(axis));
  for (const axis of [...order, ...last]) {
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
