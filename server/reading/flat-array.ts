/** Arrays whose elements lie in one piece of the file: NPY, and contiguous HDF5 data. Read straight from the file. */
import type { ElementType } from '#contract/reading.ts';
import { swapBytes } from './element.ts';
import type { FileBytes } from './file-bytes.ts';
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

/** Bytes of one number, which byte order turns round: half of a complex value. */
function swapUnit(dtype: ElementType, itemBytes: number): number {
  return dtype === 'complex64' || dtype === 'complex128' ? itemBytes / 2 : itemBytes;
}

export function flatArray({ path, file, offset, shape, dtype, itemBytes, bigEndian }: FlatPlace): StoredArray {
  let buffer = new Uint8Array(0);

  function readBox(start: number[], count: number[]): Uint8Array {
    const bytes = sizeOf(count) * itemBytes;
    if (buffer.length < bytes) buffer = new Uint8Array(bytes);
    const box = buffer.subarray(0, bytes);
    if (bytes === 0) return box;

    // Trailing axes that are taken whole, and the next one, lie in one run.
    let axis = shape.length;
    let run = 1;
    while (axis > 0) {
      axis--;
      run *= count[axis];
      if (count[axis] !== shape[axis]) break;
    }
    const strides = new Array<number>(shape.length).fill(1);
    for (let i = shape.length - 2; i >= 0; i--) strides[i] = strides[i + 1] * shape[i + 1];

    const index = start.slice();
    const runBytes = run * itemBytes;
    for (let at = 0; at < bytes; at += runBytes) {
      let element = 0;
      for (let i = 0; i < shape.length; i++) element += index[i] * strides[i];
      file.fill(box.subarray(at, at + runBytes), offset + element * itemBytes);
      for (let i = axis - 1; i >= 0; i--) {
        if (++index[i] < start[i] + count[i]) break;
        index[i] = start[i];
      }
    }
    if (bigEndian) swapBytes(box, swapUnit(dtype, itemBytes));
    return box;
  }

  return { path, dtype, itemBytes, shape, chunk: null, readBox };
}
