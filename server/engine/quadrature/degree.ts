/** Degree of exactness, found by trying it. */
import type { Panel } from './panel.ts';
import { accurateSum } from './stamps.ts';

const highest = 12;

/** Room for one formula of a given number of nodes, used again for each panel of a long record. */
interface Bench {
  x: Float64Array;
  before: Float64Array;
  values: Float64Array;
  terms: Float64Array;
}

function benchOf(size: number): Bench {
  const [x, before, values, terms] = Array.from({ length: 4 }, () => new Float64Array(size));
  return { x, before, values, terms };
}

/**
 * Highest d <= `most` such that sum_j a_j P_k(x_j) is the integral of the Legendre polynomial P_k over [begin, end], mapped to
 * [-1, 1], for every k <= d: 2 for k = 0, else 0. `nodes` are the stamps from `first` on. Tolerance: 32 eps (k+1)^2 times the
 * sum of |a_j P_k(x_j)|, the rounding of P_k at rounded nodes, and more where the stamps lie far from zero compared with
 * the interval, since their own rounding then moves the nodes. -1 when not even constants are exact.
 */
function exactTo(
  { x, before, values, terms }: Bench,
  stamps: Float64Array,
  first: number,
  weights: ArrayLike<number>,
  [begin, end]: [number, number],
  most: number,
): number {
  const half = (end - begin) / 2;
  const middle = begin + half;
  const far = 1 + Math.max(Math.abs(begin), Math.abs(end)) / half;
  for (let j = 0; j < x.length; j++) x[j] = (stamps[first + j] - middle) / half;
  values.fill(1);
  before.fill(0);
  for (let k = 0; k <= most; k++) {
    let size = 1;
    for (let j = 0; j < x.length; j++) {
      terms[j] = (weights[j] / half) * values[j];
      size += Math.abs(terms[j]);
      // Three-term recurrence, Abramowitz & Stegun 22.7.10
      const next = ((2 * k + 1) * x[j] * values[j] - k * before[j]) / (k + 1);
      before[j] = values[j];
      values[j] = next;
    }
    const off = Math.abs(accurateSum(terms) - (k === 0 ? 2 : 0));
    if (!(off <= 32 * Number.EPSILON * (k + 1) ** 2 * size * far)) return k - 1;
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
  if (panels) {
    const benches = new Map<number, Bench>();
    for (const { first, weights: local, from, to } of panels) {
      const bench = benches.get(local.length) ?? benchOf(local.length);
      benches.set(local.length, bench);
      degree = exactTo(bench, stamps, first, local, [stamps[from], stamps[to]], degree);
    }
  } else degree = exactTo(benchOf(m), stamps, 0, weights, [stamps[0], stamps[m - 1]], degree);
  return degree < 0 ? null : degree;
}
