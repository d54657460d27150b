/** The small arrays and texts of a build or release, read whole. */
import { join } from 'node:path';
import { readWhole } from '../storage/array-file.ts';

/** Data of an NPY 1.0 of our own making, after its header. */
async function npyData(folder: string, name: string): Promise<ArrayBuffer> {
  const file = await readWhole(join(folder, name)), start = 10 + file.readUInt16LE(8);
  return file.buffer.slice(file.byteOffset + start, file.byteOffset + file.length) as ArrayBuffer;
}

export async function builtDoubles(folder: string, name: 'time.npy' | 'time_weights.npy' | 'space_weights.npy' | 'mean.npy' | 'singular_values.npy'): Promise<Float64Array> {
  return new Float64Array(await npyData(folder, name));
}

/** Codes of the split, one a column (engine/release/build-files.ts). */
export async function builtCodes(folder: string): Promise<Int8Array> {
  return new Int8Array(await npyData(folder, 'split.npy'));
}

export async function builtRunIndex(folder: string): Promise<Int32Array> {
  return new Int32Array(await npyData(folder, 'run_index.npy'));
}

/** What fields.json says of the fields' grids. */
export interface BuiltFields {
  time_unit: string | null;
  fields: { name: string; unit: string | null; axes: { name: string; unit: string | null; count: number; nodes: number[] | null }[] }[];
}

export async function builtFields(folder: string): Promise<BuiltFields> {
  return JSON.parse((await readWhole(join(folder, 'fields.json'))).toString('utf8')) as BuiltFields;
}
