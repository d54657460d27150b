/**
 * time/rounded-stamps: the spacing varies, but within what the stored type or the printed digits explain (evenness.ts).
 * Nothing is to be done: rules for even spacing take the even grid through the end points.
 */
import type { Check } from './check.ts';
import { evennessOf } from './evenness.ts';
import { orderedRecord, stampPath } from './ordered-record.ts';
import { plainNumber, stampText, timeUnit, withUnit } from './quantity.ts';

export const timeRoundedStamps: Check = {
  id: 'time/rounded-stamps',
  severity: 'note',
  title: 'Stamps are rounded values of an even grid',
  source: 'common practice, no source; tolerances follow from rounding to nearest (IEEE 754-2019)',
  thresholds: {},
  judge(subject) {
    const { survey } = subject;
    const record = orderedRecord(subject);
    if (!survey || !record) return [];
    const { spacing, verdict, explainedBy } = evennessOf(record.stamps, survey.stampType);
    if (verdict !== 'rounded') return [];
    const step = spacing.duration / (spacing.count - 1);
    return [
      {
        path: stampPath(subject),
        message: `The time step varies between ${stampText(survey, spacing.hMin)} and ${stampText(survey, spacing.hMax)}, which rounding of the stamps (${explainedBy}) explains: the record is treated as uniform with a step of ${withUnit(plainNumber(step), timeUnit(survey))}.`,
        evidence: { count: spacing.count, step, deviation: spacing.deviation, explainedBy },
        remedy: null,
      },
    ];
  },
};
