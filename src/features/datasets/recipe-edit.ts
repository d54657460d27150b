/** Changes to a recipe, each giving a new one. */
import { stepNames, type Recipe, type RecipeStep, type StepName } from '#contract/recipe.ts';

export function stepOf<N extends StepName>(recipe: Recipe, name: N): Extract<RecipeStep, { step: N }> | null {
  return (recipe.steps.find((step) => step.step === name) as Extract<RecipeStep, { step: N }> | undefined) ?? null;
}

/** Puts a step in: in the place of the one of its kind, or where its kind belongs. */
export function setStep(recipe: Recipe, step: RecipeStep): Recipe {
  if (recipe.steps.some((each) => each.step === step.step)) return { ...recipe, steps: recipe.steps.map((each) => (each.step === step.step ? step : each)) };
  const rank = (name: StepName) => stepNames.indexOf(name);
  const at = recipe.steps.findIndex((each) => rank(each.step) > rank(step.step));
  const place = at < 0 ? recipe.steps.length : at;
  return { ...recipe, steps: [...recipe.steps.slice(0, place), step, ...recipe.steps.slice(place)] };
}

export function removeStep(recipe: Recipe, name: StepName): Recipe {
  return { ...recipe, steps: recipe.steps.filter((step) => step.step !== name) };
}

const starters: Record<Exclude<StepName, 'select'>, RecipeStep> = {
  order: { step: 'order', sort: true, restart: 'keep-later', dropDuplicates: true, dropFrozen: false, drop: [] },
  window: { step: 'window', from: null, to: null, every: 1, first: null, last: null },
  centre: { step: 'centre', subtract: 'weighted-mean' },
  weigh: { step: 'weigh', time: 'trapezoid', space: 'tensor', runs: 'equal' },
  split: { step: 'split', by: 'blocks', shares: [0.7, 0.15, 0.15], blocks: 10, guard: 1, seed: 1 },
  cast: { step: 'cast', type: 'float64' },
};

/** Steps that the recipe does not have yet. */
export function missingSteps(recipe: Recipe): Exclude<StepName, 'select'>[] {
  return (Object.keys(starters) as Exclude<StepName, 'select'>[]).filter((name) => stepOf(recipe, name) === null);
}

export function starter(name: Exclude<StepName, 'select'>): RecipeStep {
  return starters[name];
}

/** Moves the step at `from` by `by` places, within the recipe. */
export function moveStep(recipe: Recipe, from: number, by: 1 | -1): Recipe {
  const to = from + by;
  if (to < 0 || to >= recipe.steps.length) return recipe;
  const steps = [...recipe.steps];
  [steps[from], steps[to]] = [steps[to]!, steps[from]!];
  return { ...recipe, steps };
}
