/**
 * simpson: parabolas through pairs of intervals h0, h1, degree 2 on any stamps, 3 on even ones, error O(h^4):
 *   (h0+h1)/6 (2 - h1/h0),  (h0+h1)^3/(6 h0 h1),  (h0+h1)/6 (2 - h0/h1)
 * Negative as soon as a pair differs by more than 2:1. With an even number of snapshots the last interval is integrated by
 * the parabola through the last three (Cartwright 2017; the same as SciPy >= 1.11 uses): degree 2 there.
 * Sources: Abramowitz & Stegun 25.4.5 (even spacing); K. V. Cartwright, J. Math. Sci. Math. Educ. 12(2), 2017, 1-9.
 * Example: stamps 0, 1, 2 give 1/3, 4/3, 1/3.
 */
import { addPanels, type Panel } from './panel.ts';
import type { TimeRule } from './time-rule.ts';
import { trapezoidPanel } from './trapezoid.ts';

/** The pair of intervals that begins at `j`. Ratios first: products of very small intervals would vanish. */
export function pairPanel(stamps: Float64Array, j: number): Panel {
  const h0 = stamps[j + 1] - stamps[j];
  const h1 = stamps[j + 2] - stamps[j + 1];
  const sixth = (h0 + h1) / 6;
  const middle = sixth * ((h0 + h1) / h0) * ((h0 + h1) / h1);
  return { first: j, weights: [sixth * (2 - h1 / h0), middle, sixth * (2 - h0 / h1)], from: j, to: j + 2 };
}

/** Cartwright's correction: the last interval by the parabola through the last three stamps (m >= 3). */
export function lastPanel(stamps: Float64Array): Panel {
  const m = stamps.length;
  const h0 = stamps[m - 2] - stamps[m - 3];
  const h1 = stamps[m - 1] - stamps[m - 2];
  const sixth = h1 / 6;
  const weights = [
    -sixth * (h1 / h0) * (h1 / (h0 + h1)),
    sixth * (h1 / h0 + 3),
    sixth * ((2 * h1 + 3 * h0) / (h0 + h1)),
  ];
  return { first: m - 3, weights, from: m - 2, to: m - 1 };
}

function* panels(stamps: Float64Array): Generator<Panel> {
  const m = stamps.length;
  if (m === 2) yield trapezoidPanel(stamps, 0);
  for (let j = 0; j + 2 < m; j += 2) yield pairPanel(stamps, j);
  if (m > 2 && m % 2 === 0) yield lastPanel(stamps);
}

export const simpson: TimeRule = {
  id: 'simpson',
  title: 'Parabolas through pairs of intervals',
  source: 'Abramowitz & Stegun 25.4.5; K. V. Cartwright, J. Math. Sci. Math. Educ. 12(2), 2017, 1-9',
  assumptions({ count }) {
    if (count >= 3) return { holds: true, why: 'parabolas fit any stamps, and no weight is negative on these.' };
    return { holds: false, why: `it needs at least three snapshots, and there ${count === 1 ? 'is 1' : 'are 2'}.` };
  },
  weights: (stamps) => addPanels(stamps, panels(stamps)),
  panels,
};
