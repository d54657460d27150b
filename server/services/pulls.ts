/** Pulls: whole files of the bag, and slices of the matrix by columns, split and fields, raw or weighted. Every pull is recorded. */
import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { z } from 'zod';
import { PennyweightError } from '#contract/error.ts';
import type { matrixQuery } from '#contract/release.ts';
import { splitCodes } from '../engine/release/build-files.ts';
import { bytesOf, npyHeader } from '../engine/release/npy.ts';
import { MatrixReader } from './matrix-store.ts';
import { pull } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { authorise, type App, type Caller } from './context.ts';
import { findRelease, releaseLabel, type FoundRelease, type ReleaseAddress } from './releases.ts';

async function releaseForPull(app: App, caller: Caller, address: ReleaseAddress): Promise<FoundRelease> {
  const found = await findRelease(app, caller, address);
  authorise(caller, 'pull', 'Release', found.row);
  if (found.row.state === 'withdrawn') throw new PennyweightError('withdrawn', `${releaseLabel(found)} was withdrawn: ${found.row.withdrawnReason} Ask ${found.row.contact}.`, { contact: found.row.contact });
  return found;
}

async function recordPull(app: App, caller: Caller, found: FoundRelease, what: string, bytes: number): Promise<void> {
  await app.db.transaction(async (tx) => {
    await tx.insert(pull).values({ releaseId: found.row.id, userId: caller.user.id, via: caller.via, what, bytes });
    await recordAudit(tx, caller, { action: 'release.pull', objectType: 'release', objectId: found.row.id, label: releaseLabel(found), campaignId: found.row.campaignId, after: { what, bytes } });
  });
}

/** A whole file of the bag; only paths that stand in its manifests. `again`: the going on of an interrupted pull, which is not recorded anew. */
export async function fileForPull(app: App, caller: Caller, address: ReleaseAddress, path: string, again: boolean): Promise<{ path: string; name: string; sha256: string }> {
  const found = await releaseForPull(app, caller, address);
  const file = found.row.files.find((each) => each.path === path);
  if (!file) throw new PennyweightError('not-found', `The release has no file "${path}": see its manifest.`, { path });
  if (!again) await recordPull(app, caller, found, path, file.bytes);
  return { path: join(app.storage.folder('releases', found.row.folder), path), name: path.split('/').pop()!, sha256: file.sha256 };
}

const numbers = async (folder: string, name: string) => {
  const file = await readFile(join(folder, 'data', name));
  return file.subarray(10 + file.readUInt16LE(8));
};
const doubles = async (folder: string, name: string) => {
  const bytes = await numbers(folder, name);
  return new Float64Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength));
};

export interface MatrixSlice {
  bytes: number;
  name: string;
  chunks(): AsyncGenerator<Uint8Array>;
}

/** Columns asked for, ascending. Errors: 'range-invalid' with the bounds. */
async function columnsOf(folder: string, total: number, query: z.output<typeof matrixQuery>): Promise<number[]> {
  let from = 0, to = total;
  if (query.columns) {
    const [a, b] = query.columns.split(':');
    from = a === '' ? 0 : Number(a);
    to = b === '' ? total : Number(b);
    if (from >= to || to > total) throw new PennyweightError('range-invalid', `Columns ${query.columns} are outside: there are ${total}, numbered from 0, and the end is not included.`, { columns: query.columns, total });
  }
  const all = Array.from({ length: to - from }, (_, k) => from + k);
  if (!query.split) return all;
  const codes = new Int8Array(await numbers(folder, 'split.npy')), wanted = splitCodes[query.split];
  const kept = all.filter((j) => codes[j] === wanted);
  if (kept.length === 0) throw new PennyweightError('range-invalid', `No column of the ${query.split} part lies in what was asked for.`, { split: query.split, columns: query.columns ?? null });
  return kept;
}

/** The slice as an NPY of known length (Fortran order), read a few columns at a time and nothing else of the file. */
export async function matrixForPull(app: App, caller: Caller, address: ReleaseAddress, query: z.output<typeof matrixQuery>): Promise<MatrixSlice> {
  const found = await releaseForPull(app, caller, address);
  const { build } = found.row, folder = app.storage.folder('releases', found.row.folder);
  const names = query.fields ?? build.fields.map((field) => field.name);
  const unknown = names.find((name) => !build.fields.some((field) => field.name === name));
  if (unknown !== undefined) throw new PennyweightError('range-invalid', `The release has no field "${unknown}": it has ${build.fields.map((field) => field.name).join(', ')}.`, { field: unknown });
  const fields = names.map((name) => build.fields.find((field) => field.name === name)!);
  const columns = await columnsOf(folder, build.columns, query);
  const rows = fields.reduce((n, field) => n + field.count, 0);
  const header = npyHeader(build.type, [rows, columns.length], true);
  const bytes = header.length + rows * columns.length * bytesOf[build.type];
  const time = query.weighted ? await doubles(folder, 'time_weights.npy') : null;
  const space = query.weighted ? (await doubles(folder, 'space_weights.npy')).map(Math.sqrt) : null;
  const what = `matrix.npy, ${query.split ?? 'all'} columns${query.columns ? ` ${query.columns}` : ''}, ${names.join(', ')}${query.weighted ? ', weighted' : ''}`;
  await recordPull(app, caller, found, what, bytes);
  async function* chunks(): AsyncGenerator<Uint8Array> {
    yield header;
    const reader = await MatrixReader.open(join(folder, 'data', 'matrix.npy'), build);
    try {
      const step = Math.max(1, Math.floor((4 << 20) / (8 * rows)));
      for (let k = 0; k < columns.length; ) {
        let run = 1;
        while (run < step && k + run < columns.length && columns[k + run] === columns[k] + run) run++;
        const values = new Float64Array(rows * run);
        let row = 0;
        for (const field of fields) {
          const block = await reader.block(columns[k], run, field.from, field.count);
          for (let j = 0; j < run; j++) values.set(block.subarray(j * field.count, (j + 1) * field.count), j * rows + row);
          if (time && space) for (let j = 0; j < run; j++) {
            const a = Math.sqrt(time[columns[k] + j]);
            for (let i = 0; i < field.count; i++) values[j * rows + row + i] *= a * space[field.from + i];
          }
          row += field.count;
        }
        const out = build.type === 'float32' ? Float32Array.from(values) : values;
        yield new Uint8Array(out.buffer, out.byteOffset, out.byteLength);
        k += run;
      }
    } finally {
      await reader.close();
    }
  }
  return { bytes, name: `${address.campaign}-${address.dataset}-${address.version}.npy`, chunks };
}
