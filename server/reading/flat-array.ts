/** Arrays whose elements lie in one piece of the file: NPY, and contiguous HDF5 data. Read straight from the file. */
import type { ElementType } from '#contract/reading.ts';
import { swapBytes } from './element.ts';
import type { FileBytes } from './file-bytes.ts';
import { eachRun } from './slab-plan.ts';
import { sizeOf, type StoredArray } from './stored-array.ts';

export interface FlatPlace {
  path: string;
  file: FileBytes;
  /** position of the first element */
  offset: number;
  /** storage order */
  shape: number[];
  dtype: ElementType;
  itemBytes: number;
  bigEndian: boolean;
}

/**
 * Data sieving: runs that lie close together are read in one go, gaps and all (R. Thakur, W. Gropp, E. Lusk, "Data sieving
 * and collective I/O in ROMIO", Frontiers '99). A system call costs about what copying 16 KiB does.
 */
const widestGap = 16_384;
const longestSieve = 4 * 2 ** 20;

/** Bytes of one number, which byte order turns round: half of a complex value. */
function swapUnit(dtype: ElementType, itemBytes: number): number {
  return dtype === 'complex64' || dtype === 'complex128' ? itemBytes / 2 : itemBytes;
}

export function flatArray({ path, file, offset, shape, dtype, itemBytes, bigEndian }: FlatPlace): StoredArray {
  let buffer = new Uint8Array(0);
  let sieve = new Uint8Array(0);

  /** Runs of `runBytes` at `positions` of the file, one behind the other into `into`. */
  function fillRuns(into: Uint8Array, positions: number[], runBytes: number): void {
    const [first] = positions;
    const span = positions[positions.length - 1] + runBytes - first;
    if (span === into.length) {
      file.fill(into, first);
      return;
    }
    if (sieve.length < span) sieve = new Uint8Array(span);
    file.fill(sieve.subarray(0, span), first);
    positions.forEach((position, i) => into.set(sieve.subarray(position - first, position - first + runBytes), i * runBytes));
  }

  function readBox(start: number[], count: number[]): Uint8Array {
    const bytes = sizeOf(count) * itemBytes;
    if (buffer.length < bytes) buffer = new Uint8Array(bytes);
    const box = buffer.subarray(0, bytes);
    let batch: number[] = [];
    let runBytes = 0;
    let filled = 0;
    const fillBatch = () => {
      const length = batch.length * runBytes;
      if (length > 0) fillRuns(box.subarray(filled, filled + length), batch, runBytes);
      filled += length;
      batch = [];
    };
    eachRun({ start, count }, shape, (element, _at, length) => {
      runBytes = length * itemBytes;
      const position = offset + element * itemBytes;
      if (batch.length > 0) {
        const gap = position - batch[batch.length - 1] - runBytes;
        if (gap > widestGap || position + runBytes - batch[0] > longestSieve) fillBatch();
      }
      batch.push(position);
    });
    fillBatch();
    if (bigEndian) swapBytes(box, swapUnit(dtype, itemBytes));
    return box;
  }

  return { path, dtype, itemBytes, shape, chunk: null, readBox };
}
