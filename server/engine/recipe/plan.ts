/** Applies a recipe to what is known of its sources: nothing is computed on the data. Preview and build use the same plan. */
import { PennyweightError } from '#contract/error.ts';
import { recipe as recipeSchema, recipeVersion, type Recipe } from '#contract/recipe.ts';
import { steps } from './index.ts';
import type { RecipeSource, RecordState } from './record-state.ts';
import { applyWeights } from './weigh.ts';

/** Reads a recipe from outside. Errors: 'recipe-invalid' with the place, also for one of a newer version. */
export function readRecipe(value: unknown): Recipe {
  const version = (value as { pennyweight?: unknown } | null)?.pennyweight;
  if (typeof version === 'number' && version > recipeVersion) throw new PennyweightError('recipe-invalid', `This recipe is of version ${version}; this program knows versions up to ${recipeVersion}. Update it first.`, { version });
  const parsed = recipeSchema.safeParse(value);
  if (parsed.success) return parsed.data;
  const issue = parsed.error.issues[0], [first, position] = issue.path;
  throw new PennyweightError('recipe-invalid', `${first === 'steps' && typeof position === 'number' ? `Step ${position + 1} of the recipe` : 'The recipe'} is not valid: ${issue.path.slice(2).join('.') || String(issue.path[0] ?? '')} ${issue.message}.`, { issues: parsed.error.issues.map((each) => ({ path: each.path.join('.'), message: each.message })) });
}

function emptyState(recipe: Recipe, sources: RecipeSource[]): RecordState {
  return { recipe, sources, fields: [], columns: [], effects: [], problems: [], centre: 'nothing', timeRule: 'equal', timeWeights: null, spaceWeights: null, spaceRule: null, duration: 0, split: [], type: 'float64' };
}

/** Positions of steps that stand in the wrong place or twice. */
function misplaced(recipe: Recipe): { step: number; message: string } | null {
  if (recipe.steps[0]?.step !== 'select') return { step: 0, message: 'A recipe begins with select: which runs and which fields.' };
  let rank = 0;
  const seen = new Set<string>();
  for (const [position, { step }] of recipe.steps.entries()) {
    if (seen.has(step)) return { step: position, message: `${step} is there twice: one of it is enough.` };
    seen.add(step);
    const its = steps.find((each) => each.name === step)!.rank;
    if (its < rank) return { step: position, message: `${step} stands too late: the order is select, order, window, then centre, weigh and split, and cast last.` };
    rank = its;
  }
  return null;
}

/**
 * The record after the recipe, with the effect of each step and the problems met; planning stops at the first step that cannot be
 * applied. Without a weigh step every column of a run and every row counts the same.
 */
export function planRecipe(recipe: Recipe, sources: RecipeSource[]): RecordState {
  const state = emptyState(recipe, sources);
  const wrong = misplaced(recipe);
  if (wrong) {
    state.problems.push({ step: wrong.step, code: 'recipe-invalid', message: wrong.message });
    return state;
  }
  for (const [position, step] of recipe.steps.entries()) {
    const before = state.columns.length;
    try {
      const sentence = steps.find((each) => each.name === step.step)!.apply(state, step);
      state.effects.push({ step: step.step, before, after: state.columns.length, sentence });
      if (state.columns.length === 0) throw new PennyweightError('recipe-invalid', 'No snapshot is left.');
    } catch (error) {
      if (!(error instanceof PennyweightError)) throw error;
      state.problems.push({ step: position, code: error.code, message: error.message });
      return state;
    }
  }
  if (!state.timeWeights && !weighEqually(state)) return state;
  if (state.split.length === 0) state.split = new Array(state.columns.length).fill('train');
  return state;
}

/** Equal weights need stamps in order as well; false when there are none. */
function weighEqually(state: RecordState): boolean {
  try {
    applyWeights(state, 'equal', 'none');
    return true;
  } catch (error) {
    if (!(error instanceof PennyweightError)) throw error;
    state.problems.push({ step: null, code: error.code, message: error.message });
    return false;
  }
}

/** The plan, or a refusal by its first problem. */
export function mustPlan(recipe: Recipe, sources: RecipeSource[]): RecordState {
  const state = planRecipe(recipe, sources);
  const [problem] = state.problems;
  if (problem) throw new PennyweightError('recipe-invalid', `${problem.step === null ? '' : `Step ${problem.step + 1}: `}${problem.message}`, { step: problem.step, code: problem.code });
  return state;
}

export function rowsOf(state: RecordState): number {
  return state.fields.reduce((n, field) => n + field.count, 0);
}
