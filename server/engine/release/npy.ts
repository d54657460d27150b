/** NPY 1.0 as this program writes it. Source: NumPy format description (NEP 1). */

export type NpyType = 'float64' | 'float32' | 'int32' | 'int8';

const descriptors: Record<NpyType, string> = { float64: '<f8', float32: '<f4', int32: '<i4', int8: '|i1' };
export const bytesOf: Record<NpyType, number> = { float64: 8, float32: 4, int32: 4, int8: 1 };

/** Magic, version, header length and header, padded so that the data begin at a multiple of 64 bytes. */
export function npyHeader(type: NpyType, shape: number[], fortran = false): Uint8Array {
  const tuple = shape.length === 1 ? `(${shape[0]},)` : `(${shape.join(', ')})`;
  const text = `{'descr': '${descriptors[type]}', 'fortran_order': ${fortran ? 'True' : 'False'}, 'shape': ${tuple}, }`;
  const length = Math.ceil((10 + text.length + 1) / 64) * 64;
  const bytes = new Uint8Array(length).fill(0x20);
  bytes.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, (length - 10) & 0xff, (length - 10) >> 8]);
  for (let i = 0; i < text.length; i++) bytes[10 + i] = text.charCodeAt(i);
  bytes[length - 1] = 0x0a;
  return bytes;
}

/** A small array as a whole NPY file. `values` in C order, or in Fortran order when said. Little-endian machines only, as all of ours are. */
export function npyFile(values: Float64Array | Float32Array | Int32Array | Int8Array, shape = [values.length], fortran = false): Uint8Array {
  const type: NpyType = values instanceof Float64Array ? 'float64' : values instanceof Float32Array ? 'float32' : values instanceof Int32Array ? 'int32' : 'int8';
  const header = npyHeader(type, shape, fortran);
  const file = new Uint8Array(header.length + values.byteLength);
  file.set(header);
  file.set(new Uint8Array(values.buffer, values.byteOffset, values.byteLength), header.length);
  return file;
}
