/** What theory says of every time rule. */
import { describe, expect, it } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import { timeRuleResult } from '#contract/weights.ts';
import { timeRules } from '../../../../server/engine/quadrature/index.ts';
import { judgeTimeRule, judgeTimeRules, weightsBySegment } from '../../../../server/engine/quadrature/judge.ts';
import { accurateSum } from '../../../../server/engine/quadrature/stamps.ts';
import { uneven, uniform } from './stamp-sets.ts';

const eps = Number.EPSILON;

/** Steps of 1, and from stamp `change` on of `step`; 101 stamps. */
const twoRates = (change: number, step = 1.5) => Float64Array.from({ length: 101 }, (_, j) => (j < change ? j : change + step * (j - change)));

describe('every rule', () => {
  const records: [string, Float64Array][] = [
    ['uniform, odd', uniform(41)], ['uniform, even', uniform(40, -3, 7)], ['uneven', uneven(57, 1)], ['uneven, even', uneven(58, 2)], ['wild', uneven(33, 3, 40)],
    ['two snapshots', Float64Array.of(2, 5)], ['three snapshots', Float64Array.of(0, 1, 3)], ['far from zero', uniform(50, 1e6, 1e6 + 10)],
  ];
  it.each(records)('sums to the duration on %s stamps', (_name, stamps) => {
    for (const rule of timeRules) {
      const duration = stamps[stamps.length - 1] - stamps[0], scale = Math.max(Math.abs(stamps[0]), Math.abs(stamps[stamps.length - 1]));
      expect(Math.abs(accurateSum(rule.weights(stamps)) - duration), rule.id).toBeLessThan(64 * eps * scale * stamps.length);
    }
  });
  it('gives one snapshot the weight 1', () => {
    for (const rule of timeRules) expect(Array.from(rule.weights(Float64Array.of(7))), rule.id).toEqual([1]);
  });
  it('judges 100,000 stamps in O(m)', () => {
    const results = judgeTimeRules(uneven(100_000, 4), 'float64');
    expect(results.map((result) => result.weights.length)).toEqual(timeRules.map(() => 100_000));
  });
  it('gives figures that the contract takes, and the effective share in them, on any stamps', () => {
    for (const [name, stamps] of [...records, ['tiny intervals', uniform(9, 0, 1e-290)], ['huge intervals', uniform(9, 0, 1e290)], ['a ratio of 1e200', Float64Array.of(0, 1e-200, 1, 2, 3)]] as [string, Float64Array][]) {
      for (const result of judgeTimeRules(stamps, null, { energies: stamps.map(() => 1), provided: stamps.map(() => 1) })) {
        expect(timeRuleResult.safeParse(result).error, `${name}, ${result.id}`).toBeUndefined();
        expect(result.effective).toBeLessThanOrEqual(1 + 1e-12);
        expect(result.admissible).toBe(result.negative === 0 && !(result.id === 'simpson' && stamps.length < 3));
      }
    }
  });
  it('takes stamps that are even but for rounding as even', () => {
    const rounded = Float64Array.from({ length: 41 }, (_, j) => Math.fround(100 + j * 0.1)), even = uniform(41, rounded[0], rounded[40]);
    for (const rule of timeRules) {
      const [a, b] = [weightsBySegment(rule.id, rounded, 'float32'), rule.weights(even)];
      a.forEach((weight, j) => expect(Math.abs(weight / b[j] - 1), rule.id).toBeLessThan(1e-10));
    }
  });
  it('gives a snapshot alone between two borders the usual interval', () => {
    const stamps = Float64Array.of(0, 1, 3, 50, 90, 93);
    for (const rule of timeRules) expect(weightsBySegment(rule.id, stamps, 'float64', [0, 3, 4])[3], rule.id).toBe(2);
    expect(Array.from(weightsBySegment('trapezoid', Float64Array.of(4, 2), 'float64', [0, 1]))).toEqual([1, 1]);
  });
  it.each([[[]], [[1]], [[0, 3, 3]], [[0, 9]], [[0, 1.5]]])('refuses segments that begin at %j', (segments) => {
    expect(() => weightsBySegment('trapezoid', uniform(5), 'float64', segments)).toThrow(/Segments must begin|no time stamp/);
  });
  it('treats two segments as the sum of its parts', () => {
    const a = uneven(20, 5), b = uneven(31, 6).map((t) => t + 500), both = Float64Array.from([...a, ...b]);
    for (const rule of timeRules) {
      expect(Array.from(weightsBySegment(rule.id, both, 'float64', [0, 20])), rule.id).toEqual([...rule.weights(a), ...rule.weights(b)]);
    }
  });
});

describe('degree of exactness, found on the stamps', () => {
  const degree = (id: Parameters<typeof judgeTimeRule>[0], stamps: Float64Array) => judgeTimeRule(id, stamps, 'float64').degree;
  it.each([
    ['trapezoid', uniform(21), 1], ['trapezoid', uneven(22, 7), 1], ['simpson', uniform(21), 3], ['simpson', uniform(22), 2], ['simpson', uneven(21, 8), 2], ['simpson', uneven(22, 9), 2],
    ['simpson-guarded', uniform(21), 3], ['simpson-guarded', uneven(21, 10, 1.9), 2], ['simpson-guarded', Float64Array.of(0, 1, 4, 5, 6, 7), 1],
    // A change of rate in the middle of a long record, within a pair and between pairs, seen although its ends are even.
    ['simpson', twoRates(50), 3], ['simpson', twoRates(51), 2], ['simpson-guarded', twoRates(50, 3), 3], ['simpson-guarded', twoRates(51, 3), 1],
    ['simpson', Float64Array.from({ length: 201 }, (_, j) => Number((j / 30).toFixed(3))), 3], ['simpson', uniform(101, 1e6, 1e6 + 1), 3], ['equal', uniform(40), 1], ['equal', uniform(100_000), 1], ['trapezoid', uniform(100_000), 1], ['simpson', uniform(100_001), 3], ['equal', uneven(9, 11), 0],
  ] as const)('%s on %#', (id, stamps, expected) => {
    expect(degree(id, stamps)).toBe(expected);
  });
});

describe('sign', () => {
  it('simpson turns negative exactly when a pair differs by more than 2:1', () => {
    for (const [h0, h1, negative] of [[1, 1.99, 0], [1, 2.01, 1], [2.01, 1, 1], [1, 1, 0]] as const) {
      const result = judgeTimeRule('simpson', Float64Array.of(0, h0, h0 + h1), 'float64');
      expect(result.negative, `${h0}:${h1}`).toBe(negative);
      expect(result.admissible).toBe(negative === 0);
      if (negative) expect(result.why).toMatch(/1 negative weight/);
    }
  });
  it('the guarded rule is never negative', () => {
    for (let seed = 1; seed < 200; seed++) expect(Math.min(...timeRules.find((rule) => rule.id === 'simpson-guarded')!.weights(uneven(5 + (seed % 40), seed, 1 + (seed % 17))))).toBeGreaterThanOrEqual(0);
  });
  it('the guarded rule is simpson where nothing needs a guard', () => {
    for (const stamps of [uniform(21), uniform(22), uneven(31, 12, 1.9)]) expect(Array.from(weightsBySegment('simpson-guarded', stamps, 'float64'))).toEqual(Array.from(weightsBySegment('simpson', stamps, 'float64')));
  });
});

describe('effective share of the snapshots', () => {
  it.each([['trapezoid', 41, 0.97, 1], ['simpson', 41, 0.88, 0.92], ['equal', 41, 1, 1]] as const)('%s on %i uniform stamps', (id, m, low, high) => {
    const { effective } = judgeTimeRule(id, uniform(m), 'float64');
    expect(effective).toBeGreaterThanOrEqual(low - 1e-12);
    expect(effective).toBeLessThanOrEqual(high + 1e-12);
  });
});

describe('error estimate of the mean energy', () => {
  it('bounds the true error for a smooth energy', () => {
    const stamps = uniform(41, 0, 2), energies = stamps.map((t) => Math.exp(-t) * (1 + t));
    const exact = 2 - 4 * Math.exp(-2); // integral of (1 + t) e^-t over [0, 2]
    for (const id of ['trapezoid', 'simpson'] as const) {
      const { weights, energy_error: estimate } = judgeTimeRule(id, stamps, 'float64', { energies });
      const value = weights.reduce((sum, a, j) => sum + a * energies[j], 0);
      expect(Math.abs(value - exact) / exact, id).toBeLessThan(estimate!);
    }
  });
});

describe('energies that cannot be judged', () => {
  const estimate = (m: number, energies: number[]) => judgeTimeRule('trapezoid', uniform(m), 'float64', { energies }).energy_error;
  it.each([['four snapshots', 4, [1, 1, 1, 1]], ['no energy', 5, [0, 0, 0, 0, 0]], ['NaN', 5, [1, NaN, 1, 1, 1]], ['infinity', 5, [1, Infinity, 1, 1, 1]]] as const)('%s', (_name, m, energies) => expect(estimate(m, [...energies])).toBeNull());
  it('another number of them is refused', () => expect(() => estimate(5, [1, 1])).toThrow(/2 energies for 5 snapshots/));
});

describe('provided weights', () => {
  const stamps = uniform(4, 0, 3);
  it('are scaled to the duration', () => {
    expect(judgeTimeRule('provided', stamps, 'float64', { provided: [1, 2, 2, 1] }).weights).toEqual([0.5, 1, 1, 0.5]);
  });
  it.each([[[1, 1], /2 time weights for 4/], [[1, -1, 1, -2], /^2 negative weights \(snapshot 1 at t = 1 has -1\.00\)/], [[1e308, 1e308, 1e308, 1e308], /sum to Infinity/], [[1, NaN, 1, 1], /weight 1 is NaN/], [[0, 0, 0, 0], /sum to 0/]])('%j are refused', (provided, message) => {
    const result = judgeTimeRule('provided', stamps, 'float64', { provided });
    expect(result.admissible).toBe(false);
    expect(result.why).toMatch(message);
    expect(timeRuleResult.safeParse(result).error).toBeUndefined();
  });
  it('show what is negative', () => {
    expect(judgeTimeRule('provided', stamps, 'float64', { provided: [1, -1, 1, -2] })).toMatchObject({ weights: [1, -1, 1, -2], negative: 2, min: -2, max: 1, sum: -1 });
  });
  it('are scaled in each of several runs, whatever their clocks say', () => {
    const runs = Float64Array.of(5, 6, 7, 0, 1, 2), { weights, admissible, degree } = judgeTimeRule('provided', runs, 'float64', { provided: [1, 2, 1, 3, 6, 3], segments: [0, 3] });
    expect({ weights, admissible, degree }).toEqual({ weights: [0.5, 1, 0.5, 0.5, 1, 0.5], admissible: true, degree: 1 });
  });
});

describe('stamps that no rule takes', () => {
  it.each([[[], 'no time stamp'], [[0, NaN, 2], 'Time stamp 1'], [[0, 1, 1], 'Time stamp 2'], [[0, 2, 1], 'Time stamp 2'], [[0, Infinity], 'Time stamp 1'], [[-1e308, 1e308], 'Time stamp 1'], [[0, 5e-324, 1], 'Time stamp 1']])('%j', (stamps, message) => {
    for (const rule of timeRules) {
      let refusal: unknown = null;
      try {
        judgeTimeRule(rule.id, Float64Array.from(stamps), 'float64');
      } catch (error) {
        refusal = error;
      }
      expect(refusal, rule.id).toBeInstanceOf(PennyweightError);
      expect((refusal as PennyweightError).code).toBe('stamps-invalid');
      expect((refusal as PennyweightError).message).toContain(message);
    }
  });
});
