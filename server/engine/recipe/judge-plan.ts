/**
 * Findings of a draft itself: what the recipe brought about or left, and no source shows. Judged by the same checks as archives, on each
 * record as the recipe leaves it; what a source's own findings say already is not said again.
 */
import type { CheckPolicy, Finding } from '#contract/finding.ts';
import type { Check } from '../checks/check.ts';
import { gridUneven } from '../checks/grid-uneven.ts';
import { thresholdsOf } from '../checks/policy.ts';
import { timeGap } from '../checks/time-gap.ts';
import { timeUnevenSpacing } from '../checks/time-uneven-spacing.ts';
import type { Survey } from '../survey.ts';
import { recordRanges, type RecordState } from './record-state.ts';

/** `plan` without problems. Indices of the evidence count the columns of the run as the recipe leaves them. */
export function judgePlan(plan: RecordState, policy: CheckPolicy = { thresholds: {} }): Finding[] {
  const judge = (check: Check, survey: Survey) =>
    check.judge({ survey, failure: null, checksum: null, demands: { fields: [], parameters: [] }, parameters: {}, otherGrids: [], timeRule: plan.timeRule }, thresholdsOf(check, policy))[0] ?? null;
  const findings: Finding[] = [];
  for (const { source, from, to } of recordRanges(plan)) {
    const { run, survey } = plan.sources[source];
    if (!survey.stamps) continue;
    const left: Survey = { ...survey, stamps: Float64Array.from(plan.columns.slice(from, to), (column) => column.time!), fields: [] };
    const say = (check: Check, judgement: NonNullable<ReturnType<typeof judge>>) =>
      findings.push({ ...judgement, id: check.id, severity: check.severity, message: `Run ${run} as the recipe leaves it: ${judgement.message}` });
    const gap = judge(timeGap, left);
    // A gap of the archive itself is in its own findings.
    if (gap && Number(gap.evidence.count) > Number(judge(timeGap, survey)?.evidence.count ?? 0)) say(timeGap, gap);
    const uneven = plan.timeRule === 'equal' ? judge(timeUnevenSpacing, left) : null;
    if (uneven && !judge(timeUnevenSpacing, survey)) say(timeUnevenSpacing, uneven);
  }
  // weights.md: no space weights on a grid that is known and uneven is a caution.
  const [first] = plan.sources;
  const uneven = plan.spaceRule?.chosen === 'none' && first ? judge(gridUneven, first.survey) : null;
  if (uneven) findings.push({ ...uneven, id: gridUneven.id, severity: 'caution', message: `Every node counts the same, and the grid is not even: ${uneven.message}` });
  return findings;
}
