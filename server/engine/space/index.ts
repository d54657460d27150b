/** The catalogue of space rules. Adding one: its file, and a line here. */
import { PennyweightError } from '#contract/error.ts';
import type { SpaceRuleId } from '#contract/weights.ts';
import { none } from './none.ts';
import { provided } from './provided.ts';
import type { SpaceRule } from './space-rule.ts';
import { tensor } from './tensor.ts';

export const spaceRules: readonly SpaceRule[] = [none, tensor, provided];

/** Errors: 'rule-not-admissible' for an id without a rule. */
export function spaceRuleOf(id: SpaceRuleId): SpaceRule {
  const rule = spaceRules.find((each) => each.id === id);
  if (!rule)
    throw new PennyweightError(
      'rule-not-admissible',
      `The space rule "${id}" is not available: choose one of ${spaceRules.map((each) => each.id).join(', ')}.`,
      { rule: id },
    );
  return rule;
}
