/**
 * A cursor over a piece of an HDF5 file's own structures. All numbers are little-endian; addresses and lengths have the
 * sizes that the superblock declares; all ones is "undefined". Spec: HDF5 File Format Specification 3.0 (of HDF5 1.10+).
 */
import { PennyweightError } from '#contract/error.ts';
import type { FileBytes } from '../../file-bytes.ts';

/** The file, and what its superblock says of sizes and positions. */
export interface StructureFile {
  bytes: FileBytes;
  /** added to every address */
  base: number;
  offsetBytes: number;
  lengthBytes: number;
}

/** A structure that is damaged or not understood; what depends on it is then unknown, never guessed. */
export function notUnderstood(what: string): PennyweightError {
  return new PennyweightError('file-unreadable', `the file's structure is not understood: ${what}.`);
}

export class StructureCursor {
  readonly view: DataView;
  readonly bytes: Uint8Array;
  readonly file: StructureFile;
  at = 0;

  constructor(file: StructureFile, bytes: Uint8Array) {
    this.file = file;
    this.bytes = bytes;
    this.view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  }

  get left(): number {
    return this.bytes.length - this.at;
  }

  skip(count: number): void {
    this.take(count);
  }

  take(count: number): Uint8Array {
    if (count < 0 || count > this.left) throw notUnderstood(`${count} bytes are expected where ${this.left} are left`);
    this.at += count;
    return this.bytes.subarray(this.at - count, this.at);
  }

  /** Unsigned number of 1 to 8 bytes; beyond 2^53 it is no size or place in any real file. */
  number(count: number): number {
    const part = this.take(count);
    let value = 0;
    for (let i = count - 1; i >= 0; i--) value = value * 256 + part[i];
    return value;
  }

  length(): number {
    const value = this.number(this.file.lengthBytes);
    if (!Number.isSafeInteger(value)) throw notUnderstood(`a length of ${value} bytes`);
    return value;
  }

  /** Position in the file, or null for the undefined address. */
  address(): number | null {
    const part = this.take(this.file.offsetBytes);
    if (part.every((byte) => byte === 0xff)) return null;
    let value = 0;
    for (let i = part.length - 1; i >= 0; i--) value = value * 256 + part[i];
    if (value + this.file.base >= this.file.bytes.size) throw notUnderstood(`the address ${value} lies outside of the file`);
    return value + this.file.base;
  }

  expect(signature: string): void {
    const found = String.fromCharCode(...this.take(signature.length));
    if (found !== signature) throw notUnderstood(`${JSON.stringify(found)} stands where ${signature} is expected`);
  }
}

export function cursorAt(file: StructureFile, position: number, length: number): StructureCursor {
  return new StructureCursor(file, file.bytes.read(position, length));
}

/** As cursorAt, but shorter where the file ends before. */
export function cursorUpTo(file: StructureFile, position: number, length: number): StructureCursor {
  return cursorAt(file, position, Math.max(0, Math.min(length, file.bytes.size - position)));
}
