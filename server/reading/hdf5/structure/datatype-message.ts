/**
 * Datatype message (HDF5 File Format Specification 3.0, IV.A.2.d) -> element type. Only exact IEEE 754 formats and whole
 * bytes of two's complement are named; bfloat16, long double, 24-bit integers and the like are 'other', never misread.
 */
import type { ElementType } from '#contract/reading.ts';
import { StructureCursor, type StructureFile } from './structure-cursor.ts';

export interface StoredType {
  dtype: ElementType;
  byteOrder: 'little' | 'big' | 'none';
  bytes: number;
}

/** Exponent location and size, fraction location and size, bias. */
const ieee: Record<number, { dtype: ElementType; form: string }> = {
  2: { dtype: 'float16', form: '10,5,0,10,15' },
  4: { dtype: 'float32', form: '23,8,0,23,127' },
  8: { dtype: 'float64', form: '52,11,0,52,1023' },
};
const signedTypes: Record<number, ElementType> = { 1: 'int8', 2: 'int16', 4: 'int32', 8: 'int64' };
const unsignedTypes: Record<number, ElementType> = { 1: 'uint8', 2: 'uint16', 4: 'uint32', 8: 'uint64' };
const complexParts = ['r,i', 'real,imag', 're,im'];

const other = (bytes: number): StoredType => ({ dtype: 'other', byteOrder: 'none', bytes });

export function readStoredType(file: StructureFile, body: Uint8Array): StoredType {
  return parseType(new StructureCursor(file, body), 0);
}

function parseType(cursor: StructureCursor, depth: number): StoredType {
  const first = cursor.number(1);
  const version = first >> 4;
  const bits = cursor.number(3);
  const bytes = cursor.number(4);
  const byteOrder = bytes === 1 ? 'none' : bits & 1 ? 'big' : 'little';
  switch (first & 15) {
    case 0:
    case 4: {
      const offset = cursor.number(2);
      const precision = cursor.number(2);
      const types = (first & 15) === 0 && bits & 8 ? signedTypes : unsignedTypes;
      const dtype = types[bytes];
      return dtype && offset === 0 && precision === 8 * bytes ? { dtype, byteOrder, bytes } : other(bytes);
    }
    case 1: {
      const offset = cursor.number(2);
      const precision = cursor.number(2);
      const form = [cursor.number(1), cursor.number(1), cursor.number(1), cursor.number(1), cursor.number(4)].join();
      const type = ieee[bytes];
      const vax = (bits & 0x40) !== 0;
      const signAt = (bits >> 8) & 255;
      const exact = type?.form === form && offset === 0 && precision === 8 * bytes && !vax && signAt === precision - 1;
      return exact ? { dtype: type.dtype, byteOrder, bytes } : other(bytes);
    }
    case 3:
      return { dtype: 'string', byteOrder: 'none', bytes };
    case 6:
      return depth === 0 ? parseComplex(cursor, version, bits & 0xffff, bytes) : other(bytes);
    case 8:
      return depth === 0 ? parseEnumeration(cursor, version, bits & 0xffff, bytes) : other(bytes);
    case 9:
      // Bits 0 to 3 of a variable-length type: 1 is a string.
      return { dtype: (bits & 15) === 1 ? 'string' : 'other', byteOrder: 'none', bytes };
    default:
      return other(bytes);
  }
}

/** Null-terminated; padded to a multiple of 8 before version 3. */
function parseName(cursor: StructureCursor, version: number): string {
  let name = '';
  const start = cursor.at;
  for (let letter = cursor.number(1); letter !== 0; letter = cursor.number(1)) name += String.fromCharCode(letter);
  if (version < 3) cursor.skip((8 - ((cursor.at - start) % 8)) % 8);
  return name;
}

/** A compound of exactly two equal floating-point numbers without gap, named as h5py and others name a complex number. */
function parseComplex(cursor: StructureCursor, version: number, members: number, bytes: number): StoredType {
  if (members !== 2) return other(bytes);
  const names: string[] = [];
  const places: number[] = [];
  const types: StoredType[] = [];
  for (let i = 0; i < 2; i++) {
    names.push(parseName(cursor, version).toLowerCase());
    places.push(cursor.number(version < 3 ? 4 : Math.max(1, Math.ceil(Math.log2(bytes + 1) / 8))));
    if (version === 1) {
      if (cursor.number(1) !== 0) return other(bytes);
      cursor.skip(3 + 4 + 4 + 16);
    }
    types.push(parseType(cursor, 1));
  }
  const [a, b] = types;
  const half = bytes / 2;
  const fits = complexParts.includes(names.join()) && places[0] === 0 && places[1] === half && a.bytes === half && a.dtype === b.dtype && a.byteOrder === b.byteOrder;
  if (!fits || (a.dtype !== 'float32' && a.dtype !== 'float64')) return other(bytes);
  return { dtype: a.dtype === 'float32' ? 'complex64' : 'complex128', byteOrder: a.byteOrder, bytes };
}

/** An enumeration reads as its whole numbers; {FALSE, TRUE} on one byte is h5py's bool. */
function parseEnumeration(cursor: StructureCursor, version: number, members: number, bytes: number): StoredType {
  const base = parseType(cursor, 1);
  if (members !== 2 || bytes !== 1 || base.dtype === 'other') return base;
  const names = [parseName(cursor, version), parseName(cursor, version)];
  const values = cursor.take(2);
  const truth = names.join() === 'FALSE,TRUE' && values[0] === 0 && values[1] === 1;
  return truth ? { ...base, dtype: 'bool' } : base;
}
