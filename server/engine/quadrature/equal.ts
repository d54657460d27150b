/**
 * equal: a_j = T/m, what an unweighted SVD does. Right for independent samples; on a time axis the two end snapshots count
 * too much (error O(h)), and densely sampled times count too much. Source: common practice, no source.
 */
import { durationOf } from './stamps.ts';
import type { TimeRule } from './time-rule.ts';

export const equal: TimeRule = {
  id: 'equal',
  title: 'Every snapshot counts the same',
  source: 'common practice, no source',
  assumptions: ({ uniform, roundedOnly, ratio }) => ({
    holds: true,
    why:
      uniform || roundedOnly
        ? 'the spacing is even; only the two end snapshots count too much.'
        : `the spacing varies by a factor ${ratio.toPrecision(3)}: densely sampled times count too much.`,
  }),
  weights: (stamps) =>
    stamps.length === 1 ? Float64Array.of(1) : new Float64Array(stamps.length).fill(durationOf(stamps) / stamps.length),
};
