/**
 * simpson-guarded: Simpson on each pair of intervals within 2:1, the trapezoid on the first interval of a pair that is not (the
 * next pair then begins one interval later). A last single interval takes Cartwright's correction where it is within 2:1 of
 * the one before, else the trapezoid. Never negative; degree 3 on even stamps, 2 where all pairs are within 2:1, else 1.
 * Sources: as simpson.ts; the guard is our own, common practice, no source.
 *
 * Why never negative: within 2:1 no weight of a pair is, and the correction takes at most (2/3)^2 h0 = 0.45 h0 from the stamp before
 * the last two (at h1 = 2 h0), which has at least 0.5 h0 by the trapezoid and more by a pair.
 */
import { addPanels, type Panel } from './panel.ts';
import { lastPanel, pairPanel } from './simpson.ts';
import type { TimeRule } from './time-rule.ts';
import { trapezoidPanel } from './trapezoid.ts';

/** At 2:1 the weight of an end is zero: a pair that reaches it would drop a snapshot. */
const guard = 2;

/** Whether the two intervals that begin at `j` are within the guard. */
function gentle(stamps: Float64Array, j: number): boolean {
  const h0 = stamps[j + 1] - stamps[j];
  const h1 = stamps[j + 2] - stamps[j + 1];
  return h0 < guard * h1 && h1 < guard * h0;
}

function* panels(stamps: Float64Array): Generator<Panel> {
  const m = stamps.length;
  let j = 0;
  while (j + 2 < m) {
    if (gentle(stamps, j)) {
      yield pairPanel(stamps, j);
      j += 2;
    } else {
      yield trapezoidPanel(stamps, j);
      j += 1;
    }
  }
  if (j + 2 === m) yield m >= 3 && gentle(stamps, m - 3) ? lastPanel(stamps) : trapezoidPanel(stamps, j);
}

export const simpsonGuarded: TimeRule = {
  id: 'simpson-guarded',
  title: 'Simpson where neighbouring intervals are within 2:1, trapezoid elsewhere',
  source: 'Abramowitz & Stegun 25.4.5 with a guard of our own; common practice, no source',
  assumptions: () => ({ holds: true, why: 'it holds on any stamps and never gives a negative weight.' }),
  weights: (stamps) => addPanels(stamps, panels(stamps)),
  panels,
};
