/** Element types: their size, and their conversion from little-endian bytes to double precision. */
import type { ElementType } from '#contract/reading.ts';

/** Bytes of one element; 0 for types that are never read as numbers. */
export const elementBytes: Record<ElementType, number> = {
  float16: 2, float32: 4, float64: 8, int8: 1, int16: 2, int32: 4, int64: 8, uint8: 1, uint16: 2, uint32: 4, uint64: 8,
  bool: 1, complex64: 8, complex128: 16, string: 0, other: 0,
};

const realTypes = new Set<ElementType>([
  'float16', 'float32', 'float64', 'int8', 'int16', 'int32', 'int64', 'uint8', 'uint16', 'uint32', 'uint64', 'bool',
]);

/** Whether the values are single real numbers. */
export function isReal(dtype: ElementType): boolean {
  return realTypes.has(dtype);
}

export function isFloating(dtype: ElementType): boolean {
  return dtype === 'float16' || dtype === 'float32' || dtype === 'float64';
}

/** Reverses the bytes of each `size`-byte part in place. */
export function swapBytes(bytes: Uint8Array, size: number): void {
  const buffer = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (size === 2) buffer.swap16();
  else if (size === 4) buffer.swap32();
  else if (size === 8) buffer.swap64();
}

let halfTable: Float64Array | null = null;

/** All 65,536 values of IEEE 754 binary16 (IEEE 754-2019, 3.4): sign 1 bit, exponent 5, fraction 10. */
function halves(): Float64Array {
  if (halfTable) return halfTable;
  const table = new Float64Array(65536);
  for (let bits = 0; bits < 65536; bits++) {
    const exponent = (bits >> 10) & 31;
    const fraction = bits & 1023;
    const size = exponent === 0 ? fraction * 2 ** -24 : exponent === 31 ? (fraction ? NaN : Infinity) : (1024 + fraction) * 2 ** (exponent - 25);
    table[bits] = bits & 0x8000 ? -size : size;
  }
  halfTable = table;
  return table;
}

/** Views over the bytes, or over an aligned copy where the offset does not fit. */
function aligned(bytes: Uint8Array, size: number): { buffer: ArrayBufferLike; offset: number } {
  if (bytes.byteOffset % size === 0) return { buffer: bytes.buffer, offset: bytes.byteOffset };
  const copy = bytes.slice();
  return { buffer: copy.buffer, offset: 0 };
}

/**
 * `count` little-endian elements at the start of `bytes` as numbers; a view without a copy where the type allows one.
 * 64-bit integers round to the nearest double (hi * 2^32 is exact, the sum rounds once).
 */
export function numbersOf(bytes: Uint8Array, dtype: ElementType, count: number): ArrayLike<number> & Iterable<number> {
  const { buffer, offset } = aligned(bytes, Math.min(8, elementBytes[dtype] || 1));
  switch (dtype) {
    case 'float64': return new Float64Array(buffer, offset, count);
    case 'float32': return new Float32Array(buffer, offset, count);
    case 'int8': return new Int8Array(buffer, offset, count);
    case 'uint8': return new Uint8Array(buffer, offset, count);
    case 'int16': return new Int16Array(buffer, offset, count);
    case 'uint16': return new Uint16Array(buffer, offset, count);
    case 'int32': return new Int32Array(buffer, offset, count);
    case 'uint32': return new Uint32Array(buffer, offset, count);
    default: {
      const values = new Float64Array(count);
      convertInto(values, 0, bytes, dtype, count);
      return values;
    }
  }
}

/** Writes `count` little-endian elements of `bytes` as doubles into `into` from index `at`. */
export function convertInto(into: Float64Array, at: number, bytes: Uint8Array, dtype: ElementType, count: number): void {
  const { buffer, offset } = aligned(bytes, Math.min(8, elementBytes[dtype] || 1));
  switch (dtype) {
    case 'float16': {
      const table = halves();
      const bits = new Uint16Array(buffer, offset, count);
      for (let i = 0; i < count; i++) into[at + i] = table[bits[i]];
      return;
    }
    case 'bool': {
      const flags = new Uint8Array(buffer, offset, count);
      for (let i = 0; i < count; i++) into[at + i] = flags[i] === 0 ? 0 : 1;
      return;
    }
    case 'int64': {
      const low = new Uint32Array(buffer, offset, 2 * count);
      const high = new Int32Array(buffer, offset, 2 * count);
      for (let i = 0; i < count; i++) into[at + i] = high[2 * i + 1] * 4294967296 + low[2 * i];
      return;
    }
    case 'uint64': {
      const words = new Uint32Array(buffer, offset, 2 * count);
      for (let i = 0; i < count; i++) into[at + i] = words[2 * i + 1] * 4294967296 + words[2 * i];
      return;
    }
    case 'float32': {
      // A loop of its own: TypedArray.set between different types is ten times slower (measured, Node.js 20).
      const values = new Float32Array(buffer, offset, count);
      for (let i = 0; i < count; i++) into[at + i] = values[i];
      return;
    }
    case 'complex64':
    case 'complex128':
    case 'string':
    case 'other':
      into.fill(NaN, at, at + count);
      return;
    default: {
      const values = numbersOf(bytes, dtype, count);
      for (let i = 0; i < count; i++) into[at + i] = values[i];
    }
  }
}
