import { describe, expect, it } from 'vitest';
import { weighStep } from '#contract/recipe.ts';
import { timeEvenPointCount } from '../../../../server/engine/checks/time-even-point-count.ts';
import { judge, makeSubject, uniform, type RecordPlan } from './survey-factory.ts';

describe('time/even-point-count', () => {
  it.each<[string, RecordPlan, number]>([
    ['100 uniform stamps', { stamps: uniform(100) }, 100],
    ['four uniform stamps', { stamps: uniform(4) }, 4],
    ['100 uniform stamps in float32', { stamps: Float32Array.from(uniform(100, 0.001)), stampType: 'float32' }, 100],
    ['101 stamps of which one is repeated', { stamps: [...uniform(100), 0.99] }, 100],
  ])('fires for %s', (_name, plan, count) => {
    const [found, ...more] = judge(timeEvenPointCount, makeSubject(plan));
    expect(more).toEqual([]);
    expect(found.evidence.count).toBe(count);
    expect(weighStep.parse({ step: found.remedy!.step, ...found.remedy!.parameters }).time).toBe('simpson');
  });

  it.each<[string, RecordPlan]>([
    ['101 uniform stamps', { stamps: uniform(101) }],
    ['100 uneven stamps', { stamps: Array.from({ length: 100 }, (_, j) => j ** 1.5) }],
    ['102 stamps of which one is repeated', { stamps: [...uniform(101), 1] }],
    ['two stamps', { stamps: [0, 1] }],
    ['no stamp', { stamps: [] }],
    ['an ensemble of 100', { time: { kind: 'ensemble' } }],
  ])('is silent for %s', (_name, plan) => {
    expect(judge(timeEvenPointCount, makeSubject(plan))).toEqual([]);
  });
});
