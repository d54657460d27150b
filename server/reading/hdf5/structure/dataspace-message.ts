/** Dataspace message, versions 1 and 2 (HDF5 File Format Specification 3.0, IV.A.2.b). */
import { notUnderstood, StructureCursor, type StructureFile } from './structure-cursor.ts';

export interface Dataspace {
  shape: number[];
  /** largest sizes; null where an axis may grow without limit */
  largest: (number | null)[];
}

const mostAxes = 32;

export function readDataspace(file: StructureFile, body: Uint8Array): Dataspace {
  const cursor = new StructureCursor(file, body);
  const version = cursor.number(1);
  const axes = cursor.number(1);
  const flags = cursor.number(1);
  if ((version !== 1 && version !== 2) || axes > mostAxes) throw notUnderstood('a dataspace');
  cursor.skip(version === 1 ? 5 : 1);
  const shape = Array.from({ length: axes }, () => cursor.length());
  const largest = Array.from({ length: axes }, (_, i) => {
    if ((flags & 1) === 0) return shape[i];
    // All ones is "unlimited"; it is no safe integer, and neither is any other size that matters.
    const size = cursor.number(file.lengthBytes);
    return Number.isSafeInteger(size) && size < 256 ** file.lengthBytes - 1 ? size : null;
  });
  return { shape, largest };
}
