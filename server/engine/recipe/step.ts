/** The form of a recipe step. One file a step; the catalogue (index.ts) is the only other place that names it. */
import type { RecipeStep, StepName } from '#contract/recipe.ts';
import { PennyweightError } from '#contract/error.ts';
import type { RecordState } from './record-state.ts';

export interface Step<N extends StepName = StepName> {
  name: N;
  /** where it may stand: select 0, order 1, window 2, centre/weigh/split 3, cast 4; never before a lower rank */
  rank: number;
  /**
   * Applies the step. Returns the sentence that says what it changed. Errors: a PennyweightError ('recipe-invalid', 'stamps-invalid',
   * 'rule-not-admissible', …) whose sentence names the place; the plan reports it with the step's position.
   */
  apply(state: RecordState, step: Extract<RecipeStep, { step: N }>): string;
}

export function refuse(message: string, details: Record<string, unknown> = {}): never {
  throw new PennyweightError('recipe-invalid', message, details);
}
