import { describe, expect, it } from 'vitest';
import { orderStep } from '#contract/recipe.ts';
import { valueRepeated } from '../../../../server/engine/checks/value-repeated.ts';
import { judge, makeSubject, movingValues, uniform, type RecordPlan } from './survey-factory.ts';

const pattern = (indices: number[]) => indices.map((index) => movingValues(30)[index]);

describe('value/repeated', () => {
  it('names the later snapshot and the one that it repeats', () => {
    const [found, ...more] = judge(
      valueRepeated,
      makeSubject({ stamps: uniform(5), fields: [{ values: pattern([0, 1, 2, 0, 3]) }] }),
    );
    expect(more).toEqual([]);
    expect(found.evidence).toMatchObject({ indices: [3], count: 1, repeats: [0] });
    expect(orderStep.parse({ step: found.remedy!.step, ...found.remedy!.parameters }).drop[0].indices).toEqual([3]);
  });

  it('is only a caution, which a truly periodic record may waive', () => {
    const found = judge(valueRepeated, makeSubject({ fields: [{ values: pattern([0, 1, 2, 3, 0, 1, 2, 3]) }] }));
    expect(valueRepeated.severity).toBe('caution');
    expect(found[0].evidence).toMatchObject({ indices: [4, 5, 6, 7], repeats: [0, 1, 2, 3] });
  });

  it('counts a held repeat once', () => {
    const [found] = judge(valueRepeated, makeSubject({ fields: [{ values: pattern([0, 1, 0, 0, 2]) }] }));
    expect(found.evidence.indices).toEqual([2]);
  });

  it.each<[string, RecordPlan, number]>([
    ['a moving record', { stamps: uniform(8) }, 0],
    ['copies side by side, which are value/frozen', { fields: [{ values: pattern([0, 1, 1, 1, 2]) }] }, 0],
    ['a constant field', { fields: [{ values: pattern([0, 0, 0]) }] }, 0],
    [
      'the overlap of a restart that computed the same again',
      { stamps: [0, 1, 2, 3, 2, 3, 4], fields: [{ values: pattern([0, 1, 2, 3, 2, 3, 4]) }] },
      0,
    ],
    [
      'snapshots of nothing but NaN',
      {
        fields: [
          {
            values: [
              [NaN, NaN],
              [1, 2],
              [NaN, NaN],
            ],
          },
        ],
      },
      0,
    ],
    ['one snapshot', { fields: [{ values: pattern([0]) }] }, 0],
    ['two equal snapshots', { fields: [{ values: pattern([0, 0]) }] }, 0],
    ['no snapshot', { fields: [{ values: [] }] }, 0],
    [
      'an unwritten end that equals the first snapshot of zeros',
      { fields: [{ values: [[0, 0, 0, 0], ...movingValues(4), [0, 0, 0, 0]] }] },
      1,
    ],
  ])('is silent for %s', (_name, plan, unwritten) => {
    expect(judge(valueRepeated, makeSubject(plan, { unwritten }))).toEqual([]);
  });

  it('finds the repeats of a long record', () => {
    const values = Array.from({ length: 20_000 }, (_, j) => [Math.sin(j % 5000), j % 5000]);
    expect(judge(valueRepeated, makeSubject({ fields: [{ values }] }))[0].evidence.count).toBe(15_000);
  });
});
