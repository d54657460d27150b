/** Spatial weights of one field's nodes by a space rule. */
import type { SpaceRuleId } from '#contract/weights.ts';
import type { SurveyAxis } from '../survey.ts';
import { gridOf } from './grid.ts';
import { spaceRuleOf } from './index.ts';
import type { SpaceWeights } from './space-rule.ts';

/**
 * `axes`: the field's space axes in storage order, with a 'component' axis where it stands; `provided`: weights of the archive,
 * one a node, when it brings any. Weights have the length nodes x components in that order; `sum` counts each node once.
 * Errors: 'rule-not-admissible' when the rule needs what the archive does not have; 'weights-invalid' with index and value.
 */
export function spaceWeights(
  rule: SpaceRuleId,
  axes: readonly SurveyAxis[],
  provided: Float64Array | null,
): SpaceWeights {
  return spaceRuleOf(rule).weights(gridOf(axes), provided);
}
