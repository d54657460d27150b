/** Elements of fixed and extensible arrays: each begins with the chunk's address, all ones where there is none. */
import type { StructureFile } from './structure-cursor.ts';

const pieceBytes = 2 ** 20;

export function visitDefined(
  file: StructureFile,
  position: number,
  firstIndex: number,
  count: number,
  elementBytes: number,
  visit: (index: number) => void,
): void {
  const pieceElements = Math.max(1, Math.floor(pieceBytes / elementBytes));
  for (let from = 0; from < count; from += pieceElements) {
    const many = Math.min(pieceElements, count - from);
    const bytes = file.bytes.read(position + from * elementBytes, many * elementBytes);
    for (let i = 0; i < many; i++) {
      let defined = false;
      for (let byte = 0; byte < file.offsetBytes && !defined; byte++) defined = bytes[i * elementBytes + byte] !== 0xff;
      if (defined) visit(firstIndex + from + i);
    }
  }
}
