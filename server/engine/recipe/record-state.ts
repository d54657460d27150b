/** What the steps of a recipe work on: the sources as surveyed, and the columns that are left. */
import type { Recipe, SplitPart, StepName } from '#contract/recipe.ts';
import type { SpaceRuleResult, TimeRuleId } from '#contract/weights.ts';
import type { Survey, SurveyAxis } from '../survey.ts';

/** One archive that the recipe selects. */
export interface RecipeSource {
  archive: string;
  run: string;
  parameters: Record<string, number>;
  survey: Survey;
}

/** One column: snapshot `index` (storage order) of source `source`. */
export interface Column {
  source: number;
  index: number;
  /** null without a time axis */
  time: number | null;
}

export interface PlannedField {
  name: string;
  unit: string | null;
  /** space axes in storage order */
  axes: SurveyAxis[];
  /** first row and number of rows */
  from: number;
  count: number;
}

export interface StepEffect {
  step: StepName;
  before: number;
  after: number;
  sentence: string;
}

export interface Problem {
  /** position of the step, null when it concerns the whole */
  step: number | null;
  code: string;
  message: string;
}

/** Grows step by step; a step returns nothing and changes the state it is given (made anew by every plan). */
export interface RecordState {
  recipe: Recipe;
  sources: RecipeSource[];
  fields: PlannedField[];
  columns: Column[];
  effects: StepEffect[];
  problems: Problem[];
  centre: 'nothing' | 'weighted-mean' | 'weighted-mean-per-run' | 'first-snapshot';
  timeRule: TimeRuleId;
  /** one a column; null until weighed */
  timeWeights: Float64Array | null;
  /** one a row; null until weighed */
  spaceWeights: Float64Array | null;
  spaceRule: SpaceRuleResult | null;
  duration: number;
  split: SplitPart[];
  type: 'float32' | 'float64';
}

/** Columns of each source, in their order: [from, to) into state.columns. */
export function recordRanges(state: Pick<RecordState, 'columns' | 'sources'>): { source: number; from: number; to: number }[] {
  const ranges: { source: number; from: number; to: number }[] = [];
  state.columns.forEach((column, j) => {
    const last = ranges[ranges.length - 1];
    if (last && last.source === column.source) last.to = j + 1;
    else ranges.push({ source: column.source, from: j, to: j + 1 });
  });
  return ranges;
}

/** Unit of the stamps, that of the first run; null without time. */
export function timeUnitOf(state: Pick<RecordState, 'sources'>): string | null {
  const time = state.sources[0]?.survey.reading.time;
  return time && time.kind !== 'ensemble' ? time.unit : null;
}

export const counted = (n: number, noun: string) => `${n} ${noun}${n === 1 ? '' : 's'}`;
