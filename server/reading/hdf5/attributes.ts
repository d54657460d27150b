/**
 * Attributes of an object, as far as they are text or numbers. Numbers that JSON cannot hold (NaN, infinities, whole
 * numbers beyond 2^53) become text. References, compounds and what is over the limits are left out: they carry no unit.
 */
import type { Metadata } from 'h5wasm/node';
import type { AttributeValue } from '#contract/reading.ts';
import type { Limits } from '../limits.ts';
import type { Hdf5Library, Hdf5Module } from './library.ts';

/** H5T_class_t of the HDF5 library. */
const classes = { integer: 0, float: 1, text: 3, enumeration: 8 };
const longestText = 4096;

export function attributesOf(library: Hdf5Library, path: string, limits: Limits): Record<string, AttributeValue> {
  const names = library.attempt((module, fileId) => module.get_attribute_names(fileId, path)) ?? [];
  const attributes: Record<string, AttributeValue> = {};
  for (const name of names.slice(0, limits.attributes)) {
    const value = library.attempt((module, fileId) => readAttribute(module, fileId, path, name, limits));
    if (value !== null && value !== undefined) attributes[name] = value;
  }
  return attributes;
}

function readAttribute(module: Hdf5Module, fileId: bigint, path: string, name: string, limits: Limits): AttributeValue | null {
  const metadata = module.get_attribute_metadata(fileId, path, name);
  const count = metadata.total_size;
  const bytes = metadata.size * count;
  if (!metadata.shape || !(bytes > 0) || bytes > limits.attributeBytes) return null;
  const pointer = module._malloc(bytes);
  if (pointer === 0) return null;
  try {
    if (module.get_attribute_data(fileId, path, name, BigInt(pointer)) < 0) return null;
    const data = module.HEAPU8.slice(pointer, pointer + bytes);
    if (metadata.type === classes.text) {
      const texts = metadata.vlen ? textsAt(module, data) : textsIn(data, metadata);
      if (metadata.vlen) module.reclaim_vlen_memory(fileId, path, name, BigInt(pointer));
      return texts.length === 1 ? texts[0] : texts;
    }
    const numbers = numbersIn(data, metadata, count);
    return numbers && (numbers.length === 1 ? numbers[0] : plain(numbers));
  } finally {
    module._free(pointer);
  }
}

/** A list is all numbers or all text. */
function plain(values: (number | string)[]): number[] | string[] {
  return values.every((value) => typeof value === 'number') ? (values as number[]) : values.map(String);
}

function textsIn(data: Uint8Array, { size, cset }: Metadata): string[] {
  const decoder = new TextDecoder(cset === 1 ? 'utf-8' : 'latin1');
  const texts: string[] = [];
  for (let at = 0; at + size <= data.length; at += size) {
    const part = data.subarray(at, at + Math.min(size, longestText));
    const end = part.indexOf(0);
    texts.push(decoder.decode(end < 0 ? part : part.subarray(0, end)).trimEnd());
  }
  return texts;
}

/** Variable-length strings: pointers into the library's memory, which may be null. */
function textsAt(module: Hdf5Module, data: Uint8Array): string[] {
  const heap = module.HEAPU8;
  return Array.from(new Uint32Array(data.buffer, 0, data.length >> 2), (at) => {
    if (at === 0 || at >= heap.length) return '';
    const part = heap.subarray(at, Math.min(at + longestText, heap.length));
    const end = part.indexOf(0);
    return new TextDecoder().decode((end < 0 ? part : part.subarray(0, end)).slice());
  });
}

function numbersIn(data: Uint8Array, { type, size, signed, enum_type: enumeration }: Metadata, count: number): (number | string)[] | null {
  const base = type === classes.enumeration ? enumeration?.type : type;
  const view = new DataView(data.buffer);
  const read: Record<string, (at: number) => number | bigint> = {
    f4: (at) => view.getFloat32(at, true),
    f8: (at) => view.getFloat64(at, true),
    i1: (at) => view.getInt8(at),
    i2: (at) => view.getInt16(at, true),
    i4: (at) => view.getInt32(at, true),
    i8: (at) => view.getBigInt64(at, true),
    u1: (at) => view.getUint8(at),
    u2: (at) => view.getUint16(at, true),
    u4: (at) => view.getUint32(at, true),
    u8: (at) => view.getBigUint64(at, true),
  };
  const kind = base === classes.float ? 'f' : base === classes.integer ? (signed ? 'i' : 'u') : null;
  const one = kind && read[`${kind}${size}`];
  if (!one) return null;
  return Array.from({ length: count }, (_, i) => {
    const value = one(i * size);
    const number = Number(value);
    return Number.isFinite(number) && (typeof value === 'number' || Number.isSafeInteger(number)) ? number : String(value);
  });
}
