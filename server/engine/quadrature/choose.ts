/** The rule that the product suggests, with its reason in one sentence and the runner-up. */
import type { TimeRuleId, TimeRuleResult } from '#contract/weights.ts';
import type { Spacing } from './spacing.ts';

export interface Choice {
  rule: TimeRuleId;
  reason: string;
  runnerUp: TimeRuleId | null;
}

/** Share of the fluctuation energy in the top third of the resolvable frequencies above which a record is not resolved (spec weights). */
const unresolvedShare = 0.05;
/** Snapshots below which a higher degree is not to be trusted; common practice, no source. */
const fewest = 7;

/**
 * Simpson where it has degree 3 and no negative weight on a record of some length; guarded Simpson where most of an uneven record is
 * within 2:1; the trapezoid otherwise and always where the record does not resolve what it shows. `equal` for one snapshot, or when
 * the spacing is unknown (an ensemble). Never a refused rule.
 */
export function chooseTimeRule(results: TimeRuleResult[], spacing: Spacing | null, topThirdEnergyShare: number | null = null): Choice {
  const open = (id: TimeRuleId) => results.find((each) => each.id === id && each.admissible);
  const choice = (rule: TimeRuleId, reason: string, runnerUp: TimeRuleId | null): Choice => ({ rule, reason, runnerUp: runnerUp && open(runnerUp) ? runnerUp : null });
  if (!spacing || spacing.count < 2) return choice('equal', 'Without a time axis every snapshot is an independent sample and counts the same.', null);
  if (open('provided')) return choice('provided', 'The archive brings its own time weights, and they pass the checks.', 'trapezoid');
  if (topThirdEnergyShare !== null && topThirdEnergyShare > unresolvedShare) {
    return choice('trapezoid', `${Math.round(topThirdEnergyShare * 100)} % of the fluctuation energy lies in the top third of the resolvable frequencies: a record that is not resolved gains nothing from a higher order.`, 'equal');
  }
  if (spacing.count < fewest) return choice('trapezoid', `With ${spacing.count} snapshots a higher order cannot be trusted.`, 'equal');
  const exact = open('simpson');
  if (exact && exact.degree !== null && exact.degree >= 3) return choice('simpson', 'The spacing is even, so that Simpson is exact to degree 3 with positive weights.', 'trapezoid');
  const guarded = open('simpson-guarded');
  if (guarded && (exact || guarded.degree === null || guarded.degree >= 2)) {
    return choice('simpson-guarded', 'The spacing is uneven but neighbouring intervals stay within 2:1: parabolas fit with positive weights.', 'trapezoid');
  }
  return choice('trapezoid', `Neighbouring intervals differ by more than 2:1 in places (spacing varies by a factor ${spacing.ratio.toPrecision(3)}): the trapezoid is safe on any stamps.`, 'simpson-guarded');
}
