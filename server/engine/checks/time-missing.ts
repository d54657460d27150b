/**
 * time/missing: several snapshots and nothing that says when. Not for a declared ensemble, and not for a single snapshot,
 * which needs no time. When an assigned time vector did not fit, reading/shape-mismatch speaks instead.
 */
import type { Check } from './check.ts';
import { stampPath } from './ordered-record.ts';
import { snapshotCount } from './written-part.ts';

export const timeMissing: Check = {
  id: 'time/missing',
  severity: 'caution',
  title: 'The record has time stamps',
  source: 'common practice, no source',
  thresholds: {},
  judge(subject) {
    const { survey } = subject;
    if (!survey || survey.stamps || survey.reading.time?.kind === 'ensemble') return [];
    const m = snapshotCount(survey);
    const path = stampPath(subject);
    if (m < 2 || (path !== null && survey.mismatches.some((mismatch) => mismatch.path === path))) return [];
    return [
      {
        path: null,
        message: `No time stamps for the ${m} snapshots: only their order is known, so no time weights can be given; give start and step of the time, or declare the record an ensemble without time.`,
        evidence: { count: m },
        remedy: null,
      },
    ];
  },
};
