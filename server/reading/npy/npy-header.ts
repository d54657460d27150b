/**
 * Header of an NPY file, format versions 1.0, 2.0 and 3.0 (NEP 1 and numpy/lib/format.py): magic \x93NUMPY, version,
 * header length (2 bytes in 1.0, 4 in 2.0 and 3.0, little-endian), then a Python dict with exactly the keys descr,
 * fortran_order and shape; Latin-1 text, UTF-8 in 3.0. The array follows at once, in C or Fortran order.
 */
import { PennyweightError } from '#contract/error.ts';
import type { ElementType } from '#contract/reading.ts';
import type { FileBytes } from '../file-bytes.ts';
import { parseLiteral } from './python-literal.ts';

export interface NpyHeader {
  dtype: ElementType;
  byteOrder: 'little' | 'big' | 'none';
  itemBytes: number;
  fortran: boolean;
  shape: number[];
  /** position of the first element */
  offset: number;
}

/** NumPy's own writer stays below 10,000 (numpy.lib.format._MAX_HEADER_SIZE). */
const longestHeader = 65_536;
const mostAxes = 32;

const types: Record<string, ElementType> = {
  f2: 'float16', f4: 'float32', f8: 'float64', i1: 'int8', i2: 'int16', i4: 'int32', i8: 'int64',
  u1: 'uint8', u2: 'uint16', u4: 'uint32', u8: 'uint64', b1: 'bool', c8: 'complex64', c16: 'complex128',
};

function parseType(descr: string, refuse: (what: string, next: string) => PennyweightError): Pick<NpyHeader, 'dtype' | 'byteOrder' | 'itemBytes'> {
  const match = /^([<>|=]?)([a-zA-Z])(\d{1,9})?/.exec(descr);
  if (!match) throw refuse(`has the element type ${JSON.stringify(descr)}, which NumPy does not write`, 'save it again with numpy.save');
  const [whole, order, kind, digits] = match;
  if (kind === 'O') throw refuse('holds pickled Python objects, which are never loaded', 'save a plain numeric array instead');
  const size = Number(digits ?? '0');
  const dtype: ElementType = whole === descr ? (types[kind + size] ?? (kind === 'U' || kind === 'S' ? 'string' : 'other')) : 'other';
  const itemBytes = kind === 'U' ? 4 * size : size;
  const many = itemBytes > 1 && order !== '|' && dtype !== 'string';
  return { dtype, itemBytes, byteOrder: many ? (order === '>' ? 'big' : 'little') : 'none' };
}

export function readNpyHeader(file: FileBytes): NpyHeader {
  const refuse = (what: string, next: string, details: Record<string, unknown> = {}) =>
    new PennyweightError('file-unreadable', `${file.name} ${what}; ${next}.`, { file: file.name, ...details });
  const cutOff = (expected: number) =>
    refuse(`is cut off: ${expected} bytes are expected and ${file.size} are there`, 'upload it again', { expected, actual: file.size });

  if (file.size < 10) throw cutOff(10);
  const head = file.read(0, Math.min(12, file.size));
  const [major, minor] = [head[6], head[7]];
  if (major < 1 || major > 3 || minor !== 0) {
    throw refuse(`is NPY of version ${major}.${minor}, and 1.0, 2.0 and 3.0 are read`, 'save it again with numpy.save');
  }
  const lengthBytes = major === 1 ? 2 : 4;
  if (file.size < 8 + lengthBytes) throw cutOff(8 + lengthBytes);
  const view = new DataView(head.buffer);
  const length = major === 1 ? view.getUint16(8, true) : view.getUint32(8, true);
  const offset = 8 + lengthBytes + length;
  if (length > longestHeader) {
    throw refuse(`claims a header of ${length} bytes, and ${longestHeader} is the most that is read`, 'save it again with numpy.save');
  }
  if (file.size < offset) throw cutOff(offset);
  const text = new TextDecoder(major === 3 ? 'utf-8' : 'latin1').decode(file.read(8 + lengthBytes, length));

  const header = parseLiteral(text);
  if (!(header instanceof Map) || [...header.keys()].sort().join() !== 'descr,fortran_order,shape') {
    throw refuse('has a header without exactly descr, fortran_order and shape', 'save it again with numpy.save');
  }
  const descr = header.get('descr');
  const fortran = header.get('fortran_order');
  const shape = header.get('shape');
  if (Array.isArray(descr)) throw refuse('holds records with named parts', 'save each part as an array of its own');
  if (typeof descr !== 'string' || typeof fortran !== 'boolean' || !Array.isArray(shape)) {
    throw refuse('has a header with values of the wrong kind', 'save it again with numpy.save');
  }
  if (shape.length > mostAxes || !shape.every((size) => typeof size === 'number' && Number.isSafeInteger(size) && size >= 0)) {
    throw refuse(`has the impossible shape (${shape.join(', ')})`, 'save it again with numpy.save');
  }
  const type = parseType(descr, refuse);
  const dimensions = shape as number[];
  // Claimed sizes are compared with the file before anything is allocated; BigInt, as products of claims overflow.
  const claimed = dimensions.reduce((product, size) => product * BigInt(size), BigInt(type.itemBytes)) + BigInt(offset);
  if (claimed > BigInt(file.size)) {
    throw refuse(
      `is cut off: its shape (${dimensions.join(', ')}) of ${descr} needs ${claimed} bytes and ${file.size} are there`,
      'upload it again',
      { expected: Number(claimed), actual: file.size },
    );
  }
  return { ...type, fortran, shape: dimensions, offset };
}
