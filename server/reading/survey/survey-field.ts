/**
 * One streaming pass over a field. Memory is flat: a piece of the field, its decoded values, and the snapshot before. A
 * snapshot larger than `heldBytes` is gone through tile by tile, each through all times, so that the snapshot before is
 * only ever held for one tile.
 */
import type { FieldSurvey } from '../../engine/survey.ts';
import { convertInto } from '../element.ts';
import type { FieldSource } from '../field-source.ts';
import { nodeOf } from '../reading-axes.ts';
import { contiguousRuns, slabs, type Slab } from '../slab-plan.ts';
import { sizeOf } from '../stored-array.ts';
import { FieldTally, type Values } from './field-tally.ts';
import { fillCandidates } from './fill-candidates.ts';

const heldBytes = 96 * 2 ** 20;
/** Contiguous data pass through the cache; chunks are decompressed whole, so larger pieces waste less at the edges. */
const flatPieceBytes = 4 * 2 ** 20;
const chunkedPieceBytes = 32 * 2 ** 20;

/** Called after each piece with its bytes; may wait, so that messages get out. */
export type Progress = (bytes: number) => Promise<void>;

export async function surveyField(source: FieldSource, unit: string | null, progress: Progress): Promise<FieldSurvey> {
  const { dtype, itemBytes, axes, snapshots, info } = source;
  const { nodes, storedSpace } = axes;
  const single = dtype === 'float32';
  const workBytes = single ? 4 : 8;
  const wideWords = dtype === 'int64' || dtype === 'uint64';
  const tally = new FieldTally(snapshots, fillCandidates(info));
  const { times, space } = source.pieceSizes((info.chunks ? chunkedPieceBytes : flatPieceBytes) / Math.max(workBytes, itemBytes));
  const pieceElements = times * sizeOf(space);

  const decoded = single || dtype === 'float64' ? null : new Float64Array(pieceElements);
  const held = nodes * workBytes <= heldBytes;
  const heldNodes = held ? nodes : sizeOf(space);
  const before = emptyValues(single, heldNodes, wideWords);
  const changed = new Uint8Array(heldNodes);
  let changedNodes = 0;

  function valuesOf(bytes: Uint8Array): Values {
    const count = bytes.length / itemBytes;
    const { buffer, byteOffset } = bytes;
    if (single) return { single, values: new Float32Array(buffer, byteOffset, count), words: new Int32Array(buffer, byteOffset, count) };
    const values = decoded ?? new Float64Array(buffer, byteOffset, count);
    if (decoded) convertInto(decoded, 0, bytes, dtype, count);
    // 64-bit integers may differ where their doubles do not: their own words count.
    const words = wideWords || !decoded ? new Int32Array(buffer, byteOffset, 2 * count) : new Int32Array(decoded.buffer, 0, 2 * count);
    return { single: false, values, words };
  }

  async function addPiece(first: number, many: number, tile: Slab): Promise<void> {
    const now = valuesOf(source.read(first, many, tile));
    const tileNodes = sizeOf(tile.count);
    const runs = contiguousRuns(tile, storedSpace).map((run) => ({ ...run, heldAt: held ? run.node : run.at }));
    for (let t = 0; t < many; t++) {
      const j = first + t;
      for (const { node, at, length, heldAt } of runs) {
        const here = t * tileNodes + at;
        // The first snapshot is compared with itself.
        const [other, otherAt] = t > 0 ? [now, here - tileNodes] : j > 0 ? [before, heldAt] : [now, here];
        tally.add(j, now, here, other, otherAt, length, node, changed, heldAt);
      }
    }
    for (const { at, length, heldAt } of runs) keep(before, heldAt, now, (many - 1) * tileNodes + at, length);
    await progress(many * tileNodes * itemBytes);
  }

  function countChanged(count: number): void {
    for (let i = 0; i < count; i++) changedNodes += changed[i];
    changed.fill(0);
  }

  const axisOrder = storedSpace.map((_, i) => i);
  const tiles = () => slabs(storedSpace, space, axisOrder);
  if (held) {
    for (let first = 0; first < snapshots; first += times) {
      for (const tile of tiles()) await addPiece(first, Math.min(times, snapshots - first), tile);
    }
    countChanged(nodes);
  } else {
    for (const tile of tiles()) {
      for (let first = 0; first < snapshots; first += times) await addPiece(first, Math.min(times, snapshots - first), tile);
      countChanged(sizeOf(tile.count));
    }
  }
  return finish(source, unit, tally, changedNodes);
}

function emptyValues(single: boolean, count: number, wideWords: boolean): Values {
  if (single) {
    const values = new Float32Array(count);
    return { single: true, values, words: new Int32Array(values.buffer) };
  }
  const values = new Float64Array(count);
  return { single: false, values, words: wideWords ? new Int32Array(2 * count) : new Int32Array(values.buffer) };
}

function keep(into: Values, intoAt: number, from: Values, at: number, length: number): void {
  into.values.set(from.values.subarray(at, at + length), intoAt);
  const perValue = into.single ? 1 : 2;
  if (into.words.buffer !== into.values.buffer) into.words.set(from.words.subarray(perValue * at, perValue * (at + length)), perValue * intoAt);
}

function finish(source: FieldSource, unit: string | null, tally: FieldTally, changedNodes: number): FieldSurvey {
  const { field, axes, snapshots, dtype } = source;
  const { nodes } = axes;
  const column = (value: (j: number) => number) => Float64Array.from({ length: snapshots }, (_, j) => value(j));
  const finite = (j: number) => nodes - tally.nonFinite[j];
  const hash = Array.from({ length: snapshots }, (_, j) => tally.hash(j));
  let spread = 0;
  for (let j = 0; j < snapshots; j++) if (finite(j) > 0) spread = Math.max(spread, tally.max[j] - tally.min[j]);
  return {
    path: field.path,
    name: field.name,
    dtype,
    unit,
    snapshots,
    nodes,
    min: column((j) => (finite(j) > 0 ? tally.min[j] : NaN)),
    max: column((j) => (finite(j) > 0 ? tally.max[j] : NaN)),
    mean: column((j) => (finite(j) > 0 ? tally.sum[j] / finite(j) : NaN)),
    norm: column((j) => tally.norm(j)),
    nonFinite: tally.nonFinite,
    firstNonFinite: tally.firstNonFinite.map((node) => nodeOf(axes, node)),
    fill: [...tally.fill.values()].map((entry) => ({ ...entry, firstNode: nodeOf(axes, entry.firstNode) })),
    hash,
    stepChange: column((j) => tally.stepChange(j)),
    changedNodes,
    spread,
    allocated: source.allocated,
    trailingFill: trailingConstant(tally, hash, nodes),
  };
}

/** Snapshots at the end that all hold the one constant of the last; by their hashes, so bit for bit. */
function trailingConstant(tally: FieldTally, hash: string[], nodes: number): number {
  const last = hash.length - 1;
  if (last < 0 || nodes === 0) return 0;
  const constant = tally.nonFinite[last] === 0 ? tally.min[last] === tally.max[last] : tally.nonFinite[last] === nodes;
  if (!constant) return 0;
  let count = 1;
  while (count <= last && hash[last - count] === hash[last]) count++;
  return count;
}
