import { describe, expect, it } from 'vitest';
import { orderStep } from '#contract/recipe.ts';
import { timeRestartOverlap } from '../../../../server/engine/checks/time-restart-overlap.ts';
import { judge, makeSubject, uniform } from './survey-factory.ts';

const found = (stamps: number[]) => judge(timeRestartOverlap, makeSubject({ stamps }));
const step = (stamps: number[]) => {
  const { remedy } = found(stamps)[0];
  return orderStep.parse({ step: remedy!.step, ...remedy!.parameters });
};

describe('time/restart-overlap', () => {
  it('names the first snapshot after the jump, and how much is covered twice', () => {
    const stamps = [...uniform(101, 0.01), ...uniform(60, 0.01, 0.805)];
    const [judgement, ...more] = found(stamps);
    expect(more).toEqual([]);
    expect(judgement.evidence).toMatchObject({ indices: [101], times: [0.805], count: 1, overlapped: 20, from: [1] });
    expect(judgement.message).toContain('from 1 s to 0.805 s');
  });

  it('offers the later segment, or the earlier one when the later does not reach as far', () => {
    expect(step([0, 1, 2, 3, 2, 3, 4]).restart).toBe('keep-later');
    expect(step([0, 1, 2, 3, 4, 1, 2]).restart).toBe('keep-earlier');
  });

  it('makes one finding of several restarts', () => {
    const [judgement, ...more] = found([0, 1, 2, 3, 2, 3, 4, 5, 4, 5, 6]);
    expect(more).toEqual([]);
    expect(judgement.evidence.indices).toEqual([4, 8]);
  });

  it('says when it may be two runs', () => {
    expect(found([0, 1, 2, 3, 0, 1, 2, 3])[0].message).toContain('perhaps two runs');
    expect(found([0, 1, 2, 3, 2, 3, 4])[0].message).not.toContain('perhaps two runs');
  });

  it.each<[string, number[]]>([
    ['increasing stamps', uniform(20)],
    ['a restart that continues exactly', [0, 1, 2, 3, 4]],
    ['a checkpoint written twice', [0, 1, 2, 2, 3, 4]],
    ['two swapped stamps', [0, 1, 3, 2, 4]],
    ['a jump to before the start', [5, 6, 7, 0, 1]],
    ['one stamp', [0]],
    ['no stamp', []],
  ])('is silent for %s', (_name, stamps) => {
    expect(found(stamps)).toEqual([]);
  });
});
