import { describe, expect, it } from 'vitest';
import { valueFillValue } from '../../../../server/engine/checks/value-fill-value.ts';
import { judge, makeSubject, movingValues, type FieldPlan } from './survey-factory.ts';

function holding(
  value: number,
  count: number,
  base: (j: number, i: number) => number = (j, i) => Math.sin(j + i),
  m = 10,
  n = 20,
): number[][] {
  const values = Array.from({ length: m }, (_, j) => Array.from({ length: n }, (_, i) => base(j, i)));
  for (let k = 0; k < count; k++) values[Math.floor(k / n)][k % n] = value;
  return values;
}
const found = (field: FieldPlan) =>
  judge(
    valueFillValue,
    makeSubject({ fields: [field], axes: [{ name: 'x', nodes: field.values[0].map((_, i) => i) }] }),
  );
const pressure = (j: number, i: number) => 15000 * Math.sin(j + 0.3 * i);

describe('value/fill-value', () => {
  it.each<[string, FieldPlan]>([
    ['one declared fill value', { values: holding(-5, 1), declaredFill: -5 }],
    ['one declared fill value that lies among the others', { values: holding(0.5, 1), declaredFill: 0.5 }],
    ['a single 1e20 among velocities', { values: holding(1e20, 1) }],
    ["netCDF's default among velocities", { values: holding(9.969209968386869e36, 7) }],
    ['-9999 among velocities', { values: holding(-9999, 4) }],
    ['a single -9999 among temperatures', { values: holding(-9999, 1, (j, i) => 300 + 5 * Math.sin(j + i)) }],
    ['-9999 for land among depths', { values: holding(-9999, 60, (_, i) => 3000 * Math.sin(i)) }],
    [
      '-9999 in every snapshot, as a mask',
      { values: movingValues(10, 20).map((snapshot) => snapshot.map((value, i) => (i < 5 ? -9999 : value))) },
    ],
    ['nothing but 1e20', { values: holding(1e20, 200) }],
    ['1e20 on an otherwise constant field', { values: holding(1e20, 2, () => 1) }],
  ])('fires for %s', (_name, field) => {
    const judgements = found(field);
    expect(judgements).toHaveLength(1);
    expect(judgements[0].path).toBe('/u');
  });

  it.each<[string, FieldPlan]>([
    ['no constant', { values: movingValues(10, 20) }],
    ['a pressure that really passes through -9999 once', { values: holding(-9999, 1, pressure) }],
    ['a pressure that really holds -9999 often', { values: holding(-9999, 6, pressure) }],
    [
      'integers up to 20000 that hold -999',
      { values: holding(-999, 5, (j, i) => Math.round(20000 * Math.sin(j + i))) },
    ],
    ['zeros where 0 is declared', { values: holding(0, 30), declaredFill: 0 }],
    ['another declared value that does not occur', { values: movingValues(10, 20), declaredFill: -5 }],
    [
      'a depth of -9999 m in a trench, fewer than three times',
      { values: holding(-9999, 2, (_, i) => -4000 + 3000 * Math.sin(i)) },
    ],
  ])('is silent for %s', (_name, field) => {
    expect(found(field)).toEqual([]);
  });

  it('counts the values, names the first, and offers to drop when few snapshots are concerned', () => {
    const [judgement] = found({ values: holding(-9999, 25) });
    expect(judgement.evidence).toMatchObject({ indices: [0, 1], count: 25, value: -9999, declared: false });
    expect(judgement.message).toContain('first in snapshot 0 at node 0 (x = 0 m)');
    expect(judgement.remedy?.step).toBe('order');
    expect(found({ values: holding(-9999, 190) })[0].remedy).toBeNull();
  });

  it('finds two constants beside one another', () => {
    const values = holding(1e20, 4);
    values[5][5] = values[5][6] = values[5][7] = -5;
    expect(found({ values, declaredFill: -5 }).map((judgement) => judgement.evidence.value)).toEqual([-5, 1e20]);
  });

  it('keeps to the thresholds', () => {
    const subject = makeSubject({
      fields: [{ values: holding(-9999, 4) }],
      axes: [{ name: 'x', nodes: movingValues(1, 20)[0] }],
    });
    expect(judge(valueFillValue, subject, { minimumCount: 5, loneOutlier: 1e9 })).toEqual([]);
  });
});
