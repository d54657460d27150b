/** trapezoid: a_j = (h_{j-1} + h_j)/2, h/2 at the ends; degree 1 on any stamps, never negative. Source: Abramowitz & Stegun 25.4.1. */
import type { TimeRule } from './time-rule.ts';

export const trapezoid: TimeRule = {
  id: 'trapezoid',
  title: 'Half of the two intervals beside a snapshot',
  source: 'Abramowitz & Stegun 25.4.1, applied interval by interval',
  local: true,
  assumptions: () => ({ holds: true, why: 'it holds on any stamps and never gives a negative weight.' }),
  weights(stamps) {
    const m = stamps.length;
    if (m === 1) return Float64Array.of(1);
    const weights = new Float64Array(m);
    for (let j = 0; j + 1 < m; j++) {
      const half = (stamps[j + 1] - stamps[j]) / 2;
      weights[j] += half;
      weights[j + 1] += half;
    }
    return weights;
  },
};
