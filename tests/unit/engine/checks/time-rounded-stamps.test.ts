import { describe, expect, it } from 'vitest';
import { timeRoundedStamps } from '../../../../server/engine/checks/time-rounded-stamps.ts';
import { judge, makeSubject, uniform, type RecordPlan } from './survey-factory.ts';

describe('time/rounded-stamps', () => {
  it.each<[string, RecordPlan, string]>([
    ['float32 stamps', { stamps: Float32Array.from(uniform(1000, 0.001)), stampType: 'float32' }, 'float32'],
    [
      'float32 stamps of 1e5 s with a step of 0.01 s',
      { stamps: Float32Array.from(uniform(200, 0.01, 1e5)), stampType: 'float32' },
      'float32',
    ],
    ['stamps that were float32 once', { stamps: Float32Array.from(uniform(1000, 0.001)) }, 'float32'],
    [
      'stamps printed with 6 digits',
      { stamps: uniform(200, 0.0123456789, 1).map((stamp) => Number(stamp.toPrecision(6))) },
      '5 decimals',
    ],
  ])('fires for %s', (_name, plan, explainedBy) => {
    const [found, ...more] = judge(timeRoundedStamps, makeSubject(plan));
    expect(more).toEqual([]);
    expect(found.evidence.explainedBy).toBe(explainedBy);
    expect(found.remedy).toBeNull();
  });

  it('names the step of the even grid', () => {
    const stamps = uniform(601, 1 / 3).map((stamp) => Number(stamp.toFixed(4)));
    const [found] = judge(timeRoundedStamps, makeSubject({ stamps }));
    expect(found.evidence.step).toBeCloseTo(1 / 3, 6);
    expect(found.message).toContain('step of 0.333333 s');
  });

  it.each<[string, RecordPlan]>([
    ['uniform doubles', { stamps: uniform(1000, 0.001) }],
    ['float32 stamps that are exact', { stamps: Float32Array.from(uniform(100, 0.25)), stampType: 'float32' }],
    ['truly uneven stamps', { stamps: [0, 1, 2, 3, 7] }],
    ['two stamps', { stamps: [0, Math.fround(0.1)] }],
    ['one stamp', { stamps: [3] }],
    ['no stamp', { stamps: [] }],
  ])('is silent for %s', (_name, plan) => {
    expect(judge(timeRoundedStamps, makeSubject(plan))).toEqual([]);
  });
});
