/** The matrix on disk: NPY, Fortran order, so that a column (one snapshot) is contiguous. Written once, front to back; read by columns or tiles of rows. */
import { createHash, type Hash } from 'node:crypto';
import { PennyweightError } from '#contract/error.ts';
import { bytesOf, npyHeader } from '../engine/release/npy.ts';
import type { RowTile, RowTileSource } from '../engine/spectrum/spectrum.ts';
import { ArrayFile } from '../storage/array-file.ts';

export interface MatrixShape {
  rows: number;
  columns: number;
  type: 'float32' | 'float64';
}

const tileBytes = 32 * 2 ** 20;

export class MatrixWriter {
  private readonly file: ArrayFile;
  private readonly shape: MatrixShape;
  private readonly hash: Hash = createHash('sha256');
  private appended = 0;
  /** largest |x - float32(x)| met */
  castError = 0;

  private constructor(file: ArrayFile, shape: MatrixShape) {
    this.file = file;
    this.shape = shape;
  }

  static async create(path: string, shape: MatrixShape): Promise<MatrixWriter> {
    const writer = new MatrixWriter(await ArrayFile.create(path), shape);
    await writer.put(npyHeader(shape.type, [shape.rows, shape.columns], true));
    return writer;
  }

  /** Whole columns, one after the other. Errors: 'matrix-invalid' for a value beyond single precision's range, with its place. */
  async append(values: Float64Array): Promise<void> {
    if (this.shape.type === 'float64') return this.put(new Uint8Array(values.buffer, values.byteOffset, values.byteLength));
    const single = Float32Array.from(values);
    for (let i = 0; i < values.length; i++) {
      const error = Math.abs(values[i] - single[i]);
      if (error > this.castError) this.castError = error;
    }
    if (this.castError === Infinity) {
      const at = values.findIndex((value, i) => Number.isFinite(value) && !Number.isFinite(single[i]));
      const row = at % this.shape.rows, column = this.appended / this.shape.rows + Math.floor(at / this.shape.rows);
      throw new PennyweightError('matrix-invalid', `The value ${values[at]} at row ${row}, column ${column} is too large for single precision: cast to float64.`, { row, column, value: values[at] });
    }
    this.appended += values.length;
    await this.put(new Uint8Array(single.buffer));
  }

  async close(): Promise<{ sha256: string; bytes: number }> {
    await this.file.sync();
    await this.file.close();
    return { sha256: this.hash.digest('hex'), bytes: this.file.length };
  }

  abandon(): Promise<void> {
    return this.file.close();
  }

  private async put(bytes: Uint8Array): Promise<void> {
    this.hash.update(bytes);
    await this.file.append(bytes);
  }
}

export class MatrixReader implements RowTileSource {
  readonly shape: MatrixShape;
  private readonly file: ArrayFile;
  private readonly start: number;

  private constructor(file: ArrayFile, shape: MatrixShape) {
    this.file = file;
    this.shape = shape;
    this.start = npyHeader(shape.type, [shape.rows, shape.columns], true).length;
  }

  static async open(path: string, shape: MatrixShape): Promise<MatrixReader> {
    return new MatrixReader(await ArrayFile.open(path), shape);
  }

  get snapshots(): number {
    return this.shape.columns;
  }

  get nodes(): number {
    return this.shape.rows;
  }

  /** Rows [from, from + count) of columns [first, first + columns), column after column, as they are stored. */
  async bytes(first: number, columns: number, from: number, count: number): Promise<Uint8Array> {
    const { rows, type } = this.shape, size = bytesOf[type];
    const raw = new Uint8Array(columns * count * size);
    if (count === rows) await this.file.read(raw, this.start + first * rows * size);
    else for (let j = 0; j < columns; j++) await this.file.read(raw.subarray(j * count * size, (j + 1) * count * size), this.start + ((first + j) * rows + from) * size);
    return raw;
  }

  /** The same in double precision. */
  async block(first: number, columns: number, from: number, count: number): Promise<Float64Array> {
    const { buffer } = await this.bytes(first, columns, from, count);
    return this.shape.type === 'float64' ? new Float64Array(buffer) : Float64Array.from(new Float32Array(buffer));
  }

  async *tiles(): AsyncGenerator<RowTile> {
    const { rows, columns } = this.shape;
    const count = Math.max(1, Math.min(rows, Math.floor(tileBytes / (8 * columns))));
    for (let from = 0; from < rows; from += count) {
      const height = Math.min(count, rows - from);
      yield { from, rows: height, values: await this.block(0, columns, from, height) };
    }
  }

  /** Blocks of whole columns of about 32 MiB. */
  async *columnBlocks(): AsyncGenerator<{ first: number; columns: number; values: Float64Array }> {
    const step = Math.max(1, Math.floor(tileBytes / (8 * this.shape.rows)));
    for (let first = 0; first < this.shape.columns; first += step) {
      const columns = Math.min(step, this.shape.columns - first);
      yield { first, columns, values: await this.block(first, columns, 0, this.shape.rows) };
    }
  }

  close(): Promise<void> {
    return this.file.close();
  }
}

/** Writes a Fortran-ordered NPY in double precision whose rows come tile by tile: `values` of a tile column after column. */
export async function writeTiles(path: string, rows: number, columns: number, tiles: AsyncIterable<RowTile>): Promise<void> {
  const file = await ArrayFile.create(path), header = npyHeader('float64', [rows, columns], true);
  try {
    await file.append(header);
    for await (const tile of tiles) {
      for (let k = 0; k < columns; k++) {
        const part = tile.values.subarray(k * tile.rows, (k + 1) * tile.rows);
        await file.write(new Uint8Array(part.buffer, part.byteOffset, part.byteLength), header.length + 8 * (k * rows + tile.from));
      }
    }
    await file.sync();
  } finally {
    await file.close();
  }
}
