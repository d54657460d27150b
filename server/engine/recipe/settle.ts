/** Which findings of a source the recipe settles: judged again on what the recipe keeps, not by the mere presence of a step. */
import type { CheckPolicy, Finding } from '#contract/finding.ts';
import { thresholdsOf } from '../checks/policy.ts';
import { findGaps, timeGap } from '../checks/time-gap.ts';
import type { FieldSurvey } from '../survey.ts';
import type { RecordState } from './record-state.ts';

/** A clause that says how, or null when the finding stands. `plan` is without problems; `policy`: the campaign's thresholds. */
export function settledBy(finding: Pick<Finding, 'id' | 'path' | 'evidence'>, archive: string, plan: RecordState, policy: CheckPolicy = { thresholds: {} }): string | null {
  const s = plan.sources.findIndex((source) => source.archive === archive);
  if (s < 0) return 'select leaves this archive out';
  const { survey } = plan.sources[s];
  const kept = plan.columns.filter((column) => column.source === s).map((column) => column.index);
  const field = survey.fields.find((each) => each.path === finding.path);
  if (field && !plan.fields.some((each) => each.name === field.name)) return `select leaves ${field.name} out`;
  const has = (step: string) => plan.recipe.steps.some((each) => each.step === step);
  switch (finding.id) {
    case 'time/duplicate':
    case 'time/not-increasing':
    case 'time/restart-overlap':
      // The plan refuses stamps that are not strictly increasing when it weighs them.
      return has('order') ? 'order puts the record forward in time and drops what is repeated' : null;
    case 'time/gap':
      return survey.stamps && gapsOf(survey.stamps, kept, policy) === 0 ? 'window leaves the gap out' : null;
    case 'time/uneven-spacing':
      return plan.timeRule !== 'equal' ? `weigh uses ${plan.timeRule}, made for uneven stamps` : null;
    case 'grid/differs':
      // The plan refuses runs whose grids differ; archives that are not in the recipe do not matter to it.
      return 'select takes runs of one grid only';
    case 'grid/missing':
      return plan.spaceRule?.chosen === 'none' && has('weigh') ? 'weigh accepts equal weights for every node' : null;
    case 'value/frozen':
      return field && copiesLeft(field, kept, true) === 0 ? 'order drops the frozen copies' : null;
    case 'value/repeated':
      return field && copiesLeft(field, kept, false) === 0 ? 'order drops the repeated snapshots' : null;
    case 'value/non-finite':
      return field && kept.every((j) => field.nonFinite[j] === 0) ? 'the snapshots with such values are dropped' : null;
    case 'value/fill-value':
      return field && field.fill.every((each) => kept.every((j) => each.counts[j] === 0)) ? 'the snapshots with such values are dropped' : null;
    case 'file/unwritten-data':
      return field && field.trailingFill > 0 && kept.every((j) => j < field.snapshots - field.trailingFill) ? 'window ends before what was never written' : null;
    default:
      return null;
  }
}

function gapsOf(stamps: Float64Array, kept: number[], policy: CheckPolicy): number {
  const { ratio, growth, share } = thresholdsOf(timeGap, policy);
  return findGaps(Float64Array.from(kept, (j) => stamps[j]), ratio, growth, share).length;
}

/** Snapshots among the kept whose content was met before: right before, or anywhere. */
function copiesLeft(field: FieldSurvey, kept: number[], adjacent: boolean): number {
  if (adjacent) return kept.filter((j, k) => k > 0 && field.hash[j] === field.hash[kept[k - 1]]).length;
  return kept.length - new Set(kept.map((j) => field.hash[j])).size;
}
