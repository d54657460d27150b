/** Recipes and sources for tests of the plan: a record is stated by its stamps and values, a recipe by what it changes. */
import type { Recipe, RecipeStep, StepName } from '#contract/recipe.ts';
import { readRecipe } from '../../../../server/engine/recipe/plan.ts';
import type { RecipeSource } from '../../../../server/engine/recipe/record-state.ts';
import { makeSurvey, movingValues, type RecordPlan } from '../checks/survey-factory.ts';

/** A UUID that ends in `n`. */
export const archiveId = (n: number) => `00000000-0000-4000-8000-${String(n).padStart(12, '0')}`;

/** One moving field u of 4 nodes, unless told otherwise. */
export function source(n: number, stamps: ArrayLike<number> | null, more: RecordPlan = {}): RecipeSource {
  const fields = more.fields ?? [{ values: movingValues(stamps?.length ?? 6) }];
  return { archive: archiveId(n), run: `run ${n}`, parameters: { re: 100 * n }, survey: makeSurvey({ stamps, ...more, fields }) };
}

export type Loose = { step: StepName } & Record<string, unknown>;

/** select of the first `runs` sources and field u, then the steps; what they leave out is the contract's default. */
export function recipeOf(steps: Loose[], runs = 1, fields = ['u']): Recipe {
  const select: Loose = { step: 'select', archives: Array.from({ length: runs }, (_, i) => archiveId(i + 1)), fields };
  return readRecipe({ pennyweight: 1, steps: [select, ...steps] as unknown as RecipeStep[] });
}
