/** Fill value messages, new and old (HDF5 File Format Specification 3.0, IV.A.2.e and f). */
import { numbersOf, isReal, swapBytes } from '../../element.ts';
import type { StoredType } from './datatype-message.ts';
import { messageTypes, type HeaderMessage } from './object-header.ts';
import { notUnderstood, StructureCursor, type StructureFile } from './structure-cursor.ts';

/** The value that somebody declared; null where it is the library's default, undefined, or no finite number. */
export function readFillValue(file: StructureFile, messages: HeaderMessage[], type: StoredType): number | null {
  const message = messages.find(({ type: kind }) => kind === messageTypes.fillValue) ?? messages.find(({ type: kind }) => kind === messageTypes.oldFillValue);
  if (!message || !isReal(type.dtype)) return null;
  const cursor = new StructureCursor(file, message.body);
  if (message.type === messageTypes.fillValue) {
    const version = cursor.number(1);
    if (version < 1 || version > 3) throw notUnderstood('the version of a fill value');
    if (version === 3) {
      const flags = cursor.number(1);
      if ((flags & 0x20) === 0) return null;
    } else {
      cursor.skip(2);
      const defined = cursor.number(1);
      if (version === 2 && defined === 0) return null;
    }
  }
  const size = cursor.number(4);
  if (size !== type.bytes) return null;
  const bytes = cursor.take(size).slice();
  if (type.byteOrder === 'big') swapBytes(bytes, size);
  const [value] = numbersOf(bytes, type.dtype, 1);
  return Number.isFinite(value) ? value : null;
}
