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
