import { describe, expect, it } from 'vitest';
import { orderStep } from '#contract/recipe.ts';
import { timeNotIncreasing } from '../../../../server/engine/checks/time-not-increasing.ts';
import { judge, makeSubject, movingValues, uniform } from './survey-factory.ts';

const found = (stamps: number[]) => judge(timeNotIncreasing, makeSubject({ stamps }));

describe('time/not-increasing', () => {
  it.each<[string, number[], number[]]>([
    ['two swapped stamps', [0, 1, 3, 2, 4, 5], [3]],
    ['the earlier part last', [5, 6, 7, 0, 1, 2], [3]],
    ['a record running backwards', [3, 2, 1, 0], [1, 2, 3]],
    ['a stray stamp', [0, 1, 2, 3, 1, 4, 5], [4]],
  ])('fires for %s', (_name, stamps, indices) => {
    const [judgement, ...more] = found(stamps);
    expect(more).toEqual([]);
    expect(judgement.path).toBe('/t');
    expect(judgement.evidence).toEqual({ indices, times: indices.map((j) => stamps[j]), count: indices.length });
    expect(orderStep.parse({ step: judgement.remedy!.step, ...judgement.remedy!.parameters }).sort).toBe(true);
  });

  it('says from where to where', () => {
    expect(found([5, 6, 7, 0, 1, 2])[0].message).toContain('first at snapshot 3: t = 0 s comes after 7 s');
  });

  it('fires for stamps that are no numbers, without putting them into the evidence', () => {
    const [judgement] = found([0, NaN, 2, 3]);
    expect(judgement.evidence).toEqual({ indices: [1], count: 1 });
    expect(judgement.remedy!.parameters.drop).toMatchObject([{ indices: [1] }]);
  });

  it('keeps the first 20 places and counts them all', () => {
    const [judgement] = found(uniform(60, -1));
    expect(judgement.evidence.indices).toHaveLength(20);
    expect(judgement.evidence.count).toBe(59);
  });

  it.each<[string, number[]]>([
    ['increasing stamps', uniform(20)],
    ['negative times that increase', [-3, -2, -1]],
    ['equal neighbours', [0, 1, 1, 2]],
    ['a restart', [0, 1, 2, 3, 2, 3, 4]],
    ['one stamp', [4]],
    ['no stamp', []],
  ])('is silent for %s', (_name, stamps) => {
    expect(found(stamps)).toEqual([]);
  });

  it('is silent on the end of a record that was never written', () => {
    const values = [...movingValues(3), ...movingValues(2).map((snapshot) => snapshot.map(() => 0))];
    expect(
      judge(timeNotIncreasing, makeSubject({ stamps: [1, 2, 3, 0, 0], fields: [{ values }] }, { unwritten: 2 })),
    ).toEqual([]);
  });
});
