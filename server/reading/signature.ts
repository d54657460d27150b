/**
 * The container's format by its first bytes; a file's name decides nothing.
 * HDF5: format signature at byte 0, 512, 1024, 2048, ... (HDF5 File Format Specification 3.0, II.A).
 * NPY: \x93NUMPY (numpy/lib/format.py). ZIP: local header, end of central directory (APPNOTE 6.3.10, 4.3.7, 4.3.16).
 */
import { PennyweightError } from '#contract/error.ts';
import type { FileBytes } from './file-bytes.ts';

export type Signature = { format: 'hdf5'; offset: number } | { format: 'npy' };

export const hdf5Signature = Uint8Array.of(0x89, 0x48, 0x44, 0x46, 0x0d, 0x0a, 0x1a, 0x0a);

function begins(bytes: Uint8Array, with_: ArrayLike<number>, at = 0): boolean {
  if (bytes.length < at + with_.length) return false;
  for (let i = 0; i < with_.length; i++) if (bytes[at + i] !== with_[i]) return false;
  return true;
}

const ascii = (text: string) => Uint8Array.from(text, (letter) => letter.charCodeAt(0));

/** Formats that people hand in by mistake, and what to do about each. */
const strangers: { bytes: ArrayLike<number>; at?: number; found: string; next: string }[] = [
  { bytes: ascii('PK\x03\x04'), found: 'a ZIP or NPZ container', next: 'these are not read yet: unpack it and hand in the files inside' },
  { bytes: ascii('PK\x05\x06'), found: 'an empty ZIP container', next: 'hand in the file that the solver wrote' },
  { bytes: ascii('CDF'), found: 'a classic netCDF file', next: 'convert it to netCDF-4' },
  { bytes: ascii('MATLAB 5.0'), found: 'a MATLAB 5 file', next: 'save it as version 7.3' },
  { bytes: [0x1f, 0x8b], found: 'compressed by gzip', next: 'unpack it first' },
  { bytes: ascii('BZh'), found: 'compressed by bzip2', next: 'unpack it first' },
  { bytes: [0xfd, 0x37, 0x7a, 0x58, 0x5a], found: 'compressed by xz', next: 'unpack it first' },
  { bytes: [0x28, 0xb5, 0x2f, 0xfd], found: 'compressed by Zstandard', next: 'unpack it first' },
  { bytes: ascii('ustar'), at: 257, found: 'a tar container', next: 'unpack it first' },
  { bytes: ascii('%PDF'), found: 'a PDF document', next: 'hand in the file that the solver wrote' },
  { bytes: [0x0e, 0x03, 0x13, 0x01], found: 'an HDF4 file', next: 'convert it to HDF5' },
];

/** Pickle protocols 2 to 5 begin with PROTO (Python, pickletools). */
function isPickle(head: Uint8Array): boolean {
  return head[0] === 0x80 && head[1] >= 2 && head[1] <= 5;
}

function isText(head: Uint8Array): boolean {
  let text: string;
  try {
    text = new TextDecoder('utf-8', { fatal: true }).decode(head, { stream: true });
  } catch {
    return false;
  }
  for (const letter of text) if (letter < ' ' && !'\t\r\n\f\v'.includes(letter)) return false;
  return true;
}

function describe(head: Uint8Array): { found: string; next: string } {
  const known = strangers.find(({ bytes, at }) => begins(head, bytes, at));
  if (known) return known;
  if (isPickle(head)) return { found: 'a pickled Python object, which is never loaded', next: 'save the arrays with numpy.save or h5py' };
  if (isText(head)) return { found: 'text', next: 'hand in the HDF5 or NPY file that the solver wrote' };
  const first = Array.from(head.subarray(0, 4), (byte) => byte.toString(16).padStart(2, '0')).join(' ');
  return { found: `of no known format (it begins with the bytes ${first})`, next: 'hand in an HDF5 or NPY file' };
}

/** Decides the format of an opened file, or refuses it and says what it is. */
export function signatureOf(file: FileBytes): Signature {
  if (file.size === 0) {
    throw new PennyweightError('file-unreadable', `${file.name} is empty; upload it again.`, { file: file.name, actual: 0 });
  }
  const head = file.read(0, Math.min(file.size, 512));
  if (begins(head, ascii('\x93NUMPY'))) return { format: 'npy' };
  for (let offset = 0; offset + 8 <= file.size; offset = offset === 0 ? 512 : offset * 2) {
    if (begins(offset === 0 ? head : file.read(offset, 8), hdf5Signature)) return { format: 'hdf5', offset };
  }
  const { found, next } = describe(head);
  throw new PennyweightError('unsupported-format', `${file.name} is ${found}; ${next}.`, { file: file.name, found });
}
