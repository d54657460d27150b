/** equal: a_j = T/m, what an unweighted SVD does. Right for independent samples. Source: common practice, no source. */
import { durationOf } from './stamps.ts';
import type { TimeRule } from './time-rule.ts';

export const equal: TimeRule = {
  id: 'equal',
  title: 'Every snapshot counts the same',
  source: 'common practice, no source',
  local: false,
  assumptions: (spacing) =>
    spacing.uniform || spacing.roundedOnly
      ? { holds: true, why: 'the spacing is even; only the two end snapshots count too much.' }
      : { holds: true, why: `the spacing varies by a factor ${spacing.ratio.toPrecision(3)}: densely sampled times count too much.` },
  weights: (stamps) => (stamps.length === 1 ? Float64Array.of(1) : new Float64Array(stamps.length).fill(durationOf(stamps) / stamps.length)),
};
