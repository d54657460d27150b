/** The catalogue of time rules. Adding one: its file, and a line here. */
import { PennyweightError } from '#contract/error.ts';
import type { TimeRuleId } from '#contract/weights.ts';
import { equal } from './equal.ts';
import { simpsonGuarded } from './simpson-guarded.ts';
import { simpson } from './simpson.ts';
import type { TimeRule } from './time-rule.ts';
import { trapezoid } from './trapezoid.ts';

/** Rules that follow from the stamps alone; 'provided' needs the archive's weights and is judged beside them. */
export const timeRules: readonly TimeRule[] = [equal, trapezoid, simpson, simpsonGuarded];

/** Errors: 'rule-not-admissible' for an id without a rule from stamps. */
export function timeRuleOf(id: TimeRuleId): TimeRule {
  const rule = timeRules.find((each) => each.id === id);
  if (!rule)
    throw new PennyweightError(
      'rule-not-admissible',
      `The time rule "${id}" is not available: choose one of ${timeRules.map((each) => each.id).join(', ')}.`,
      { rule: id },
    );
  return rule;
}
