import { describe, expect, it } from 'vitest';
import { orderStep } from '#contract/recipe.ts';
import { valueNonFinite } from '../../../../server/engine/checks/value-non-finite.ts';
import { judge, makeSubject, movingValues, uniform, type RecordPlan } from './survey-factory.ts';

function withValue(value: number, places: [number, number][], m = 6): number[][] {
  const values = movingValues(m);
  for (const [snapshot, node] of places) values[snapshot][node] = value;
  return values;
}

describe('value/non-finite', () => {
  it('says how many, and where and when first seen', () => {
    const [found, ...more] = judge(
      valueNonFinite,
      makeSubject({
        stamps: uniform(6),
        fields: [
          {
            values: withValue(NaN, [
              [2, 3],
              [4, 0],
              [4, 1],
            ]),
          },
        ],
      }),
    );
    expect(more).toEqual([]);
    expect(found.path).toBe('/u');
    expect(found.evidence).toMatchObject({ indices: [2, 4], count: 3, snapshots: 2, firstNode: 3, place: 'x = 1.5 m' });
    expect(found.message).toContain('first in snapshot 2 (t = 0.02 s) at node 3 (x = 1.5 m)');
    expect(orderStep.parse({ step: found.remedy!.step, ...found.remedy!.parameters }).drop[0].indices).toEqual([2, 4]);
  });

  it('tells the place on a grid of two axes', () => {
    const values = movingValues(3, 6);
    values[1][4] = Infinity;
    const [found] = judge(
      valueNonFinite,
      makeSubject({
        fields: [{ values }],
        axes: [
          { name: 'y', nodes: [10, 20] },
          { name: 'x', nodes: [1, 2, 3] },
        ],
      }),
    );
    expect(found.evidence.place).toBe('y = 20 m, x = 2 m');
  });

  it('takes the same number in every snapshot for a mask, and does not offer to drop the record', () => {
    const [found] = judge(
      valueNonFinite,
      makeSubject({
        fields: [
          {
            values: withValue(
              NaN,
              uniform(6, 1).map((j): [number, number] => [j, 1]),
            ),
          },
        ],
      }),
    );
    expect(found.message).toContain('probably a mask');
    expect(found.remedy).toBeNull();
  });

  it('fires for a run that diverged at its end', () => {
    const [found] = judge(
      valueNonFinite,
      makeSubject({ fields: [{ values: [...movingValues(6), [NaN, NaN, NaN, NaN]] }] }),
    );
    expect(found.evidence).toMatchObject({ indices: [6], count: 4 });
  });

  it.each<[string, RecordPlan, number]>([
    ['finite values', {}, 0],
    ['the largest double', { fields: [{ values: withValue(Number.MAX_VALUE, [[1, 1]]) }] }, 0],
    ['one snapshot', { fields: [{ values: [[1, 2]] }] }, 0],
    ['no value', { fields: [{ values: [] }] }, 0],
    [
      'an unwritten end of NaN',
      { fields: [{ values: [...movingValues(6), [NaN, NaN, NaN, NaN]], declaredFill: NaN }] },
      1,
    ],
  ])('is silent for %s', (_name, plan, unwritten) => {
    expect(judge(valueNonFinite, makeSubject(plan, { unwritten }))).toEqual([]);
  });
});
