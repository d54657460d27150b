/**
 * NPY files of doubles, version 1.0, little-endian (NEP 1, numpy/lib/format.py): written whole, or as an n x m matrix in
 * Fortran order whose parts of columns come in any order.
 */
import { closeSync, ftruncateSync, openSync, writeSync } from 'node:fs';

/** The array begins at a multiple of 64 bytes (numpy.lib.format.ARRAY_ALIGN). */
const alignment = 64;

function header(shape: number[]): Buffer {
  const tuple = shape.length === 1 ? `(${shape[0]},)` : `(${shape.join(', ')})`;
  const dict = `{'descr': '<f8', 'fortran_order': ${shape.length > 1 ? 'True' : 'False'}, 'shape': ${tuple}, }`;
  const prefix = 10;
  const length = Math.ceil((prefix + dict.length + 1) / alignment) * alignment - prefix;
  const head = Buffer.alloc(prefix + length, ' ');
  head.write('\x93NUMPY\x01\x00', 0, 'latin1');
  head.writeUInt16LE(length, 8);
  head.write(dict, prefix, 'latin1');
  head.write('\n', prefix + length - 1);
  return head;
}

const bytesOf = (values: Float64Array) => Buffer.from(values.buffer, values.byteOffset, values.byteLength);

export function writeVector(path: string, values: Float64Array): void {
  const descriptor = openSync(path, 'w');
  try {
    writeSync(descriptor, header([values.length]));
    writeSync(descriptor, bytesOf(values));
  } finally {
    closeSync(descriptor);
  }
}

/** Tiles hold rows [from, from + rows) of all columns: value (i, k) at [k * rows + i]. */
export async function writeMatrix(
  path: string,
  rows: number,
  columns: number,
  tiles: AsyncIterable<{ from: number; rows: number; values: Float64Array }>,
): Promise<void> {
  const head = header([rows, columns]);
  const descriptor = openSync(path, 'w');
  try {
    writeSync(descriptor, head);
    ftruncateSync(descriptor, head.length + rows * columns * 8);
    for await (const tile of tiles) {
      for (let k = 0; k < columns; k++) {
        writeSync(
          descriptor,
          bytesOf(tile.values.subarray(k * tile.rows, (k + 1) * tile.rows)),
          0,
          tile.rows * 8,
          head.length + (k * rows + tile.from) * 8,
        );
      }
    }
  } finally {
    closeSync(descriptor);
  }
}
