/** Degree of exactness, found by trying it. */
import type { Panel } from './panel.ts';
import { accurateSum } from './stamps.ts';

const highest = 12;

/**
 * Highest d <= `most` such that sum_j a_j P_k(x_j) is the integral of the Legendre polynomial P_k over [begin, end], mapped to
 * [-1, 1], for every k <= d: 2 for k = 0, else 0. Tolerance: 32 eps (k+1)^2 times the sum of |a_j P_k(x_j)|, the rounding of
 * P_k at rounded nodes, and more where the stamps lie far from zero compared with the interval, since their own rounding then
 * moves the nodes. -1 when not even constants are exact. P_k by the three-term recurrence, Abramowitz & Stegun 22.7.10.
 */
function exactTo(
  nodes: ArrayLike<number>,
  weights: ArrayLike<number>,
  begin: number,
  end: number,
  most: number,
): number {
  const m = nodes.length;
  const half = (end - begin) / 2;
  const middle = begin + half;
  const far = 1 + Math.max(Math.abs(begin), Math.abs(end)) / half;
  const x = Float64Array.from(nodes, (t) => (t - middle) / half);
  let before = new Float64Array(m);
  let values = new Float64Array(m).fill(1);
  for (let k = 0; k <= most; k++) {
    const terms = values.map((value, j) => (weights[j] / half) * value);
    const size = terms.reduce((total, term) => total + Math.abs(term), 1);
    const off = Math.abs(accurateSum(terms) - (k === 0 ? 2 : 0));
    if (!(off <= 32 * Number.EPSILON * (k + 1) ** 2 * size * far)) return k - 1;
    const next = values.map((value, j) => ((2 * k + 1) * x[j] * value - k * before[j]) / (k + 1));
    before = values;
    values = next;
  }
  return most;
}

/**
 * Degree of weights on a record, or of the panels that they are made of: the least of theirs, since on 100,000 stamps the
 * error of a composite rule for a parabola over the whole record falls below any tolerance. null when not even constants are
 * exact; 0 for a single stamp. Looks no higher than 12.
 */
export function degreeOfExactness(
  stamps: Float64Array,
  weights: Float64Array,
  panels?: Iterable<Panel>,
): number | null {
  const m = stamps.length;
  if (m === 1) return 0;
  let degree = highest;
  if (panels)
    for (const { first, weights: local, from, to } of panels)
      degree = exactTo(stamps.subarray(first, first + local.length), local, stamps[from], stamps[to], degree);
  else degree = exactTo(stamps, weights, stamps[0], stamps[m - 1], degree);
  return degree < 0 ? null : degree;
}
