/**
 * Extensible array index of raw data chunks (HDF5 File Format Specification 3.0, VII.D). Elements 0 .. k-1 stand in the
 * index block; then come data blocks, in super blocks u = 0, 1, ... of 2^floor(u/2) data blocks with
 * 2^ceil(u/2) x (smallest) elements each. The data blocks of the first super blocks hang on the index block itself.
 */
import { visitDefined } from './chunk-elements.ts';
import { cursorAt, notUnderstood, type StructureFile } from './structure-cursor.ts';

const mostElements = 2 ** 28;

export function visitExtensibleArray(file: StructureFile, header: number, visit: (index: number) => void): void {
  const head = cursorAt(file, header, 12 + 6 * file.lengthBytes + file.offsetBytes);
  head.expect('EAHD');
  head.skip(2);
  const elementBytes = head.number(1);
  const indexBits = head.number(1);
  const inIndexBlock = head.number(1);
  const smallest = head.number(1);
  const fewestPointers = head.number(1);
  const pageBits = head.number(1);
  head.skip(4 * file.lengthBytes);
  // Highest index set + 1: what follows was never written.
  const used = head.length();
  head.length();
  const indexBlock = head.address();
  const powers = [smallest, fewestPointers].every((size) => size >= 1 && Number.isInteger(Math.log2(size)));
  if (elementBytes < file.offsetBytes || indexBits > 64 || pageBits > 32 || !powers || used > mostElements) throw notUnderstood('an index of chunks');
  if (indexBlock === null || used === 0) return;

  const prefixBytes = 4 + 2 + file.offsetBytes;
  const blockOffsetBytes = Math.ceil(indexBits / 8);
  const pageElements = 2 ** pageBits;

  /** One data block; paged ones keep a checksum behind their prefix and behind each page. */
  function visitDataBlock(position: number, first: number, elements: number, pageWritten: (page: number) => boolean): void {
    cursorAt(file, position, prefixBytes).expect('EADB');
    let at = position + prefixBytes + blockOffsetBytes;
    if (elements <= pageElements) {
      visitDefined(file, at, first, Math.min(elements, used - first), elementBytes, visit);
      return;
    }
    at += 4;
    for (let page = 0; page * pageElements < elements; page++) {
      const start = first + page * pageElements;
      if (start >= used) return;
      if (pageWritten(page)) visitDefined(file, at, start, Math.min(pageElements, used - start), elementBytes, visit);
      at += pageElements * elementBytes + 4;
    }
  }

  const superBlocks = 1 + indexBits - Math.log2(smallest);
  const direct = 2 * Math.log2(fewestPointers);
  const directBlocks = 2 * (fewestPointers - 1);
  const pointers = Math.max(0, directBlocks) + Math.max(0, superBlocks - direct);
  const index = cursorAt(file, indexBlock, prefixBytes + inIndexBlock * elementBytes + pointers * file.offsetBytes);
  index.expect('EAIB');
  visitDefined(file, indexBlock + prefixBytes, 0, Math.min(inIndexBlock, used), elementBytes, visit);
  index.at = prefixBytes + inIndexBlock * elementBytes;

  let first = inIndexBlock;
  for (let u = 0; u < superBlocks && first < used; u++) {
    const blocks = 2 ** Math.floor(u / 2);
    const elements = 2 ** Math.ceil(u / 2) * smallest;
    if (u < direct) {
      for (let block = 0; block < blocks; block++, first += elements) {
        const position = index.address();
        if (position !== null && first < used) visitDataBlock(position, first, elements, () => true);
      }
      continue;
    }
    const position = index.address();
    if (position === null) {
      first += blocks * elements;
      continue;
    }
    const pages = elements > pageElements ? elements / pageElements : 0;
    const bitmapBytes = Math.ceil(pages / 8);
    const superBlock = cursorAt(file, position, prefixBytes + blockOffsetBytes + blocks * (bitmapBytes + file.offsetBytes));
    superBlock.expect('EASB');
    superBlock.at = prefixBytes + blockOffsetBytes;
    const bitmaps = superBlock.take(blocks * bitmapBytes);
    for (let block = 0; block < blocks; block++, first += elements) {
      const at = superBlock.address();
      if (at === null || first >= used) continue;
      // The bits of all data blocks follow each other without gap, though the room is that of whole bytes a block.
      visitDataBlock(at, first, elements, (page) => {
        const bit = block * pages + page;
        return (bitmaps[bit >> 3] & (0x80 >> (bit & 7))) !== 0;
      });
    }
  }
}
