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
 * Share of neighbouring intervals within 2:1 from which guarded Simpson is taken. Where they are many it differs little from
 * Simpson, else little from the trapezoid (spec weights, table of the prototype). Our own, no source.
 */
const mostlyGentle = 0.9;

/**
 * The suggested rule, never a refused one. `results` of judgeTimeRules; `spacing` null without a time axis;
 * `topThirdEnergyShare`: share of the fluctuation energy in the top third of the resolvable frequencies, when it is known.
 *   equal            without a time axis, or for a single snapshot
 *   provided         where the archive brings weights that pass the checks
 *   trapezoid        where the record is not resolved, has few snapshots, or its spacing jumps often
 *   simpson          where it has degree 3 and no negative weight
 *   simpson-guarded  where at least nine tenths of the neighbouring intervals are within 2:1
 */
export function chooseTimeRule(
  results: TimeRuleResult[],
  spacing: Spacing | null,
  topThirdEnergyShare: number | null = null,
): Choice {
  const open = (id: TimeRuleId) => results.find((each) => each.id === id && each.admissible);
  const choice = (rule: TimeRuleId, reason: string, next: TimeRuleId | null): Choice => ({
    rule,
    reason,
    runnerUp: next && open(next) ? next : null,
  });
  if (!spacing || spacing.count < 2)
    return choice('equal', 'Without a time axis every snapshot is an independent sample and counts the same.', null);
  if (open('provided'))
    return choice('provided', 'The archive brings its own time weights, and they pass the checks.', 'trapezoid');
  if (topThirdEnergyShare !== null && topThirdEnergyShare > unresolvedShare)
    return choice(
      'trapezoid',
      `${Math.round(topThirdEnergyShare * 100)} % of the fluctuation energy lies in the top third of the resolvable frequencies: a record that is not resolved gains nothing from a higher order.`,
      'equal',
    );
  if (spacing.count < fewest)
    return choice('trapezoid', `With ${spacing.count} snapshots a higher order cannot be trusted.`, 'equal');
  const exact = open('simpson');
  if (exact && (exact.degree ?? 0) >= 3)
    return choice(
      'simpson',
      `${spacing.uniform || spacing.roundedOnly ? 'The spacing is even' : 'Each pair of intervals is even'}, so that Simpson is exact to degree 3 with positive weights.`,
      'trapezoid',
    );
  if (open('simpson-guarded') && spacing.gentleShare >= mostlyGentle)
    return choice('simpson-guarded', guardedReason(spacing), 'trapezoid');
  return choice(
    'trapezoid',
    `Neighbouring intervals often differ by more than 2:1 (the spacing varies by a factor ${spacing.ratio.toPrecision(3)}): the trapezoid is safe on any stamps.`,
    'simpson-guarded',
  );
}

function guardedReason({ uniform, roundedOnly, gentleShare }: Spacing): string {
  if (uniform || roundedOnly)
    return 'The spacing is even and so is the number of snapshots: parabolas with a corrected last interval are exact to degree 2 with positive weights.';
  if (gentleShare === 1)
    return 'The spacing is uneven but neighbouring intervals stay within 2:1: parabolas fit with positive weights.';
  return `The spacing is uneven, and ${Number((100 * gentleShare).toPrecision(3))} % of the neighbouring intervals are within 2:1: parabolas there and the trapezoid elsewhere give positive weights.`;
}
