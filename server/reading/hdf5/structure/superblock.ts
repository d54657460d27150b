/** Superblock versions 0 to 3 (HDF5 File Format Specification 3.0, II.A). */
import type { FileBytes } from '../../file-bytes.ts';
import { cursorUpTo, notUnderstood, type StructureFile } from './structure-cursor.ts';

export interface Superblock extends StructureFile {
  version: number;
  /** position of the superblock in the file */
  position: number;
  /** bytes from the superblock's start to its end */
  length: number;
  /** where the flags stand, and how many bytes they have */
  flagsAt: number;
  flagsBytes: number;
  consistencyFlags: number;
  /** bytes that the file must have at least */
  endOfFile: number | null;
}

/** Bit 0: opened for writing; bit 2: by a single writer with readers beside it. Written by the library from version 3 on. */
const writing = 0b101;

export function readSuperblock(bytes: FileBytes, position: number): Superblock {
  const unsized = { bytes, base: position, offsetBytes: 8, lengthBytes: 8 };
  const cursor = cursorUpTo(unsized, position, 128);
  cursor.skip(8);
  const version = cursor.number(1);
  if (version > 3) throw notUnderstood(`superblock version ${version}`);
  if (version < 2) cursor.skip(4);
  const offsetBytes = cursor.number(1);
  const lengthBytes = cursor.number(1);
  for (const size of [offsetBytes, lengthBytes]) {
    if (size !== 2 && size !== 4 && size !== 8) throw notUnderstood(`addresses of ${size} bytes`);
  }
  if (version < 2) cursor.skip(1 + 4);
  const flagsAt = cursor.at;
  const flagsBytes = version < 2 ? 4 : 1;
  const consistencyFlags = cursor.number(flagsBytes);
  if (version === 1) cursor.skip(4);
  // The base address is where the superblock was found: a file that got a prefix afterwards is still readable.
  const declaredBase = cursor.number(offsetBytes);
  cursor.skip(offsetBytes);
  const end = cursor.number(offsetBytes);
  cursor.skip(version < 2 ? offsetBytes : offsetBytes + 4);
  const endOfFile = Number.isSafeInteger(end) && declaredBase <= end ? end - declaredBase + position : null;
  return { bytes, base: position, offsetBytes, lengthBytes, version, position, length: cursor.at, flagsAt, flagsBytes, consistencyFlags, endOfFile };
}

export function isOpenForWriting(superblock: Superblock): boolean {
  return superblock.version === 3 ? (superblock.consistencyFlags & writing) !== 0 : (superblock.consistencyFlags & 1) !== 0;
}
