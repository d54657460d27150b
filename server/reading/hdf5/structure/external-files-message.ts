/** External data files message and the local heap with their names (HDF5 File Format Specification 3.0, IV.A.2.h, III.D). */
import { cursorAt, cursorUpTo, notUnderstood, StructureCursor, type StructureFile } from './structure-cursor.ts';

const mostNames = 16;
const longestName = 1024;

/** Names of the files outside that hold the data; they are listed and never opened. */
export function readExternalFiles(file: StructureFile, body: Uint8Array): string[] {
  const cursor = new StructureCursor(file, body);
  if (cursor.number(1) !== 1) throw notUnderstood('the version of a list of external files');
  cursor.skip(3 + 2);
  const used = Math.min(cursor.number(2), mostNames);
  const heapAt = cursor.address();
  if (heapAt === null) throw notUnderstood('the names of external files');
  const heap = cursorAt(file, heapAt, 8 + 2 * file.lengthBytes + file.offsetBytes);
  heap.expect('HEAP');
  heap.skip(4);
  heap.length();
  heap.length();
  const names = heap.address();
  if (names === null) throw notUnderstood('the names of external files');
  return Array.from({ length: used }, () => {
    const nameAt = cursor.length();
    cursor.length();
    cursor.length();
    const bytes = cursorUpTo(file, names + nameAt, longestName).bytes;
    const end = bytes.indexOf(0);
    return new TextDecoder().decode(bytes.subarray(0, end < 0 ? bytes.length : end));
  });
}
