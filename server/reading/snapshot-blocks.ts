/**
 * Chosen snapshots of chosen fields in double precision: [snapshot][node], fields stacked in the order asked. They are
 * read window by window; a window holds as many snapshots as make reading worth while where all times of a node lie
 * together, and ends with a chunk where chunks hold several snapshots.
 */
import { PennyweightError } from '#contract/error.ts';
import type { Reading } from '#contract/reading.ts';
import type { Archive } from './archive.ts';
import { convertInto } from './element.ts';
import { fieldSource, type FieldSource } from './field-source.ts';
import type { Limits } from './limits.ts';
import { nodeOrder } from './reading-axes.ts';
import { contiguousRuns, slabs, type Slab } from './slab-plan.ts';
import { sizeOf } from './stored-array.ts';

export interface SnapshotPlan {
  /** values of one snapshot: nodes of all asked fields */
  nodes: number;
  /** what is read at once: from one position in the indices to the next */
  windows: number[];
  /** what is handed out at once, in the order of the indices */
  blocks: { window: number; from: number; count: number }[];
  indices: ArrayLike<number>;
  columns: { source: FieldSource; from: number; order: Uint32Array | null }[];
  /** room for one window, used again by the next: touching new memory costs more than filling it */
  room: Float64Array;
  /** the window that stands there, -1 for none */
  held: number;
}

/** Smaller than what the C library maps anew for each array (32 MiB): the memory of a block that is done is used again. */
const blockBytes = 16 * 2 ** 20;
const windowBytes = 128 * 2 ** 20;
const pieceBytes = 16 * 2 ** 20;

export function planSnapshots(archive: Archive, reading: Reading, names: string[], indices: ArrayLike<number>, limits: Limits): SnapshotPlan {
  const columns: SnapshotPlan['columns'] = [];
  let nodes = 0;
  for (const name of names) {
    const field = reading.fields.find((one) => one.name === name);
    if (!field) {
      throw new PennyweightError('not-found', `the reading has no field ${name}; it has ${reading.fields.map((one) => one.name).join(', ') || 'none'}.`, { field: name });
    }
    const source = fieldSource(archive, field, limits);
    if (columns.length > 0 && source.snapshots !== columns[0].source.snapshots) {
      throw new PennyweightError(
        'reading-mismatch',
        `${field.path} has ${source.snapshots} snapshots, and ${columns[0].source.field.path} has ${columns[0].source.snapshots}; correct the reading.`,
        { path: field.path, expected: columns[0].source.snapshots, actual: source.snapshots },
      );
    }
    columns.push({ source, from: nodes, order: null });
    nodes += source.axes.nodes;
  }
  if (columns.length === 0) throw new PennyweightError('invalid-input', 'choose at least one field to read.');
  const { snapshots } = columns[0].source;
  const outside = Array.from(indices).find((index) => !Number.isInteger(index) || index < 0 || index >= snapshots);
  if (outside !== undefined) {
    throw new PennyweightError('range-invalid', `there is no snapshot ${outside}: the record has ${snapshots}, counted from 0.`, { index: outside, snapshots });
  }
  const snapshotBytes = nodes * 8;
  if (snapshotBytes > limits.snapshotBytes) {
    throw new PennyweightError('limit-exceeded', `one snapshot of ${names.join(', ')} has ${snapshotBytes} bytes in double precision, and ${limits.snapshotBytes} are the most; choose fewer fields.`, {
      expected: limits.snapshotBytes,
      actual: snapshotBytes,
    });
  }
  for (const column of columns) column.order = nodeOrder(column.source.axes);
  const fitting = (bytes: number) => Math.max(1, Math.floor(bytes / Math.max(1, snapshotBytes)));
  const blockLength = fitting(blockBytes);
  const timeStep = Math.max(...columns.map(({ source }) => source.timeStep));
  const together = columns.some(({ source }) => source.timesTogether);
  const most = together ? fitting(windowBytes) : Math.min(fitting(windowBytes), Math.max(1, Math.floor(blockLength / timeStep)) * timeStep);
  const windows = windowsOf(indices, most, timeStep);
  const longest = windows.reduce((length, from, w) => Math.max(length, from - (windows[w - 1] ?? 0)), 0);
  const blocks: SnapshotPlan['blocks'] = [];
  for (let window = 0; window + 1 < windows.length; window++) {
    for (let from = windows[window]; from < windows[window + 1]; from += blockLength) {
      blocks.push({ window, from, count: Math.min(blockLength, windows[window + 1] - from) });
    }
  }
  return { nodes, windows, blocks, indices, columns, room: new Float64Array(longest * nodes), held: -1 };
}

/** Windows of at most `most` snapshots; each ends where the next chunk begins, when one begins inside. */
function windowsOf(indices: ArrayLike<number>, most: number, timeStep: number): number[] {
  const windows = [0];
  while (windows[windows.length - 1] < indices.length) {
    const from = windows[windows.length - 1];
    let to = Math.min(indices.length, from + most);
    if (timeStep > 1 && to < indices.length) {
      let border = to;
      while (border > from && Math.floor(indices[border] / timeStep) === Math.floor(indices[border - 1] / timeStep)) border--;
      if (border > from) to = border;
    }
    windows.push(to);
  }
  return windows;
}

/** Values of one block: count x nodes, gone with the next call. */
export function readBlock(plan: SnapshotPlan, block: number): { from: number; count: number; values: Float64Array } {
  const known = plan.blocks[block];
  if (!known) throw new PennyweightError('range-invalid', `there is no block ${block} of snapshots: there are ${plan.blocks.length}.`, { block });
  const { window, from, count } = known;
  if (plan.held !== window) {
    plan.held = -1;
    readWindow(plan, window);
    plan.held = window;
  }
  const at = (from - plan.windows[window]) * plan.nodes;
  return { from, count, values: plan.room.subarray(at, at + count * plan.nodes) };
}

function readWindow(plan: SnapshotPlan, window: number): void {
  const from = plan.windows[window];
  const count = plan.windows[window + 1] - from;
  const values = plan.room;
  const places = new Map<number, number[]>();
  for (let p = 0; p < count; p++) {
    const time = plan.indices[from + p];
    const known = places.get(time);
    if (known) known.push(p);
    else places.set(time, [p]);
  }
  const times = [...places.keys()].sort((a, b) => a - b);
  for (const column of plan.columns) {
    const { source } = column;
    const sizes = source.pieceSizes(pieceBytes / source.itemBytes);
    for (const [first, last] of stretches(times, source.timeStep)) {
      const long = Math.max(source.timeStep, sizes.times);
      for (let at = first; at <= last; ) {
        const end = Math.min(last + 1, (Math.floor(at / long) + 1) * long);
        for (const tile of slabs(source.axes.storedSpace, sizes.space, source.axes.storedSpace.map((_, i) => i))) {
          scatter(plan, column, source.read(at, end - at, tile), at, end - at, tile, places, values);
        }
        at = end;
      }
    }
  }
}

/** Ascending times as stretches that are read in one go: neighbours, and those in one chunk. */
function stretches(times: number[], timeStep: number): [number, number][] {
  const found: [number, number][] = [];
  for (const time of times) {
    const latest = found[found.length - 1];
    if (latest && (time - latest[1] === 1 || Math.floor(time / timeStep) === Math.floor(latest[1] / timeStep))) latest[1] = time;
    else found.push([time, time]);
  }
  return found;
}

function scatter(
  plan: SnapshotPlan, { source, from, order }: SnapshotPlan['columns'][number], bytes: Uint8Array, first: number, times: number, tile: Slab,
  places: Map<number, number[]>, values: Float64Array,
): void {
  const { itemBytes, dtype, axes } = source;
  const tileNodes = sizeOf(tile.count);
  const runs = contiguousRuns(tile, axes.storedSpace);
  const ordered = order && new Float64Array(tileNodes);
  for (let t = 0; t < times; t++) {
    for (const p of places.get(first + t) ?? []) {
      const row = p * plan.nodes + from;
      const start = t * tileNodes;
      if (order && ordered) {
        convertInto(ordered, 0, bytes.subarray(start * itemBytes, (start + tileNodes) * itemBytes), dtype, tileNodes);
        for (const { node, at, length } of runs) for (let i = 0; i < length; i++) values[row + order[node + i]] = ordered[at + i];
      } else {
        for (const { node, at, length } of runs) {
          convertInto(values, row + node, bytes.subarray((start + at) * itemBytes, (start + at + length) * itemBytes), dtype, length);
        }
      }
    }
  }
}
