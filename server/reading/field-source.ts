/**
 * A field as the pass and the snapshots read it: a record of snapshots, whatever the layout. Pieces come time first:
 * [times][nodes of the tile in storage order], little-endian.
 */
import { PennyweightError } from '#contract/error.ts';
import type { ArrayInfo, ElementType, FieldReading } from '#contract/reading.ts';
import { unreadable, type Archive } from './archive.ts';
import { arrayInfo } from './contents-index.ts';
import { elementBytes } from './element.ts';
import type { Limits } from './limits.ts';
import { fieldAxes, type FieldAxes } from './reading-axes.ts';
import { refuseLargeChunks, slabSizes, type Slab } from './slab-plan.ts';
import { isTemplate, stepsOf } from './step-groups.ts';
import { sizeOf, type StoredArray } from './stored-array.ts';
import { timeFirst } from './transpose.ts';

export interface FieldSource {
  field: FieldReading;
  info: ArrayInfo;
  dtype: ElementType;
  itemBytes: number;
  axes: FieldAxes;
  snapshots: number;
  /** file bytes of the whole field when unpacked */
  bytes: number;
  /** elements that the file really holds; null when unknown */
  allocated: number | null;
  /** times and space sizes of one piece within a budget of elements */
  pieceSizes(budget: number): { times: number; space: number[] };
  /** times that are best read together: those of one chunk */
  timeStep: number;
  /** all times of a node lie together, so that reading few of them costs as much as reading all */
  timesTogether: boolean;
  /** elements of one piece; the bytes are gone with the next call */
  read(time: number, times: number, space: Slab): Uint8Array;
}

/** Deflate packs at most about 1,032 to 1 (zlib technical details, "Maximum compression factor"). */
const bestPacking = 1100;
const smallClaim = 2 ** 30;

/**
 * A shape may claim far more than was written; reading the rest would take for ever and give nothing but fill values.
 * Filters that pack better than deflate are believed when at least half of the chunks are there.
 */
function refuseEmptyClaims(archive: Archive, path: string, elements: number, itemBytes: number, allocated: number | null): void {
  const held = archive.contents.files.reduce((sum, file) => sum + file.bytes, 0);
  const bytes = elements * itemBytes;
  if (bytes <= smallClaim || bytes <= held * bestPacking || (allocated !== null && 2 * allocated >= elements)) return;
  throw new PennyweightError(
    'limit-exceeded',
    `the shape of ${path} claims ${bytes} bytes, and the archive has ${held}: most of it was never written, so it was not read; trim it to what was written.`,
    { path, expected: bytes, actual: held },
  );
}

function readableInfo(archive: Archive, path: string): ArrayInfo {
  const info = arrayInfo(archive.contents, path);
  const reason = unreadable(archive.contents, info);
  if (reason) {
    throw new PennyweightError('reading-mismatch', `${path} cannot be read as a field: ${reason}; correct the reading or the archive.`, { path, reason });
  }
  return info;
}

export function fieldSource(archive: Archive, field: FieldReading, limits: Limits): FieldSource {
  return isTemplate(field.path) ? stepSource(archive, field, limits) : arraySource(archive, field, limits);
}

function arraySource(archive: Archive, field: FieldReading, limits: Limits): FieldSource {
  const info = readableInfo(archive, field.path);
  const itemBytes = elementBytes[info.dtype];
  refuseLargeChunks(field.path, info.chunks, itemBytes, limits.chunkBytes);
  const bytes = sizeOf(info.shape) * itemBytes;
  refuseEmptyClaims(archive, field.path, sizeOf(info.shape), itemBytes, info.allocated);
  const axes = fieldAxes(info, field.axes);
  const { timeAxis } = axes;
  const timeless = timeAxis < 0;
  let stored: StoredArray | null = null;
  let turned = new Uint8Array(0);
  const shape = info.order === 'F' ? info.shape.toReversed() : info.shape;
  const before = timeless ? 1 : sizeOf(shape.slice(0, timeAxis));

  function read(time: number, times: number, space: Slab): Uint8Array {
    stored ??= archive.array(field.path);
    const start = timeless ? space.start : space.start.toSpliced(timeAxis, 0, time);
    const count = timeless ? space.count : space.count.toSpliced(timeAxis, 0, times);
    const box = stored.readBox(start, count);
    const ahead = timeless ? 1 : sizeOf(count.slice(0, timeAxis));
    if (ahead === 1 || times === 1) return box;
    if (turned.length < box.length) turned = new Uint8Array(box.length);
    return timeFirst(box, itemBytes, ahead, times, sizeOf(count.slice(timeAxis + 1)), turned);
  }

  return {
    field,
    info,
    dtype: info.dtype,
    itemBytes,
    axes,
    snapshots: axes.snapshots,
    bytes,
    allocated: info.allocated,
    pieceSizes(budget) {
      const sizes = slabSizes(shape, info.chunks, budget);
      return timeless ? { times: 1, space: sizes } : { times: sizes[timeAxis], space: sizes.toSpliced(timeAxis, 1) };
    },
    timeStep: timeless ? 1 : (info.chunks?.[timeAxis] ?? 1),
    timesTogether: before > 1 && (info.chunks === null || info.chunks[timeAxis] > 1),
    read,
  };
}

function stepSource(archive: Archive, field: FieldReading, limits: Limits): FieldSource {
  const steps = stepsOf(archive.contents, field.path);
  if (steps.length === 0) {
    throw new PennyweightError('reading-mismatch', `no group of the archive fits ${field.path}; correct the reading.`, { path: field.path });
  }
  const info = readableInfo(archive, steps[0].info.path);
  const itemBytes = elementBytes[info.dtype];
  for (const step of steps) {
    const { path, shape, dtype, chunks } = readableInfo(archive, step.info.path);
    if (shape.join() !== info.shape.join() || dtype !== info.dtype) {
      throw new PennyweightError(
        'reading-mismatch',
        `${path} is ${dtype} (${shape.join(', ')}), and ${info.path} of the first step is ${info.dtype} (${info.shape.join(', ')}); correct the archive.`,
        { path, expected: info.shape, actual: shape },
      );
    }
    refuseLargeChunks(path, chunks, itemBytes, limits.chunkBytes);
  }
  const elements = sizeOf(info.shape) * steps.length;
  const bytes = elements * itemBytes;
  const allocated = steps.reduce<number | null>((sum, step) => (sum === null || step.info.allocated === null ? null : sum + step.info.allocated), 0);
  refuseEmptyClaims(archive, field.path, elements, itemBytes, allocated);
  const axes = fieldAxes(info, field.axes);
  return {
    field,
    info,
    dtype: info.dtype,
    itemBytes,
    axes,
    snapshots: steps.length,
    bytes,
    allocated,
    pieceSizes: (budget) => ({ times: 1, space: slabSizes(info.shape, info.chunks, budget) }),
    timeStep: 1,
    timesTogether: false,
    read: (time, _times, space) => archive.array(steps[time].info.path).readBox(space.start, space.count),
  };
}
