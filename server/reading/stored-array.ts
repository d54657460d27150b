/** The one form in which the pass and the snapshots read an array, whatever its container. */
import type { ElementType } from '#contract/reading.ts';

export interface StoredArray {
  path: string;
  dtype: ElementType;
  itemBytes: number;
  /** sizes in storage order (C order): of a Fortran-ordered NPY array the logical shape reversed */
  shape: number[];
  /** chunk sizes in storage order, null where any part can be read alone */
  chunk: number[] | null;
  /**
   * Elements of the box `start`, `count` in C order, little-endian. The bytes are the array's own buffer: they may be
   * changed, and are gone with the next call.
   */
  readBox(start: number[], count: number[]): Uint8Array;
}

export function sizeOf(shape: readonly number[]): number {
  return shape.reduce((product, size) => product * size, 1);
}
