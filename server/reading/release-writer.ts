/**
 * Writes release.h5: X as [m, n] (one snapshot a row, the transpose of matrix.npy) in chunks of whole snapshots, grown block by block so
 * that memory stays bounded, and the small arrays beside it. Only our own numbers are written: no reading process is needed.
 */
import h5wasm, { type Dataset } from 'h5wasm/node';
import { PennyweightError } from '#contract/error.ts';
import type { WrittenArray } from './hdf5-writer.ts';

export interface ReleaseMatrix {
  rows: number;
  columns: number;
  type: 'float32' | 'float64';
  /** columns of the matrix, a few at a time, ascending and complete */
  blocks: AsyncIterable<{ first: number; columns: number; values: Float64Array }>;
}

/** HDF5's chunks are limited to 4 GiB; 4 MiB suits reading a snapshot at a time. */
const chunkValues = 2 ** 19;

export async function writeReleaseHdf5(path: string, matrix: ReleaseMatrix, arrays: WrittenArray[], attributes: Record<string, string | number>): Promise<void> {
  await h5wasm.ready;
  const file = new h5wasm.File(path, 'w', { track_order: true });
  if (file.file_id === -1n) throw new PennyweightError('internal', `The file ${path} cannot be written.`, { path });
  const { rows, columns, type } = matrix;
  try {
    for (const [name, value] of Object.entries(attributes)) file.create_attribute(name, value);
    let dataset: Dataset | null = null;
    for await (const block of matrix.blocks) {
      const values = type === 'float32' ? Float32Array.from(block.values) : block.values;
      if (!dataset) {
        dataset = file.create_dataset({ name: 'X', data: values, shape: [block.columns, rows], maxshape: [columns, rows], chunks: [Math.max(1, Math.min(block.columns, Math.floor(chunkValues / rows))), Math.min(rows, chunkValues)] });
        dataset.create_attribute('axes', 'snapshot, row');
      } else {
        dataset.resize([block.first + block.columns, rows]);
        // Not followed by refresh(): in h5wasm 0.10.3 that keeps the file open for ever, closed or not.
        dataset.write_slice([[block.first, block.first + block.columns], [0, rows]], values);
      }
    }
    const groups = new Set<string>();
    for (const array of arrays) {
      makeGroups(file, array.path, groups);
      const written = file.create_dataset({ name: array.path.replace(/^\//, ''), data: array.values, shape: array.shape });
      for (const [name, value] of Object.entries(array.attributes)) written.create_attribute(name, value);
    }
  } finally {
    file.close();
  }
}

/** HDF5 makes no groups by itself. */
function makeGroups(file: { create_group(name: string): unknown }, path: string, made: Set<string>): void {
  const parts = path.replace(/^\//, '').split('/').slice(0, -1);
  for (let k = 1; k <= parts.length; k++) {
    const group = parts.slice(0, k).join('/');
    if (!made.has(group)) file.create_group(group);
    made.add(group);
  }
}
