/**
 * trapezoid: a_j = (h_{j-1} + h_j)/2, h/2 at the ends; degree 1 on any stamps, never negative, error O(h^2).
 * Source: Abramowitz & Stegun 25.4.1, interval by interval. Example: stamps 0, 1, 3 give 0.5, 1.5, 1.
 */
import { addPanels, type Panel } from './panel.ts';
import type { TimeRule } from './time-rule.ts';

export function trapezoidPanel(stamps: Float64Array, j: number): Panel {
  const half = (stamps[j + 1] - stamps[j]) / 2;
  return { first: j, weights: [half, half], from: j, to: j + 1 };
}

function* panels(stamps: Float64Array): Generator<Panel> {
  for (let j = 0; j + 1 < stamps.length; j++) yield trapezoidPanel(stamps, j);
}

export const trapezoid: TimeRule = {
  id: 'trapezoid',
  title: 'Half of the two intervals beside a snapshot',
  source: 'Abramowitz & Stegun 25.4.1, applied interval by interval',
  assumptions: () => ({ holds: true, why: 'it holds on any stamps and never gives a negative weight.' }),
  weights: (stamps) => addPanels(stamps, panels(stamps)),
  panels,
};
