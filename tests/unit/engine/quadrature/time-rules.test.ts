/** What theory says of every time rule. */
import { describe, expect, it } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import { timeRules } from '../../../../server/engine/quadrature/index.ts';
import { judgeTimeRule, judgeTimeRules, weightsBySegment } from '../../../../server/engine/quadrature/judge.ts';
import { accurateSum } from '../../../../server/engine/quadrature/stamps.ts';
import { uneven, uniform } from './stamp-sets.ts';

const eps = Number.EPSILON;

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
    ['simpson-guarded', uniform(21), 3], ['simpson-guarded', uneven(21, 10, 1.9), 2], ['trapezoid', uniform(100_000), 1], ['simpson', uniform(100_001), 3], ['equal', uneven(9, 11), 0],
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

describe('provided weights', () => {
  const stamps = uniform(4, 0, 3);
  it('are scaled to the duration', () => {
    expect(judgeTimeRule('provided', stamps, 'float64', { provided: [1, 2, 2, 1] }).weights).toEqual([0.5, 1, 1, 0.5]);
  });
  it.each([[[1, 1], /2 time weights for 4/], [[1, -1, 1, 1], /weight 1 is -1/], [[1, NaN, 1, 1], /weight 1 is NaN/], [[0, 0, 0, 0], /zero/]])('%j are refused', (provided, message) => {
    const result = judgeTimeRule('provided', stamps, 'float64', { provided });
    expect(result.admissible).toBe(false);
    expect(result.why).toMatch(message);
  });
});

describe('stamps that no rule takes', () => {
  it.each([[[], 'no time stamp'], [[0, NaN, 2], 'Time stamp 1'], [[0, 1, 1], 'Time stamp 2'], [[0, 2, 1], 'Time stamp 2'], [[0, Infinity], 'Time stamp 1']])('%j', (stamps, message) => {
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
