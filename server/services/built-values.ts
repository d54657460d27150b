/** Columns, modes and the mean of a built matrix, put back on their grid for the field view; and its beam. */
import { join } from 'node:path';
import type { BuildSummary } from '#contract/dataset.ts';
import { PennyweightError } from '#contract/error.ts';
import type { SplitPart } from '#contract/recipe.ts';
import type { Beam, FieldValues } from '#contract/shape.ts';
import { splitCodes } from '../engine/release/build-files.ts';
import { marksOf } from './archive-record.ts';
import { builtCodes, builtDoubles, builtFields } from './built-arrays.ts';
import type { App, Caller } from './context.ts';
import { findDraft } from './drafts.ts';
import { fieldValues } from './field-values.ts';
import { MatrixReader } from './matrix-store.ts';
import { findRelease, type ReleaseAddress } from './releases.ts';

export interface Built {
  /** where the arrays lie */
  folder: string;
  build: BuildSummary;
}

export async function builtOfDraft(app: App, caller: Caller, id: string): Promise<Built> {
  const { build, buildFolder } = await findDraft(app, caller, id);
  if (!build || !buildFolder) throw new PennyweightError('wrong-state', 'The matrix of this draft has not been built yet.');
  return { build, folder: app.storage.folder('builds', buildFolder) };
}

export async function builtOfRelease(app: App, caller: Caller, address: ReleaseAddress): Promise<Built> {
  const { row } = await findRelease(app, caller, address);
  return { build: row.build, folder: join(app.storage.folder('releases', row.folder), 'data') };
}

const partOf = Object.fromEntries(Object.entries(splitCodes).map(([part, code]) => [code, part])) as Record<number, SplitPart>;

export async function builtBeam({ folder, build }: Built): Promise<Beam> {
  const stamps = await builtDoubles(folder, 'time.npy'), weights = await builtDoubles(folder, 'time_weights.npy');
  const { time_unit: unit } = await builtFields(folder);
  const timed = stamps.every(Number.isFinite);
  const gaps = timed ? build.records.flatMap(({ from, count }) => marksOf(stamps.slice(from, from + count)).gaps.map((j) => j + from)) : [];
  return {
    stamps: timed ? Array.from(stamps) : null, count: stamps.length, unit, weights: Array.from(weights), rule: build.timeRule, marks: { gaps, duplicates: [], restarts: [] },
    split: Array.from(await builtCodes(folder), (code) => partOf[code]), records: build.records.map(({ run, from, count }) => ({ label: run, from, count })),
  };
}

async function valuesOf({ folder, build }: Built, of: 'column' | 'mode' | 'mean', index: number, { from, count }: BuildSummary['fields'][number]): Promise<Float64Array> {
  if (of === 'mean') return (await builtDoubles(folder, 'mean.npy')).subarray(index * build.rows + from, index * build.rows + from + count);
  const reader = of === 'column' ? await MatrixReader.open(join(folder, 'matrix.npy'), build) : await MatrixReader.open(join(folder, 'modes.npy'), { rows: build.rows, columns: build.modes, type: 'float64' });
  try {
    return await reader.block(index, 1, from, count);
  } finally {
    await reader.close();
  }
}

export async function builtValues({ folder, build }: Built, asked: { of: 'column' | 'mode' | 'mean'; index: number; field: string }): Promise<FieldValues> {
  const field = build.fields.find((each) => each.name === asked.field);
  if (!field) throw new PennyweightError('not-found', `The matrix has no field "${asked.field}": it has ${build.fields.map((each) => each.name).join(', ')}.`, { field: asked.field });
  const perRun = build.centred === 'weighted-mean-per-run';
  const count = asked.of === 'column' ? build.columns : asked.of === 'mode' ? build.modes : perRun ? build.records.length : 1;
  if (asked.index >= count) throw new PennyweightError('range-invalid', `${asked.of} ${asked.index} is outside: there ${count === 1 ? 'is 1' : `are ${count}`}, numbered from 0.`, { index: asked.index, count });
  const values = await valuesOf({ folder, build }, asked.of, asked.index, field);
  const stamp = asked.of === 'column' ? (await builtDoubles(folder, 'time.npy'))[asked.index] : NaN;
  const time = Number.isFinite(stamp) ? stamp : null;
  const grid = (await builtFields(folder)).fields.find((each) => each.name === asked.field)!;
  const label = asked.of === 'mean' ? `what was subtracted, ${asked.field}` : `${asked.of} ${asked.of === 'mode' ? asked.index + 1 : asked.index}, ${asked.field}`;
  return fieldValues(values, grid.axes.map((axis) => ({ ...axis, nodes: axis.nodes ? Float64Array.from(axis.nodes) : null })), { label, field: asked.field, unit: asked.of === 'mode' ? null : field.unit, time, index: asked.index, count });
}
