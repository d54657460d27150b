/** Fixed array index of raw data chunks (HDF5 File Format Specification 3.0, VII.C). */
import { visitDefined } from './chunk-elements.ts';
import { cursorAt, notUnderstood, type StructureFile } from './structure-cursor.ts';

const mostElements = 2 ** 28;

export function visitFixedArray(file: StructureFile, header: number, visit: (index: number) => void): void {
  const head = cursorAt(file, header, 8 + file.lengthBytes + file.offsetBytes);
  head.expect('FAHD');
  head.skip(2);
  const elementBytes = head.number(1);
  const pageBits = head.number(1);
  const elements = head.length();
  const block = head.address();
  if (elementBytes < file.offsetBytes || pageBits > 32 || elements > mostElements) throw notUnderstood('an index of chunks');
  if (block === null) return;

  const pageElements = 2 ** pageBits;
  const prefixBytes = 4 + 2 + file.offsetBytes;
  cursorAt(file, block, prefixBytes).expect('FADB');
  if (elements <= pageElements) {
    visitDefined(file, block + prefixBytes, 0, elements, elementBytes, visit);
    return;
  }
  const pages = Math.ceil(elements / pageElements);
  const bitmap = file.bytes.read(block + prefixBytes, Math.ceil(pages / 8));
  let position = block + prefixBytes + bitmap.length + 4;
  for (let page = 0; page < pages; page++) {
    const count = Math.min(pageElements, elements - page * pageElements);
    // Bits run from the highest of each byte (H5VM_bit_get). A page without its bit was never written.
    if (bitmap[page >> 3] & (0x80 >> (page & 7))) visitDefined(file, position, page * pageElements, count, elementBytes, visit);
    position += count * elementBytes + 4;
  }
}
