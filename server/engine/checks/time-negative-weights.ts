/**
 * time/negative-weights: the chosen time rule gives negative weights on these stamps (or the archive's own weights are
 * negative), so the snapshots cannot be multiplied by their square roots. Judged on the record once its order is mended,
 * with the weights that the recipe would use. Silent while no rule is chosen.
 */
import type { TimeRuleId } from '#contract/weights.ts';
import { chooseTimeRule } from '../quadrature/choose.ts';
import { timeRules } from '../quadrature/index.ts';
import { judgeTimeRules, weightsBySegment } from '../quadrature/judge.ts';
import { describeSpacing } from '../quadrature/spacing.ts';
import type { Survey } from '../survey.ts';
import type { Check } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { orderedRecord, stampPath, type OrderedRecord } from './ordered-record.ts';
import { counted, plainNumber, snapshotText } from './quantity.ts';
import { weighTime } from './remedy.ts';

/** Weight of each snapshot of the ordered record; null when the rule is not there or its weights do not fit. */
function weightsOf(rule: TimeRuleId, survey: Survey, { stamps, indices }: OrderedRecord): Float64Array | null {
  if (rule === 'provided') {
    const given = survey.timeWeights;
    return given && given.length === survey.stamps!.length ? Float64Array.from(indices, (j) => given[j]) : null;
  }
  return timeRules.some((each) => each.id === rule) ? weightsBySegment(rule, stamps, survey.stampType) : null;
}

export const timeNegativeWeights: Check = {
  id: 'time/negative-weights',
  severity: 'caution',
  title: 'The chosen time rule gives no negative weight',
  source: 'L. Sirovich, Quart. Appl. Math. 45 (1987) 561-590 (weights of a correlation are non-negative)',
  thresholds: {},
  judge(subject) {
    const { survey, timeRule } = subject;
    const record = orderedRecord(subject);
    if (!survey || !record || !timeRule || record.stamps.length === 0) return [];
    const weights = weightsOf(timeRule, survey, record);
    if (!weights) return [];
    const negative: number[] = [];
    for (let i = 0; i < weights.length; i++) if (weights[i] < 0) negative.push(i);
    if (negative.length === 0) return [];
    const indices = negative.map((i) => record.indices[i]);
    const least = negative.reduce((a, b) => (weights[b] < weights[a] ? b : a));
    const { rule, reason } = chooseTimeRule(
      judgeTimeRules(record.stamps, survey.stampType),
      describeSpacing(record.stamps, survey.stampType),
    );
    return [
      {
        path: stampPath(subject),
        message: `The rule ${timeRule} gives ${counted(negative.length, 'negative weight')} on these stamps, the least ${plainNumber(weights[least], 3)} at ${snapshotText(survey, record.indices[least])}, and a snapshot is multiplied by the square root of its weight: choose another rule, such as ${rule}.`,
        evidence: evidenceOf(indices, survey.stamps, { rule: timeRule, least: weights[least] }),
        remedy: weighTime(rule, `Weigh by "${rule}" instead. ${reason}`),
      },
    ];
  },
};
