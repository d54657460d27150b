/** Which part of a release's matrix was asked for, and its bytes as an NPY of known length, without reading the rest. */
import { join } from 'node:path';
import type { z } from 'zod';
import type { BuildSummary } from '#contract/dataset.ts';
import { PennyweightError } from '#contract/error.ts';
import type { matrixQuery } from '#contract/release.ts';
import { splitCodes } from '../engine/release/build-files.ts';
import { bytesOf, npyHeader } from '../engine/release/npy.ts';
import { builtCodes, builtDoubles } from './built-arrays.ts';
import { MatrixReader } from './matrix-store.ts';

type Asked = z.output<typeof matrixQuery>;

export interface MatrixSlice {
  bytes: number;
  /** what was asked for, in words, for the record of pulls */
  what: string;
  chunks(): AsyncGenerator<Uint8Array>;
}

/** Columns read at once stay below this many bytes in double precision, unless a single one is longer. */
const chunkBytes = 8 << 20;

/** Ascending. Errors: 'range-invalid' with what there is. */
async function columnsOf(folder: string, { columns: total }: BuildSummary, asked: Asked): Promise<number[]> {
  let from = 0, to = total;
  if (asked.columns) {
    const [a, b] = asked.columns.split(':');
    from = a === '' ? 0 : Number(a);
    to = b === '' ? total : Number(b);
    if (from >= to || to > total) throw new PennyweightError('range-invalid', `Columns ${asked.columns} are outside: there are ${total}, numbered from 0, and the end is not included.`, { columns: asked.columns, total });
  }
  const all = Array.from({ length: to - from }, (_, k) => from + k);
  if (!asked.split) return all;
  const codes = await builtCodes(folder), wanted = splitCodes[asked.split];
  const kept = all.filter((j) => codes[j] === wanted);
  if (kept.length === 0) throw new PennyweightError('range-invalid', `No column of the ${asked.split} part lies in what was asked for.`, { split: asked.split, columns: asked.columns ?? null });
  return kept;
}

/** In the order asked. Errors: 'range-invalid' for a name that is unknown or given twice. */
function fieldsOf(build: BuildSummary, names: string[] | undefined): BuildSummary['fields'] {
  if (!names || names.length === 0) return build.fields;
  return names.map((name, i) => {
    const field = build.fields.find((each) => each.name === name);
    if (!field) throw new PennyweightError('range-invalid', `The release has no field "${name}": it has ${build.fields.map((each) => each.name).join(', ')}.`, { field: name });
    if (names.indexOf(name) !== i) throw new PennyweightError('range-invalid', `The field "${name}" was asked for twice: name it once.`, { field: name });
    return field;
  });
}

/** Neighbouring columns, at most `most` together, as [first, count]. */
function* stretches(columns: number[], most: number): Generator<[number, number]> {
  for (let k = 0; k < columns.length; ) {
    let count = 1;
    while (count < most && k + count < columns.length && columns[k + count] === columns[k] + count) count++;
    yield [columns[k], count];
    k += count;
  }
}

/**
 * `folder` holds the arrays. The slice is stored as the matrix is (type, Fortran order); weighted: each value times the square roots of
 * its time and space weight, multiplied in double precision and then rounded.
 */
export async function sliceMatrix(folder: string, build: BuildSummary, asked: Asked): Promise<MatrixSlice> {
  const fields = fieldsOf(build, asked.fields), columns = await columnsOf(folder, build, asked);
  const rows = fields.reduce((n, field) => n + field.count, 0), whole = rows === build.rows && fields.every((field, i) => field === build.fields[i]);
  const header = npyHeader(build.type, [rows, columns.length], true);
  const roots = asked.weighted ? { time: (await builtDoubles(folder, 'time_weights.npy')).map(Math.sqrt), space: (await builtDoubles(folder, 'space_weights.npy')).map(Math.sqrt) } : null;

  /** Rows of one field for a stretch of columns, weighted. */
  async function weighted(reader: MatrixReader, first: number, count: number, field: BuildSummary['fields'][number]): Promise<Uint8Array> {
    const values = await reader.block(first, count, field.from, field.count);
    for (let j = 0; j < count; j++) {
      const a = roots!.time[first + j];
      for (let i = 0; i < field.count; i++) values[j * field.count + i] *= a * roots!.space[field.from + i];
    }
    return new Uint8Array((build.type === 'float32' ? Float32Array.from(values) : values).buffer);
  }

  async function* chunks(): AsyncGenerator<Uint8Array> {
    yield header;
    const reader = await MatrixReader.open(join(folder, 'matrix.npy'), build), size = bytesOf[build.type];
    try {
      for (const [first, count] of stretches(columns, Math.max(1, Math.floor(chunkBytes / (8 * rows))))) {
        if (whole && !roots) {
          yield await reader.bytes(first, count, 0, rows);
          continue;
        }
        const out = new Uint8Array(rows * count * size);
        let row = 0;
        for (const field of fields) {
          const part = roots ? await weighted(reader, first, count, field) : await reader.bytes(first, count, field.from, field.count);
          for (let j = 0; j < count; j++) out.set(part.subarray(j * field.count * size, (j + 1) * field.count * size), (j * rows + row) * size);
          row += field.count;
        }
        yield out;
      }
    } finally {
      await reader.close();
    }
  }
  const what = `matrix.npy, ${asked.split ?? 'all'} columns${asked.columns ? ` ${asked.columns}` : ''}, ${fields.map((field) => field.name).join(', ')}${asked.weighted ? ', weighted' : ''}`;
  return { bytes: header.length + rows * columns.length * bytesOf[build.type], what, chunks };
}
