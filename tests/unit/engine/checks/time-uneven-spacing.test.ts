import { describe, expect, it } from 'vitest';
import { weighStep } from '#contract/recipe.ts';
import { timeUnevenSpacing } from '../../../../server/engine/checks/time-uneven-spacing.ts';
import { judge, makeSubject, uniform, type RecordPlan } from './survey-factory.ts';

const adaptive = Array.from({ length: 40 }, (_, j) => 0.01 * j + 0.002 * Math.sin(j));
const printed = (digits: number, stamps: number[]) => stamps.map((stamp) => Number(stamp.toPrecision(digits)));

describe('time/uneven-spacing', () => {
  it.each<[string, RecordPlan]>([
    ['an adaptive step', { stamps: adaptive }],
    ['logarithmic spacing', { stamps: Array.from({ length: 20 }, (_, j) => 10 ** (j / 5)) }],
    ['two rates', { stamps: [...uniform(20, 0.01), ...uniform(20, 0.05, 0.24)] }],
    ['a gap in a uniform record', { stamps: [...uniform(20, 1), ...uniform(20, 1, 30)] }],
    ['a shortened last step', { stamps: [...uniform(20, 1), 19.3] }],
    [
      'months of 28 to 31 days',
      { stamps: [0, 31, 59, 90, 120, 151, 181, 212, 243, 273, 304, 334], timeUnit: 'days since 2001-01-01' },
    ],
    ['an adaptive step in float32', { stamps: Float32Array.from(adaptive), stampType: 'float32' }],
    ['an adaptive step printed with 6 digits', { stamps: printed(6, adaptive) }],
    ['three stamps', { stamps: [0, 1, 3] }],
  ])('fires for %s', (_name, plan) => {
    const [found, ...more] = judge(timeUnevenSpacing, makeSubject(plan));
    expect(more).toEqual([]);
    expect(found.path).toBe('/t');
    expect(found.evidence.ratio).toBeGreaterThan(1);
    expect(weighStep.parse({ step: found.remedy!.step, ...found.remedy!.parameters }).time).not.toBe('equal');
  });

  it.each<[string, RecordPlan]>([
    ['uniform stamps', { stamps: uniform(100, 0.01) }],
    ['uniform stamps in float32', { stamps: Float32Array.from(uniform(1000, 0.001)), stampType: 'float32' }],
    [
      'float32 stamps of 1e5 s with a step of 0.01 s',
      { stamps: Float32Array.from(uniform(200, 0.01, 1e5)), stampType: 'float32' },
    ],
    ['uniform stamps printed with 6 digits', { stamps: printed(6, uniform(200, 0.0123456789)) }],
    ['uniform stamps with one repeated', { stamps: [0, 1, 2, 2, 3, 4] }],
    ['uniform stamps after a restart at a stored time', { stamps: [...uniform(50, 0.5), ...uniform(40, 0.5, 20)] }],
    ['uniform stamps out of order', { stamps: [0, 1, 3, 2, 4, 5] }],
    ['two stamps', { stamps: [0, 7] }],
    ['one stamp', { stamps: [3] }],
    ['no stamp', { stamps: [] }],
    ['an ensemble', { time: { kind: 'ensemble' } }],
  ])('is silent for %s', (_name, plan) => {
    expect(judge(timeUnevenSpacing, makeSubject(plan))).toEqual([]);
  });

  it('says by how much, in the unit of the time', () => {
    const [found] = judge(
      timeUnevenSpacing,
      makeSubject({ stamps: [0, 1, 2, 3, 7], timeUnit: 'days since 2001-01-01' }),
    );
    expect(found.message).toContain('between 1 days and 4 days, 4 to 1');
    expect(found.evidence).toMatchObject({ indices: [3], times: [3], shortest: 1, widest: 4 });
  });
});
