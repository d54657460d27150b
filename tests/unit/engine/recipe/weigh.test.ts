import { describe, expect, it } from 'vitest';
import { mustPlan, planRecipe } from '../../../../server/engine/recipe/plan.ts';
import { movingValues, uniform } from '../checks/survey-factory.ts';
import { recipeOf, source, type Loose } from './recipe-factory.ts';

const sum = (values: Iterable<number>) => [...values].reduce((a, b) => a + b, 0);
const weigh = (parameters: object, sources: ReturnType<typeof source>[]) => mustPlan(recipeOf([{ step: 'weigh', ...parameters } as Loose], sources.length), sources);
const problem = (parameters: object, sources: ReturnType<typeof source>[]) => planRecipe(recipeOf([{ step: 'weigh', ...parameters } as Loose], sources.length), sources).problems[0];

describe('time weights', () => {
  it('of the trapezoid are half the neighbouring intervals', () => {
    expect(Array.from(weigh({}, [source(1, [0, 1, 3, 7])]).timeWeights!)).toEqual([0.5, 1.5, 3, 2]);
  });

  it('sum to the duration of one run, by every rule that may be used', () => {
    const stamps = [0, 0.3, 0.7, 1, 1.4, 1.9, 2.2];
    for (const time of ['equal', 'trapezoid', 'simpson', 'simpson-guarded']) expect(sum(weigh({ time }, [source(1, stamps)]).timeWeights!)).toBeCloseTo(2.2, 13);
  });

  it('of several runs give each the same total, however many snapshots it stored and however long it ran', () => {
    const plan = weigh({}, [source(1, uniform(11, 0.1)), source(2, uniform(101, 0.03)), source(3, [0, 2])]);
    const totals = [0, 1, 2].map((s) => sum(plan.timeWeights!.filter((_, j) => plan.columns[j].source === s)));
    // Mean of the durations 1, 3 and 2.
    for (const total of totals) expect(total).toBeCloseTo(2, 12);
    expect(plan.duration).toBeCloseTo(6, 12);
  });

  it('never reach from one run into the next', () => {
    const [alone] = [weigh({}, [source(1, [0, 1, 3])])], both = weigh({}, [source(1, [0, 1, 3]), source(2, [100, 101, 103])]);
    expect(Array.from(both.timeWeights!)).toEqual([...alone.timeWeights!, ...alone.timeWeights!]);
  });

  it('of an ensemble are equal, and its total is 1', () => {
    const samples = source(1, null, { time: { kind: 'ensemble' } });
    expect(Array.from(weigh({ time: 'equal' }, [samples]).timeWeights!)).toEqual(new Array(6).fill(1 / 6));
    expect(problem({ time: 'trapezoid' }, [samples])).toEqual({ step: 1, code: 'rule-not-admissible', message: expect.stringMatching(/Run run 1 has no time axis/) });
  });

  it('that would be negative are refused, with the run, the place and the reason', () => {
    expect(problem({ time: 'simpson' }, [source(1, [0, 1, 4])])).toEqual({ step: 1, code: 'rule-not-admissible', message: expect.stringMatching(/"simpson" cannot be used on run run 1: .*negative weight.*snapshot 0 at t = 0.*square root/) });
    // Simpson on two intervals h0, h1 has the weights (h0+h1)/6 (2 - h1/h0), ...: never negative within 2:1.
    expect(problem({ time: 'simpson' }, [source(1, [0, 1, 3])])).toBeUndefined();
  });

  it('that the archive brings follow its snapshots through the steps before', () => {
    const given = source(1, [0, 1, 1, 2, 3], { timeWeights: [1, 2, 50, 2, 1] });
    const plan = mustPlan(recipeOf([{ step: 'order' }, { step: 'weigh', time: 'provided' }]), [given]);
    // 1, 2, 2, 1 scaled to the duration 3.
    expect(Array.from(plan.timeWeights!)).toEqual([0.5, 1, 1, 0.5]);
    expect(problem({ time: 'provided' }, [source(1, [0, 1])])?.message).toMatch(/brings no time weights/);
  });

  it.each(['periodic', 'gauss-legendre', 'mass-spline'])('of the rule %s, which is not there yet, are refused and nothing breaks', (time) => {
    expect(problem({ time }, [source(1, uniform(9))])?.step).toBe(1);
  });
});

describe('space weights', () => {
  it('of the tensor rule are the product of the axes, once a field', () => {
    const axes = [{ name: 'y' as const, nodes: [0, 1] }, { name: 'x' as const, nodes: [0, 1, 3] }];
    const fields = ['u', 'p'].map((name) => ({ name, values: movingValues(4, 6) }));
    const plan = mustPlan(recipeOf([{ step: 'weigh' }], 1, ['u', 'p']), [source(1, uniform(4), { axes, fields })]);
    const one = [0.25, 0.75, 0.5, 0.25, 0.75, 0.5];
    expect(Array.from(plan.spaceWeights!)).toEqual([...one, ...one]);
    expect(plan.spaceRule).toMatchObject({ chosen: 'tensor', sum: 3, measure: 3 });
  });

  it('need coordinates for the tensor rule, and say so', () => {
    expect(problem({}, [source(1, uniform(4), { axes: [{ name: 'x', nodes: null, count: 4 }] })])).toEqual({ step: 1, code: 'rule-not-admissible', message: expect.stringMatching(/axis x has none/) });
  });

  it('that the archive brings are taken', () => {
    expect(Array.from(weigh({ space: 'provided' }, [source(1, uniform(4), { spaceWeights: [1, 2, 3, 4] })]).spaceWeights!)).toEqual([1, 2, 3, 4]);
  });
});
