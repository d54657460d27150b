/** Degree of exactness, found by trying it. */
import type { TimeRule } from './time-rule.ts';

const highest = 12;
/** Pieces of a long record that a local rule is tested on; both parities of the number of snapshots. */
const piece = 33;

/**
 * Highest d such that the rule integrates every Legendre polynomial P_0..P_d over the record (mapped to [-1, 1]) exactly, within
 * 32 eps (k+1)^2 times the sum of |a_j|, the rounding of P_k at rounded nodes, and more where the stamps lie far from zero compared
 * with the record's length: their own rounding then moves the nodes. null when not even constants are exact.
 * A rule of local formulas is tested on the first and last pieces of a long record only: on 100,000 stamps the trapezoid's error for
 * parabolas falls below any tolerance.
 */
export function degreeOfExactness(rule: Pick<TimeRule, 'local' | 'weights'>, stamps: Float64Array, weights: Float64Array): number | null {
  if (!rule.local || stamps.length <= 2 * piece) return degreeOf(stamps, weights);
  const tail = piece + (stamps.length % 2 === 0 ? 1 : 0);
  const head = stamps.slice(0, piece), end = stamps.slice(stamps.length - tail);
  const [a, b] = [degreeOf(head, rule.weights(head)), degreeOf(end, rule.weights(end))];
  return a === null || b === null ? null : Math.min(a, b);
}

function degreeOf(stamps: Float64Array, weights: Float64Array): number | null {
  const m = stamps.length;
  if (m === 1) return 0;
  const middle = (stamps[0] + stamps[m - 1]) / 2, half = (stamps[m - 1] - stamps[0]) / 2;
  const x = Float64Array.from(stamps, (t) => (t - middle) / half);
  const total = weights.reduce((sum, a) => sum + Math.abs(a), 0) / half;
  const far = 1 + Math.max(Math.abs(stamps[0]), Math.abs(stamps[m - 1])) / half;
  let previous = new Float64Array(m).fill(1), current = x.slice();
  for (let k = 0; k <= highest; k++) {
    // Three-term recurrence, Abramowitz & Stegun 22.7.10
    const values = k === 0 ? previous : current;
    let sum = 0;
    for (let j = 0; j < m; j++) sum += (weights[j] / half) * values[j];
    const exact = k === 0 ? 2 : 0;
    if (Math.abs(sum - exact) > 32 * Number.EPSILON * (k + 1) ** 2 * Math.max(total, 1) * far) return k === 0 ? null : k - 1;
    if (k > 0) {
      const next = new Float64Array(m);
      for (let j = 0; j < m; j++) next[j] = ((2 * k + 1) * x[j] * current[j] - k * previous[j]) / (k + 1);
      previous = current;
      current = next;
    }
  }
  return highest;
}
