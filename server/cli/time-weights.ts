/** The time rules judged on an archive's stamps, and the one that is used. */
import type { ElementType } from '#contract/reading.ts';
import type { TimeRuleId, TimeRuleResult, WeightsReport } from '#contract/weights.ts';
import { chooseTimeRule } from '../engine/quadrature/choose.ts';
import { judgeTimeRules } from '../engine/quadrature/judge.ts';
import { describeSpacing } from '../engine/quadrature/spacing.ts';

/** Independent samples: each counts 1/m, so that sums are means. */
function sampleMean(count: number): TimeRuleResult {
  const weights = new Array<number>(count).fill(1 / count);
  return {
    id: 'equal',
    admissible: true,
    why: 'there is no time axis: every snapshot is an independent sample and counts the same, and the weights sum to 1.',
    weights,
    mass: null,
    degree: 0,
    effective: 1,
    negative: 0,
    min: 1 / count,
    max: 1 / count,
    sum: 1,
    energy_error: null,
    holdout_error: null,
  };
}

export interface WeighedRecord {
  stamps: Float64Array | null;
  stampType: ElementType | null;
  timeWeights: Float64Array | null;
  /** number of snapshots */
  count: number;
}

/** `asked` null: the product chooses. `energies`: ||u_j||_W^2. Errors: 'stamps-invalid' when the stamps do not increase. */
export function timeWeights(
  { stamps, stampType, timeWeights: provided, count }: WeighedRecord,
  asked: TimeRuleId | null,
  energies: Float64Array,
): WeightsReport['time'] {
  const rules = stamps ? judgeTimeRules(stamps, stampType, { provided, energies }) : [sampleMean(count)];
  const choice = chooseTimeRule(rules, stamps ? describeSpacing(stamps, stampType) : null);
  if (asked === null) return { chosen: choice.rule, reason: choice.reason, rules };
  const result = rules.find((rule) => rule.id === asked);
  if (!result)
    return {
      chosen: asked,
      reason: `Refused: the rule "${asked}" needs what this archive does not have; ${choice.rule} would do.`,
      rules,
    };
  return {
    chosen: asked,
    reason: result.admissible ? 'Asked for.' : `Refused: ${result.why} Choose another rule, such as ${choice.rule}.`,
    rules,
  };
}
