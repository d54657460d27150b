import { describe, expect, it } from 'vitest';
import { orderStep } from '#contract/recipe.ts';
import { valueFrozen } from '../../../../server/engine/checks/value-frozen.ts';
import { judge, makeSubject, movingValues, uniform, type RecordPlan } from './survey-factory.ts';

/** values[j] = moving[pattern[j]] */
const pattern = (indices: number[]) => indices.map((index) => movingValues(30)[index]);
const held = (m: number, k: number, offset = 0) =>
  pattern(Array.from({ length: m }, (_, j) => Math.floor((j + offset) / k)));

describe('value/frozen', () => {
  it('names the copies and offers to drop them', () => {
    const [found, ...more] = judge(
      valueFrozen,
      makeSubject({ stamps: uniform(6), fields: [{ values: pattern([0, 1, 1, 2, 2, 2]) }] }),
    );
    expect(more).toEqual([]);
    expect(found.path).toBe('/u');
    expect(found.evidence).toMatchObject({ indices: [2, 4, 5], count: 3 });
    expect(orderStep.parse({ step: found.remedy!.step, ...found.remedy!.parameters }).dropFrozen).toBe(true);
  });

  it.each<[string, RecordPlan]>([
    ['a run that comes to rest', { fields: [{ values: pattern([0, 1, 2, 3, 3, 3]) }] }],
    [
      'one frozen field of two',
      { fields: [{ values: pattern([0, 1, 1, 2]) }, { name: 'v', values: movingValues(4) }] },
    ],
    ['a rhythm of copies without another field that moves', { fields: [{ values: held(12, 3) }] }],
    [
      'a rhythm that breaks',
      { fields: [{ values: pattern([0, 0, 1, 1, 2, 2, 2, 3, 3]) }, { name: 'v', values: movingValues(9) }] },
    ],
  ])('fires for %s', (_name, plan) => {
    expect(judge(valueFrozen, makeSubject(plan))).toHaveLength(1);
  });

  it.each<[string, RecordPlan, number]>([
    ['a moving record', { stamps: uniform(5) }, 0],
    ['a field constant in time, which is value/constant-field', { fields: [{ values: pattern([2, 2, 2, 2]) }] }, 0],
    ['a periodic record', { fields: [{ values: pattern([0, 1, 2, 3, 0, 1, 2, 3]) }] }, 0],
    [
      'snapshots that differ in the last bit',
      {
        fields: [
          {
            values: [
              [1, 2],
              [1, 2 + 2 ** -51],
            ],
          },
        ],
      },
      0,
    ],
    [
      'zero and minus zero, which differ bit for bit',
      {
        fields: [
          {
            values: [
              [0, 1],
              [-0, 1],
              [0, 1],
            ],
          },
        ],
      },
      0,
    ],
    [
      'a field updated every third snapshot beside one that moves',
      { fields: [{ values: held(12, 3) }, { name: 'v', values: movingValues(12) }] },
      0,
    ],
    [
      'the same, beginning within a hold',
      { fields: [{ values: held(13, 3, 1) }, { name: 'v', values: movingValues(13) }] },
      0,
    ],
    [
      'a run that diverged to nothing but NaN',
      {
        fields: [
          {
            values: [
              [1, 2],
              [2, 3],
              [NaN, NaN],
              [NaN, NaN],
            ],
          },
        ],
      },
      0,
    ],
    ['one snapshot', { fields: [{ values: pattern([1]) }] }, 0],
    ['two snapshots', { fields: [{ values: pattern([1, 2]) }] }, 0],
    ['no snapshot', { fields: [{ values: [] }] }, 0],
    ['an unwritten end', { fields: [{ values: [...movingValues(4), [0, 0, 0, 0], [0, 0, 0, 0]] }] }, 2],
  ])('is silent for %s', (_name, plan, unwritten) => {
    expect(judge(valueFrozen, makeSubject(plan, { unwritten }))).toEqual([]);
  });
});
