/** The suggestion is never a refused rule, and says why. */
import { describe, expect, it } from 'vitest';
import { chooseTimeRule } from '../../../../server/engine/quadrature/choose.ts';
import { judgeTimeRules } from '../../../../server/engine/quadrature/judge.ts';
import { describeSpacing } from '../../../../server/engine/quadrature/spacing.ts';
import { uneven, uniform } from './stamp-sets.ts';

const choose = (stamps: Float64Array, share: number | null = null) => chooseTimeRule(judgeTimeRules(stamps, 'float64'), describeSpacing(stamps, 'float64'), share);

describe('chooseTimeRule', () => {
  it('takes Simpson on an even, odd record', () => expect(choose(uniform(41))).toMatchObject({ rule: 'simpson', runnerUp: 'trapezoid' }));
  it('takes the trapezoid when the record is not resolved', () => expect(choose(uniform(41), 0.2).rule).toBe('trapezoid'));
  it('takes the trapezoid on few snapshots', () => expect(choose(uniform(5)).rule).toBe('trapezoid'));
  it('takes the guarded rule on a mildly uneven record', () => expect(choose(uneven(61, 2, 1.8)).rule).toBe('simpson-guarded'));
  it('takes parabolas with a corrected last interval on an even number of snapshots, and says so', () => {
    expect(choose(uniform(40))).toMatchObject({ rule: 'simpson-guarded', reason: expect.stringMatching(/^The spacing is even and so is the number of snapshots/) });
  });
  it('takes the guarded rule where the spacing jumps once, the trapezoid where it jumps often', () => {
    const twoRates = (change: number) => Float64Array.from({ length: 81 }, (_, j) => (j < change ? j : change + 3 * (j - change)));
    expect(choose(twoRates(40))).toMatchObject({ rule: 'simpson', reason: expect.stringMatching(/^Each pair of intervals is even/) });
    expect(choose(twoRates(41))).toMatchObject({ rule: 'simpson-guarded', reason: expect.stringMatching(/98\.7 %/) });
    expect(choose(uneven(81, 3, 30))).toMatchObject({ rule: 'trapezoid', runnerUp: 'simpson-guarded' });
  });
  it('takes Simpson on stamps that are even but for rounding', () => expect(choose(Float64Array.from({ length: 41 }, (_, j) => Number((j / 30).toFixed(3)))).rule).toBe('simpson'));
  it('takes the weights that the archive brings, unless they are refused', () => {
    const stamps = uniform(9), brought = (provided: number[]) => chooseTimeRule(judgeTimeRules(stamps, 'float64', { provided }), describeSpacing(stamps, 'float64')).rule;
    expect(brought([1, 4, 2, 4, 2, 4, 2, 4, 1])).toBe('provided');
    expect(brought([1, 4, 2, 4, -2, 4, 2, 4, 1])).toBe('simpson');
  });
  it('is the same for the same record', () => expect(choose(uneven(61, 2, 1.8))).toEqual(choose(uneven(61, 2, 1.8))));
  it('takes equal weights without a time axis', () => expect(chooseTimeRule([], null).rule).toBe('equal'));
  it('never suggests a refused rule', () => {
    for (let seed = 1; seed < 100; seed++) {
      const stamps = uneven(3 + seed, seed, 1 + (seed % 9)), results = judgeTimeRules(stamps, 'float64');
      const { rule, reason } = chooseTimeRule(results, describeSpacing(stamps, 'float64'));
      expect(results.find((result) => result.id === rule)?.admissible, `seed ${seed}: ${rule}`).toBe(true);
      expect(reason).toMatch(/\.$/);
    }
  });
});
