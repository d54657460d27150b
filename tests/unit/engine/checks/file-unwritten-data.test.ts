import { describe, expect, it } from 'vitest';
import { orderStep } from '#contract/recipe.ts';
import { fileUnwrittenData } from '../../../../server/engine/checks/file-unwritten-data.ts';
import { judge, makeSubject, movingValues, uniform, type RecordPlan } from './survey-factory.ts';

const zeros = (count: number, value = 0) => Array.from({ length: count }, () => [value, value, value, value]);
const netcdfFill = 9.969209968386869e36;
const fading = Array.from({ length: 12 }, (_, j) => [1, 2, 3, 4].map((value) => value * 10 ** -j));

const mustFire: [string, RecordPlan, number | null][] = [
  ['chunks that were never allocated', { fields: [{ values: [...movingValues(6), ...zeros(4)], allocated: 24 }] }, 6],
  ['chunks missing in the middle only', { fields: [{ values: movingValues(6), allocated: 20 }] }, null],
  [
    'a reserved array of zeros, filled to snapshot 5',
    { stamps: uniform(10), fields: [{ values: [...movingValues(6), ...zeros(4)] }] },
    6,
  ],
  ['one unwritten snapshot', { fields: [{ values: [...movingValues(9), ...zeros(1)] }] }, 9],
  [
    'a declared fill value at the end',
    { fields: [{ values: [...movingValues(6), ...zeros(2, -1)], declaredFill: -1 }] },
    6,
  ],
  ['a declared NaN at the end', { fields: [{ values: [...movingValues(6), ...zeros(2, NaN)], declaredFill: NaN }] }, 6],
  [
    "netCDF's default fill value at the end",
    { fields: [{ values: [...movingValues(6), ...zeros(2, netcdfFill)] }] },
    6,
  ],
  [
    'two fields that end together, beside one that is zero throughout',
    {
      fields: [
        { values: [...movingValues(6), ...zeros(4)] },
        { name: 'v', values: [...movingValues(7), ...zeros(3)] },
        { name: 'w', values: zeros(10) },
      ],
    },
    7,
  ],
];

const mustNotFire: [string, RecordPlan][] = [
  ['a fully written record', { fields: [{ values: movingValues(6), allocated: 24 }] }],
  ['allocated chunks that reach beyond the shape', { fields: [{ values: movingValues(6), allocated: 32 }] }],
  ['a first snapshot of zeros', { fields: [{ values: [...zeros(1), ...movingValues(6)] }] }],
  ['a field that is zero throughout', { fields: [{ values: zeros(6) }] }],
  ['one snapshot of zeros', { fields: [{ values: zeros(1) }] }],
  ['a field that fades to zero', { fields: [{ values: [...fading, ...zeros(3)] }] }],
  [
    'a field switched off while another goes on',
    { fields: [{ values: [...movingValues(6), ...zeros(4)] }, { name: 'v', values: movingValues(10) }] },
  ],
  ['a uniform end state that is no fill value', { fields: [{ values: [...movingValues(6), ...zeros(3, 300)] }] }],
  ['a run that diverged to NaN', { fields: [{ values: [...movingValues(6), ...zeros(3, NaN)] }] }],
  [
    'zeros at the end where another fill value is declared',
    { fields: [{ values: [...movingValues(6), ...zeros(3)], declaredFill: -1 }] },
  ],
  ['no snapshot at all', { fields: [{ values: [] }] }],
  ['no field at all', { fields: [] }],
];

describe('file/unwritten-data', () => {
  it.each(mustFire)('fires for %s', (_name, plan, firstUnwritten) => {
    const [found, ...more] = judge(fileUnwrittenData, makeSubject(plan));
    expect(more).toEqual([]);
    expect(found.evidence.indices?.[0] ?? null).toBe(firstUnwritten);
    if (firstUnwritten === null) expect(found.remedy).toBeNull();
    else
      expect(orderStep.parse({ step: found.remedy!.step, ...found.remedy!.parameters }).drop[0].indices[0]).toBe(
        firstUnwritten,
      );
  });

  it.each(mustNotFire)('is silent for %s', (_name, plan) => {
    expect(judge(fileUnwrittenData, makeSubject(plan))).toEqual([]);
  });

  it('finds a time vector that was not written to its end', () => {
    const subject = makeSubject({ stamps: uniform(4) });
    subject.survey!.contents.arrays.push({
      ...subject.survey!.contents.arrays[0],
      path: '/t',
      shape: [4],
      allocated: 2,
    });
    subject.survey!.reading.roles.push({ path: '/t', role: 'time', why: 'name' });
    expect(judge(fileUnwrittenData, subject).map((found) => found.path)).toEqual(['/t']);
  });

  it('keeps to the threshold', () => {
    const subject = makeSubject({ fields: [{ values: [...movingValues(9), ...zeros(1)] }] });
    expect(judge(fileUnwrittenData, subject, { trailingSnapshots: 2 })).toEqual([]);
  });
});
