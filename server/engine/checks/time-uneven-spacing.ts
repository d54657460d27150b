/**
 * time/uneven-spacing: the spacing varies by more than the stamps' own precision explains (evenness.ts), seen on the record
 * once its order is mended, so that a repeated stamp or a restart's overlap is not reported twice. A gap does count: rules
 * for even spacing do not hold across it. The offered rule is the one that the catalogue of rules suggests for these stamps.
 */
import { chooseTimeRule } from '../quadrature/choose.ts';
import { judgeTimeRules } from '../quadrature/judge.ts';
import type { Check } from './check.ts';
import { evennessOf } from './evenness.ts';
import { orderedRecord, stampPath } from './ordered-record.ts';
import { plainNumber, stampText } from './quantity.ts';
import { weighTime } from './remedy.ts';

export const timeUnevenSpacing: Check = {
  id: 'time/uneven-spacing',
  severity: 'caution',
  title: 'The stamps are evenly spaced',
  source: 'common practice, no source; tolerances follow from rounding to nearest (IEEE 754-2019)',
  thresholds: {},
  judge(subject) {
    const { survey } = subject;
    const record = orderedRecord(subject);
    if (!survey || !record) return [];
    const { stamps, indices } = record;
    const { spacing, verdict } = evennessOf(stamps, survey.stampType);
    if (verdict !== 'uneven') return [];
    let widest = 0;
    for (let i = 1; i + 1 < stamps.length; i++)
      if (stamps[i + 1] - stamps[i] > stamps[widest + 1] - stamps[widest]) widest = i;
    const { rule } = chooseTimeRule(judgeTimeRules(stamps, survey.stampType), spacing);
    return [
      {
        path: stampPath(subject),
        message: `The time step varies between ${stampText(survey, spacing.hMin)} and ${stampText(survey, spacing.hMax)}, ${plainNumber(spacing.ratio, 3)} to 1, more than the precision of the stamps explains: use weights for uneven spacing, such as ${rule}.`,
        evidence: {
          indices: [indices[widest]],
          times: [stamps[widest]],
          count: stamps.length - 1,
          shortest: spacing.hMin,
          widest: spacing.hMax,
          median: spacing.hMedian,
          ratio: spacing.ratio,
          deviation: spacing.deviation,
        },
        remedy: weighTime(rule, `Weigh the snapshots by the rule "${rule}", which holds for uneven spacing.`),
      },
    ];
  },
};
