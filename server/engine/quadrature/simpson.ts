/**
 * simpson: parabolas through pairs of intervals h0, h1, degree 2 on any stamps, 3 on even ones:
 *   (h0+h1)/6 (2 - h1/h0),  (h0+h1)^3/(6 h0 h1),  (h0+h1)/6 (2 - h0/h1)
 * Negative as soon as a pair differs by more than 2:1. With an even number of snapshots the last interval is integrated by
 * the parabola through the last three (Cartwright 2017, equation of the correction; the same as SciPy >= 1.11 uses).
 * Sources: Abramowitz & Stegun 25.4.5 (even spacing); K. V. Cartwright, J. Math. Sci. Math. Educ. 12(2), 2017, 1-9.
 */
import type { TimeRule } from './time-rule.ts';

/** Adds Simpson's weights of the pair of intervals that begins at `j`. */
export function addPair(weights: Float64Array, stamps: Float64Array, j: number): void {
  const h0 = stamps[j + 1] - stamps[j], h1 = stamps[j + 2] - stamps[j + 1], sum = h0 + h1;
  weights[j] += (sum / 6) * (2 - h1 / h0);
  weights[j + 1] += (sum * sum * sum) / (6 * h0 * h1);
  weights[j + 2] += (sum / 6) * (2 - h0 / h1);
}

/** Weights that Cartwright's correction adds to the last three snapshots: [at m-3, m-2, m-1]. */
export function lastInterval(stamps: Float64Array): [number, number, number] {
  const m = stamps.length, h0 = stamps[m - 2] - stamps[m - 3], h1 = stamps[m - 1] - stamps[m - 2];
  return [-(h1 * h1 * h1) / (6 * h0 * (h0 + h1)), (h1 * h1 + 3 * h0 * h1) / (6 * h0), (2 * h1 * h1 + 3 * h0 * h1) / (6 * (h0 + h1))];
}

export const simpson: TimeRule = {
  id: 'simpson',
  title: 'Parabolas through pairs of intervals',
  source: 'Abramowitz & Stegun 25.4.5; K. V. Cartwright, J. Math. Sci. Math. Educ. 12(2), 2017, 1-9',
  local: true,
  assumptions: (spacing) =>
    spacing.count < 3 ? { holds: false, why: `it needs at least three snapshots, and there ${spacing.count === 1 ? 'is' : 'are'} ${spacing.count}.` } : { holds: true, why: 'parabolas fit any stamps; the sign of the weights decides.' },
  weights(stamps) {
    const m = stamps.length, weights = new Float64Array(m);
    if (m === 1) return Float64Array.of(1);
    if (m === 2) return new Float64Array(2).fill((stamps[1] - stamps[0]) / 2);
    for (let j = 0; j + 2 < m; j += 2) addPair(weights, stamps, j);
    if (m % 2 === 0) lastInterval(stamps).forEach((weight, k) => { weights[m - 3 + k] += weight; });
    return weights;
  },
};
