/**
 * time/even-point-count: an even number of snapshots on uniform (or rounded uniform) spacing: Simpson's rule takes pairs of
 * intervals and one is left over. From four snapshots on; with two there is no rule of higher order to correct.
 */
import type { Check } from './check.ts';
import { evennessOf } from './evenness.ts';
import { orderedRecord, stampPath } from './ordered-record.ts';
import { weighTime } from './remedy.ts';

export const timeEvenPointCount: Check = {
  id: 'time/even-point-count',
  severity: 'note',
  title: 'The number of snapshots suits Simpson’s rule',
  source:
    'Abramowitz & Stegun 25.4.5-25.4.6; K. V. Cartwright, J. Math. Sci. Math. Educ. 12(2), 2017, 1-9 (correction)',
  thresholds: {},
  judge(subject) {
    const { survey } = subject;
    const record = orderedRecord(subject);
    if (!survey || !record) return [];
    const count = record.stamps.length;
    if (count < 4 || count % 2 === 1 || evennessOf(record.stamps, survey.stampType).verdict === 'uneven') return [];
    return [
      {
        path: stampPath(subject),
        message: `${count} snapshots are an even number, and Simpson's rule on uniform spacing needs an odd one: its last interval gets Cartwright's correction; choose that, or another rule.`,
        evidence: { count },
        remedy: weighTime('simpson', "Weigh by Simpson's rule with Cartwright's correction of the last interval."),
      },
    ];
  },
};
