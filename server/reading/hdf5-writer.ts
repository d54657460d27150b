/** Writes a small HDF5 file from arrays in memory (the demo's archives): contiguous datasets with attributes. */
import h5wasm from 'h5wasm/node';
import { PennyweightError } from '#contract/error.ts';

export interface WrittenArray {
  /** '/name' or '/group/name'; groups are made as needed */
  path: string;
  shape: number[];
  values: Float64Array | Float32Array | Int32Array;
  attributes: Record<string, string | number>;
}

/** Errors: 'file-unreadable' when the file cannot be made at `path`. */
export async function writeHdf5(path: string, arrays: WrittenArray[], attributes: Record<string, string | number>): Promise<void> {
  await h5wasm.ready;
  const file = new h5wasm.File(path, 'w');
  if (file.file_id === -1n) throw new PennyweightError('file-unreadable', `The file ${path} cannot be written: check that its folder exists and may be written to.`, { path });
  try {
    for (const [name, value] of Object.entries(attributes)) file.create_attribute(name, value);
    for (const array of arrays) {
      const dataset = file.create_dataset({ name: array.path.replace(/^\//, ''), data: array.values, shape: array.shape });
      for (const [name, value] of Object.entries(array.attributes)) dataset.create_attribute(name, value);
    }
  } finally {
    file.close();
  }
}
