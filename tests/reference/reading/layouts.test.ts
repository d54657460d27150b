/** The proposed reading, the survey and the snapshots of every layout, element type and order, against NumPy. */
import { afterAll, describe, expect, it } from 'vitest';
import type { Reading } from '#contract/reading.ts';
import type { FieldSurvey, Survey } from '../../../server/engine/survey.ts';
import type { Archive } from '../../../server/reading/archive.ts';
import { mismatchesOf } from '../../../server/reading/fit.ts';
import { defaultLimits } from '../../../server/reading/limits.ts';
import { openArchive } from '../../../server/reading/open-archive.ts';
import { evidenceOf } from '../../../server/reading/proposal/evidence.ts';
import { propose } from '../../../server/reading/proposal/propose.ts';
import { planSnapshots, readBlock } from '../../../server/reading/snapshot-blocks.ts';
import { surveyArchive } from '../../../server/reading/survey/survey-archive.ts';
import { writtenBy } from './written-by-python.ts';

interface FieldFacts {
  snapshots: number;
  nodes: number;
  min: (number | null)[];
  max: (number | null)[];
  mean: (number | null)[];
  norm: (number | null)[];
  nonFinite: number[];
  firstNonFinite: number[];
  stepChange: number[];
  changed: number;
  sameAs: number[];
  rows: (number | null)[][];
}
interface Facts {
  archives: Record<string, Record<string, FieldFacts>>;
  t: number[];
  x: number[];
  y: number[];
}

const written = writtenBy<Facts>('layouts.py');
afterAll(() => written.remove());

async function read(...names: string[]): Promise<{ archive: Archive; reading: Reading; survey: Survey }> {
  const archive = await openArchive(names.map(written.file), defaultLimits);
  const reading = propose(archive.contents, evidenceOf(archive));
  expect(mismatchesOf(archive.contents, reading)).toEqual([]);
  const survey = await surveyArchive(archive, reading, defaultLimits, async () => undefined);
  return { archive, reading, survey };
}

function expectColumn(ours: ArrayLike<number>, theirs: (number | null)[], what: string): void {
  expect(ours.length, what).toBe(theirs.length);
  theirs.forEach((value, j) => {
    if (value === null) expect(ours[j], `${what}[${j}]`).toBeNaN();
    // The sums differ in the order of their terms: n eps at most, n = 420 nodes here.
    else expect(Math.abs(ours[j] - value), `${what}[${j}]: ${ours[j]} and ${value}`).toBeLessThanOrEqual(1e-12 * Math.max(1, Math.abs(value)));
  });
}

function expectField(field: FieldSurvey, facts: FieldFacts): void {
  expect([field.snapshots, field.nodes], field.path).toEqual([facts.snapshots, facts.nodes]);
  expectColumn(field.min, facts.min, `${field.path} min`);
  expectColumn(field.max, facts.max, `${field.path} max`);
  expectColumn(field.mean, facts.mean, `${field.path} mean`);
  expectColumn(field.norm, facts.norm, `${field.path} norm`);
  expectColumn(field.stepChange, facts.stepChange, `${field.path} stepChange`);
  expect([...field.nonFinite], field.path).toEqual(facts.nonFinite);
  expect([...field.firstNonFinite], field.path).toEqual(facts.firstNonFinite);
  expect(field.changedNodes, field.path).toBe(facts.changed);
  // Equal hashes exactly where NumPy finds equal bytes.
  expect(field.hash.map((hash) => field.hash.indexOf(hash)), field.path).toEqual(facts.sameAs);
}

function expectSnapshots(archive: Archive, reading: Reading, facts: Record<string, FieldFacts>): void {
  const names = reading.fields.map(({ name }) => name);
  const count = facts[names[0]].snapshots;
  // Ascending, with a repetition, and backwards: any order may be asked for.
  const indices = [...Array(count).keys(), 0, count - 1, Math.floor(count / 2)];
  const plan = planSnapshots(archive, reading, names, indices, defaultLimits);
  const rows: (number | null)[][] = [];
  for (let block = 0; block < plan.blocks.length; block++) {
    const { count: many, values } = readBlock(plan, block);
    for (let p = 0; p < many; p++) rows.push(Array.from(values.subarray(p * plan.nodes, (p + 1) * plan.nodes), (value) => (Number.isFinite(value) ? value : null)));
  }
  expect(rows).toEqual(indices.map((j) => names.flatMap((name) => facts[name].rows[j])));
}

const layouts: [archive: string, layout: Reading['layout'], axes: string[], time: string | null][] = [
  ['time_first.h5', 'time-first', ['time', 'y', 'x'], '/t'],
  ['chunks.h5', 'time-first', ['time', 'y', 'x'], '/t'],
  ['chunks_gzip.h5', 'time-first', ['time', 'y', 'x'], '/t'],
  ['chunks_lzf.h5', 'time-first', ['time', 'y', 'x'], '/t'],
  ['time_last_bare.h5', 'time-last', ['x', 'y', 'time'], null],
  ['time_last.h5', 'time-last', ['x', 'y', 'time'], '/time'],
  ['time_middle.h5', 'time-first', ['component', 'time', 'y', 'x'], '/t'],
  ['components.h5', 'time-first', ['time', 'y', 'x', 'component'], '/t'],
  ['matrix_nm.h5', 'snapshot-matrix', ['node', 'time'], '/t'],
  ['matrix_mn.h5', 'snapshot-matrix', ['time', 'node'], '/times'],
  ['steps_attribute.h5', 'group-per-step', ['y', 'x'], '/{step}/@time'],
  ['steps_dataset.h5', 'group-per-step', ['y', 'x'], '/output/{step}/time'],
  ['steps_name.h5', 'group-per-step', ['y', 'x'], '/{step}'],
  ['cube_scales.h5', 'unknown', ['x', 'time', 'y'], '/t'],
  ['cube_bare.h5', 'time-first', ['time', 'y', 'x'], '/t'],
  ['box.h5', 'time-first', ['time', 'z', 'y', 'x'], '/t'],
  ['types.h5', 'snapshot-matrix', ['time', 'node'], '/t'],
  ['special.h5', 'snapshot-matrix', ['time', 'node'], '/t'],
];

describe('an HDF5 archive', () => {
  it.each(layouts)('%s is recognised as %s and surveyed as NumPy does', async (name, layout, axes, stampPath) => {
    const { archive, reading, survey } = await read(name);
    const facts = written.facts.archives[name];
    expect(reading.layout).toBe(layout);
    expect(reading.fields.map((field) => field.name).sort()).toEqual(Object.keys(facts).sort());
    for (const field of reading.fields) expect(field.axes, field.path).toEqual(axes);
    expect(survey.stampPath).toBe(stampPath);
    for (const field of survey.fields) expectField(field, facts[field.name]);
    expectSnapshots(archive, reading, facts);
    for (const { path } of archive.contents.arrays) {
      if (layout === 'group-per-step') continue;
      expect(reading.roles.find((role) => role.path === path)?.why, `role of ${path}`).toBeTruthy();
    }
    archive.close();
  });

  it('gives stamps, coordinates, weights, parameters and units', async () => {
    const { reading, survey } = await read('time_first.h5');
    expect([...survey.stamps!]).toEqual(written.facts.t);
    expect(survey.stampType).toBe('float64');
    expect(survey.axes.map(({ name, nodes, unit }) => [name, [...nodes!], unit])).toEqual([
      ['y', written.facts.y, 'm'],
      ['x', written.facts.x, 'm'],
    ]);
    expect(survey.spaceWeights).toHaveLength(35);
    expect(reading.time).toEqual({ kind: 'array', path: '/t', unit: 's' });
    expect(reading.fields.map(({ unit }) => unit)).toEqual(['m/s', 'm/s']);
    expect(reading.parameters.map(({ name, value, from }) => [name, value, from]).sort()).toEqual([['Re', 1000, '/@Re'], ['nu', 0.001, '/nu']]);
    expect(reading.roles.find(({ path }) => path === '/mask')?.role).toBe('mask');
  });

  it.each(['steps_attribute.h5', 'steps_dataset.h5'])('%s has the time of each step, ordered by the number in its name', async (name) => {
    const { survey } = await read(name);
    expect([...survey.stamps!]).toEqual(written.facts.t);
  });

  it('takes the time from the names of steps when nothing else tells it', async () => {
    const { survey } = await read('steps_name.h5');
    expect([...survey.stamps!]).toEqual(Array.from({ length: 12 }, (_, j) => Number((0.0125 * j).toFixed(4))));
    expect(survey.stampType).toBe('string');
  });

  it('finds cell edges by their length', async () => {
    const { reading, survey } = await read('box.h5');
    expect(reading.axes.find((axis) => axis.name === 'x')).toMatchObject({ path: '/x_coords', edges: '/x_edges' });
    expect(survey.axes.find((axis) => axis.name === 'x')?.edges).toHaveLength(8);
  });

  it('says that equal lengths leave a cube uncertain, and believes its dimension scales', async () => {
    const bare = await read('cube_bare.h5');
    expect(bare.reading.fields[0].why).toMatch(/uncertain/);
    const scales = await read('cube_scales.h5');
    expect(scales.reading.fields[0].why).not.toMatch(/uncertain/);
  });

  it('counts fill values, constant ends and huge values', async () => {
    const { survey } = await read('special.h5');
    const field = (name: string) => survey.fields.find((one) => one.name === name)!;
    const masked = field('masked');
    expect(masked.fill.map(({ value, declared, firstSnapshot, firstNode }) => ({ value, declared, firstSnapshot, firstNode }))).toEqual([
      { value: Math.fround(1e20), declared: true, firstSnapshot: 0, firstNode: 11 },
      { value: -9999, declared: false, firstSnapshot: 4, firstNode: 2 },
    ]);
    expect([...masked.fill[0].counts]).toEqual(Array(12).fill(1));
    expect(masked.trailingFill).toBe(0);
    // A node that is NaN throughout never changes; the bits say so.
    expect(masked.changedNodes).toBe(28);
    const tail = field('tail');
    expect([tail.trailingFill, tail.allocated]).toEqual([6, 180]);
    expect(tail.fill.find(({ value }) => value === -1)?.declared).toBe(true);
    expect(field('special').norm[10]).toBe(1e200);
    // 2^53 and 2^53 + 1 are one double, but not one bit pattern.
    expect(field('frozen').hash[0]).not.toBe(field('frozen').hash[1]);
  });
});

describe('NPY files', () => {
  const types = Object.keys(written.facts.archives).filter((name) => /^(little|big|version)_.*npy$/.test(name));

  it.each(types)('%s is read as NumPy does', async (name) => {
    const { archive, reading, survey } = await read(name);
    expect(reading.fields.map(({ axes }) => axes)).toEqual([['time', 'node']]);
    const facts = written.facts.archives[name];
    expectField(survey.fields[0], facts[survey.fields[0].name]);
    expectSnapshots(archive, reading, facts);
    archive.close();
  });

  it('takes a separate vector as time', async () => {
    const { reading, survey } = await read('u.npy', 't.npy');
    expect(reading.time).toEqual({ kind: 'array', path: '/t', unit: null });
    expect([...survey.stamps!]).toEqual(written.facts.t);
    expectField(survey.fields[0], written.facts.archives['u.npy'].u);
  });

  it('alone gives fields without time, and says that its axes are a guess', async () => {
    const { reading, survey } = await read('u.npy');
    expect(reading.time).toBeNull();
    expect(reading.fields[0].why).toMatch(/uncertain/);
    expect(survey.stamps).toBeNull();
  });

  it('in Fortran order counts nodes in C order of the axes', async () => {
    const { archive, reading, survey } = await read('fortran.npy', 't.npy');
    expect(reading.fields[0].axes[0]).toBe('time');
    const facts = written.facts.archives['fortran.npy'];
    const [field] = survey.fields;
    expectColumn(field.mean, facts.fortran.mean, 'mean');
    expectColumn(field.stepChange, facts.fortran.stepChange, 'stepChange');
    expectSnapshots(archive, reading, facts);
  });

  it('as a matrix in Fortran order, big-endian, is a snapshot matrix', async () => {
    const { archive, reading, survey } = await read('matrix.npy', 't.npy');
    expect([reading.layout, reading.fields[0].axes]).toEqual(['snapshot-matrix', ['node', 'time']]);
    expectField(survey.fields[0], written.facts.archives['matrix.npy'].matrix);
    expectSnapshots(archive, reading, written.facts.archives['matrix.npy']);
  });

  it('of complex values are no fields yet, with the reason', async () => {
    const archive = await openArchive([written.file('complex.npy')], defaultLimits);
    const reading = propose(archive.contents, evidenceOf(archive));
    expect(reading.fields).toEqual([]);
    expect(reading.roles).toEqual([{ path: '/complex', role: 'ignored', why: expect.stringMatching(/real and imaginary parts/) }]);
  });
});
