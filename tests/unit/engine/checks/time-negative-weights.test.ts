import { describe, expect, it } from 'vitest';
import { weighStep } from '#contract/recipe.ts';
import type { TimeRuleId } from '#contract/weights.ts';
import { timeNegativeWeights } from '../../../../server/engine/checks/time-negative-weights.ts';
import { judge, makeSubject, uniform, type RecordPlan } from './survey-factory.ts';

/** The second pair of intervals is 1 and 4: more than 2:1, so Simpson's end weight there is negative. */
const jump: RecordPlan = { stamps: [0, 1, 2, 3, 7, 8, 9] };
const found = (timeRule: TimeRuleId | null, plan: RecordPlan) =>
  judge(timeNegativeWeights, makeSubject(plan, { timeRule }));

describe('time/negative-weights', () => {
  it('fires for Simpson where a pair of intervals differs by more than 2:1', () => {
    const [judgement, ...more] = found('simpson', jump);
    expect(more).toEqual([]);
    // (h0+h1)/6 (2 - h1/h0) of h0 = 1, h1 = 4 is -5/3; the pair before adds 1/3.
    expect(judgement.evidence).toMatchObject({ indices: [2], times: [2], count: 1, rule: 'simpson' });
    expect(judgement.evidence.least).toBeCloseTo(-4 / 3, 12);
    expect(weighStep.parse({ step: judgement.remedy!.step, ...judgement.remedy!.parameters }).time).not.toBe('simpson');
  });

  it('finds negative weights that the archive brings', () => {
    const [judgement] = found('provided', { stamps: uniform(4), timeWeights: [1, -0.5, 1, 1] });
    expect(judgement.evidence).toMatchObject({ indices: [1], count: 1, least: -0.5 });
  });

  it('points into the storage order', () => {
    expect(found('simpson', { stamps: [0, 0, 1, 2, 3, 7, 8, 9] })[0].evidence.indices).toEqual([3]);
  });

  it.each<[string, TimeRuleId | null, RecordPlan]>([
    ['no rule chosen', null, jump],
    ['the trapezoid on the same stamps', 'trapezoid', jump],
    ['guarded Simpson on the same stamps', 'simpson-guarded', jump],
    ['Simpson on uniform stamps', 'simpson', { stamps: uniform(101) }],
    ['Simpson on an even number of uniform stamps', 'simpson', { stamps: uniform(100) }],
    ['Simpson where a pair differs by exactly 2:1', 'simpson', { stamps: [0, 1, 3, 4, 5] }],
    [
      'Simpson on float32 stamps that jitter by rounding',
      'simpson',
      { stamps: Float32Array.from(uniform(201, 0.01, 1e5)), stampType: 'float32' },
    ],
    ['a rule that is not there yet', 'gauss-legendre', jump],
    ['provided weights where there are none', 'provided', jump],
    ['one stamp', 'simpson', { stamps: [1] }],
    ['no stamp', 'simpson', { stamps: [] }],
  ])('is silent for %s', (_name, rule, plan) => {
    expect(found(rule, plan)).toEqual([]);
  });
});
