/**
 * Records as real solvers write them, and the findings that somebody who knows the trade would expect: no more, no fewer.
 * All records are invented; each says what program habit it stands for.
 */
import { describe, expect, it } from 'vitest';
import type { CheckId } from '#contract/finding.ts';
import { judgeAll } from '../../../../server/engine/checks/index.ts';
import { idsOf, makeSubject, movingValues, uniform, type FieldPlan, type RecordPlan } from './survey-factory.ts';

const noise = (j: number) => Math.sin(12.9898 * j + 4.1) * Math.cos(78.233 * j);
const cumulate = (count: number, step: (j: number) => number, start = 0) => {
  const stamps = [start];
  for (let j = 1; j < count; j++) stamps.push(stamps[j - 1] + step(j));
  return stamps;
};
/** The state at a time: the same time gives the same bits, as a deterministic solver does. */
const stateAt = (t: number, n = 4) => Array.from({ length: n }, (_, i) => Math.sin(t + 0.7 * i) + 0.1 * t);
const computed = (stamps: ArrayLike<number>): FieldPlan => ({ values: Array.from(stamps, (t) => stateAt(t)) });
const record = (stamps: number[], more: RecordPlan = {}): RecordPlan => ({
  stamps,
  fields: [computed(stamps)],
  ...more,
});
const still = (m: number, value = 0) => Array.from({ length: m }, () => [value, value, value, value]);

const everyTenth = cumulate(401, (j) => 1e-3 * (1 + 0.3 * noise(j))).filter((_, j) => j % 10 === 0);
const float32Late = Array.from(Float32Array.from(uniform(201, 0.01, 1e5)));
const overlapping = [...uniform(101, 0.01), ...uniform(51, 0.01, 0.82)];
const offBeat = [...uniform(101, 0.01), ...uniform(51, 0.01, 0.825)];
const months = [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30].reduce(
  (days, length) => [...days, days.at(-1)! + length],
  [0],
);
const decay = Array.from({ length: 61 }, (_, j) => [1, 2, 3, 4].map((value) => value * Math.exp(-j)));

const records: [string, RecordPlan, CheckId[]][] = [
  ['fixed step, odd number of snapshots', record(uniform(201, 0.005)), []],
  [
    'adaptive step by a Courant number',
    record(cumulate(201, (j) => 2e-3 * (1 + 0.5 * Math.sin(j / 30)))),
    ['time/uneven-spacing'],
  ],
  ['output every 10 steps of a varying step', record(everyTenth), ['time/uneven-spacing']],
  ['a step that grows by 20 % to the end', record(cumulate(61, (j) => 1e-4 * 1.2 ** j)), ['time/uneven-spacing']],
  ['a last step cut short to end on time', record([...uniform(100, 0.03), 2.98]), ['time/uneven-spacing']],
  ['restart from a checkpoint, output repeated bit for bit', record(overlapping), ['time/restart-overlap']],
  ['restart between outputs', record(offBeat), ['time/restart-overlap', 'time/uneven-spacing']],
  [
    'restart that writes the last output again',
    record([...uniform(51, 0.01), ...uniform(51, 0.01, 0.5)]),
    ['time/duplicate', 'value/frozen'],
  ],
  [
    'restart after a gap: output lost between',
    record([...uniform(51, 0.01), ...uniform(50, 0.01, 0.8)]),
    ['time/gap', 'time/uneven-spacing'],
  ],
  [
    'float32 time of 1e5 s with a step of 0.01 s',
    record(float32Late, { stampType: 'float32' }),
    ['time/rounded-stamps'],
  ],
  [
    'time summed up in float32',
    record(
      Array.from({ length: 301 }).reduce<number[]>((t) => [...t, Math.fround(t.at(-1)! + Math.fround(0.01))], [0]),
      { stampType: 'float32' },
    ),
    ['time/rounded-stamps', 'time/even-point-count'],
  ],
  [
    'time printed with 6 digits',
    record(uniform(301, 1 / 7).map((t) => Number(t.toPrecision(6)))),
    ['time/rounded-stamps'],
  ],
  [
    'monthly means in days since a date',
    record(months, { timeUnit: 'days since 2001-01-01' }),
    ['time/uneven-spacing'],
  ],
  ['an ensemble without time', { time: { kind: 'ensemble' }, fields: [{ values: movingValues(40) }] }, []],
  [
    'a matrix without a time vector or a grid',
    {
      fields: [{ values: movingValues(40), axes: ['time', 'node'], unit: null }],
      axes: [{ name: 'node', nodes: null, count: 4 }],
    },
    ['time/missing', 'grid/missing', 'value/unit-missing'],
  ],
  ['a single snapshot', { layout: 'single-snapshot', fields: [{ values: movingValues(1), axes: ['x'] }] }, []],
  ['two snapshots', record([0, 1]), []],
  [
    'a periodic box: the end point is not stored',
    record(uniform(21), { axes: [{ name: 'x', nodes: uniform(4, Math.PI / 2) }] }),
    [],
  ],
  [
    'a Chebyshev grid from 1 to -1',
    record(uniform(21), { axes: [{ name: 'x', nodes: [1, Math.cos(Math.PI / 3), Math.cos((2 * Math.PI) / 3), -1] }] }),
    ['grid/uneven'],
  ],
  [
    'a wall-graded float32 grid',
    record(uniform(21), { axes: [{ name: 'y', dtype: 'float32', nodes: [0, 1e-5, 3e-5, 1].map(Math.fround) }] }),
    ['grid/uneven'],
  ],
  [
    'latitudes from north to south',
    record(uniform(21), { axes: [{ name: 'lat', nodes: [67.5, 22.5, -22.5, -67.5], unit: 'degrees_north' }] }),
    [],
  ],
  [
    'two files of two runs concatenated',
    { stamps: [...uniform(41, 0.1), ...uniform(41, 0.1)], fields: [{ values: movingValues(82) }] },
    ['time/restart-overlap'],
  ],
  [
    'two files of one run concatenated the wrong way round',
    record([...uniform(21, 0.1, 2.1), ...uniform(20, 0.1, 0.1)]),
    ['time/not-increasing'],
  ],
  [
    'steps listed by name: 0, 1, 10, 11, 2, …',
    record(Array.from({ length: 101 }, (_, j) => j).sort((a, b) => (String(a) < String(b) ? -1 : 1))),
    ['time/not-increasing'],
  ],
  ['an adjoint run, written backwards', record(uniform(41, 0.1).reverse()), ['time/not-increasing']],
  [
    'a job killed half way through a reserved array',
    { stamps: [...uniform(41), ...uniform(20, 0)], fields: [{ values: [...movingValues(41), ...still(20)] }] },
    ['file/unwritten-data'],
  ],
  [
    'a job killed half way, times written beforehand',
    { stamps: uniform(61), fields: [{ values: [...movingValues(41), ...still(20)] }] },
    ['file/unwritten-data'],
  ],
  [
    'a run that diverged',
    { stamps: uniform(41), fields: [{ values: [...movingValues(38), [NaN, 1, 2, 3], ...still(2, NaN)] }] },
    ['value/non-finite'],
  ],
  [
    'a fluid at rest at first, and no-slip walls',
    { stamps: uniform(21), fields: [{ values: [[0, 0, 0, 0], ...movingValues(20).map(([, a, b]) => [0, a, b, 0])] }] },
    [],
  ],
  [
    'a decay below the smallest double',
    { stamps: uniform(65), fields: [{ values: [...decay, ...still(4)] }] },
    ['value/frozen'],
  ],
  [
    'a run that reached its steady state',
    {
      stamps: uniform(25),
      fields: [{ values: [...movingValues(20), ...Array.from({ length: 5 }, () => stateAt(9))] }],
    },
    ['value/frozen'],
  ],
  [
    'a plane flow with its third velocity',
    record(uniform(21), { fields: [computed(uniform(21)), { name: 'w', values: still(21) }] }),
    ['value/constant-field'],
  ],
  [
    'a source switched off half way, beside a moving field',
    record(uniform(21), { fields: [computed(uniform(21)), { name: 'q', values: [...movingValues(18), ...still(3)] }] }),
    ['value/frozen'],
  ],
  [
    'radiation updated every fifth output',
    record(uniform(21), {
      fields: [
        computed(uniform(21)),
        { name: 'q', values: uniform(21, 1).map((j) => movingValues(5)[Math.floor(j / 5)]) },
      ],
    }),
    [],
  ],
  [
    'an exactly periodic orbit over three periods',
    { stamps: uniform(31), fields: [{ values: uniform(31, 1).map((j) => movingValues(10)[j % 10]) }] },
    ['value/repeated'],
  ],
  [
    'dense output of the start, sparse afterwards',
    record([...uniform(50, 0.001), ...uniform(31, 0.1, 0.1)]),
    ['time/uneven-spacing'],
  ],
  [
    'pairs of close snapshots for time derivatives',
    record(cumulate(41, (j) => (j % 2 === 1 ? 1e-3 : 0.2))),
    ['time/uneven-spacing'],
  ],
  [
    'decades of logarithmic output',
    record(Array.from({ length: 41 }, (_, j) => 10 ** (-2 + j / 10))),
    ['time/uneven-spacing'],
  ],
  [
    'land masked by a declared fill value',
    record(uniform(21), {
      fields: [{ values: movingValues(21).map(([a, b, c]) => [a, b, c, 1e20]), declaredFill: 1e20 }],
    }),
    ['value/fill-value'],
  ],
  [
    'a crash that repeated one output',
    record([...uniform(21, 0.1)], {
      fields: [{ values: uniform(21, 1).map((j) => movingValues(21)[j === 8 ? 7 : j]) }],
    }),
    ['value/frozen'],
  ],
];

describe('records of solvers', () => {
  it.each(records)('%s', (_name, plan, expected) => {
    expect(idsOf(judgeAll(makeSubject(plan), { thresholds: {} }))).toEqual(expected);
  });
});
