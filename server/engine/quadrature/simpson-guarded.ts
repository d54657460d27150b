/**
 * simpson-guarded: Simpson on each pair of intervals within 2:1, the trapezoid on the first interval of a pair that is not (the
 * next pair then begins one interval later). A last single interval takes Cartwright's correction where that leaves no negative
 * weight, else the trapezoid. Never negative; degree 3 on even stamps, 2 where all pairs are within 2:1, 1 in general.
 * Source: Simpson as in simpson.ts; the guard is our own, common practice, no source.
 */
import { addPair, lastInterval } from './simpson.ts';
import type { TimeRule } from './time-rule.ts';

const guard = 2;

export const simpsonGuarded: TimeRule = {
  id: 'simpson-guarded',
  title: 'Simpson where neighbouring intervals are within 2:1, trapezoid elsewhere',
  source: 'Abramowitz & Stegun 25.4.5 with a guard of our own; common practice, no source',
  local: true,
  assumptions: () => ({ holds: true, why: 'it holds on any stamps and never gives a negative weight.' }),
  weights(stamps) {
    const m = stamps.length, weights = new Float64Array(m);
    if (m === 1) return Float64Array.of(1);
    let j = 0;
    while (j + 2 < m) {
      const h0 = stamps[j + 1] - stamps[j], h1 = stamps[j + 2] - stamps[j + 1];
      if (h0 < guard * h1 && h1 < guard * h0) {
        addPair(weights, stamps, j);
        j += 2;
      } else {
        weights[j] += h0 / 2;
        weights[j + 1] += h0 / 2;
        j += 1;
      }
    }
    if (j + 2 === m) {
      const h1 = stamps[m - 1] - stamps[m - 2];
      const last = m >= 3 ? lastInterval(stamps) : null;
      const h0 = m >= 3 ? stamps[m - 2] - stamps[m - 3] : 0;
      if (last && h0 < guard * h1 && h1 < guard * h0 && weights[m - 3] + last[0] >= 0) last.forEach((weight, k) => { weights[m - 3 + k] += weight; });
      else {
        weights[m - 2] += h1 / 2;
        weights[m - 1] += h1 / 2;
      }
    }
    return weights;
  },
};
