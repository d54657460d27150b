/** What a recipe would do, from the surveys alone: instant, and nothing is computed on the data. */
import type { Preview } from '#contract/dataset.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Beam } from '#contract/shape.ts';
import { planRecipe, readRecipe, rowsOf } from '../engine/recipe/plan.ts';
import { recordRanges, timeUnitOf, type RecordState } from '../engine/recipe/record-state.ts';
import { chooseTimeRule } from '../engine/quadrature/choose.ts';
import { judgeTimeRules } from '../engine/quadrature/judge.ts';
import { describeSpacing } from '../engine/quadrature/spacing.ts';
import { marksOf } from './archive-record.ts';
import { campaignBySlug } from './campaign-lookup.ts';
import { authorise, type App, type Caller } from './context.ts';
import { recipeSources } from './draft-sources.ts';

const nothing = (problem: Preview['problems'][number]): Preview => ({ valid: false, problems: [problem], steps: [], rows: null, columns: null, bytes: null, beam: null, rules: [], suggestion: null });

/** The beam of a planned record: runs one after the other, each with its own time axis. */
export function beamOf(plan: RecordState): Beam {
  const ranges = recordRanges(plan);
  const stamped = plan.columns.every((column) => column.time !== null);
  const gaps = ranges.flatMap(({ from, to }) => (stamped ? marksOf(Float64Array.from(plan.columns.slice(from, to), (column) => column.time!)).gaps.map((j) => j + from) : []));
  return {
    stamps: stamped ? plan.columns.map((column) => column.time!) : null, count: plan.columns.length, unit: timeUnitOf(plan),
    weights: plan.timeWeights ? Array.from(plan.timeWeights) : null, rule: plan.timeWeights ? plan.timeRule : null, marks: { gaps, duplicates: [], restarts: [] },
    split: plan.split.length > 0 ? plan.split : null, records: ranges.map(({ source, from, to }) => ({ label: plan.sources[source].run, from, count: to - from })),
  };
}

/** Every rule judged on the records, each a segment of its own; the suggestion follows the longest record. */
function rulesOf(plan: RecordState): Pick<Preview, 'rules' | 'suggestion'> {
  if (plan.columns.length === 0 || plan.columns.some((column) => column.time === null)) return { rules: [], suggestion: null };
  const ranges = recordRanges(plan), stamps = Float64Array.from(plan.columns, (column) => column.time!);
  const dtype = plan.sources[ranges[0].source].survey.stampType;
  const rules = judgeTimeRules(stamps, dtype, { segments: ranges.map((range) => range.from) });
  const longest = ranges.reduce((best, range) => (range.to - range.from > best.to - best.from ? range : best));
  const choice = chooseTimeRule(rules, describeSpacing(stamps.slice(longest.from, longest.to), dtype));
  return { rules, suggestion: { rule: choice.rule, reason: choice.reason } };
}

export async function previewRecipe(app: App, caller: Caller, slug: string, given: unknown): Promise<Preview> {
  const where = await campaignBySlug(app.db, caller, slug);
  authorise(caller, 'create', 'Draft', { campaignId: where.id });
  let recipe;
  try {
    recipe = readRecipe(given);
  } catch (error) {
    if (!(error instanceof PennyweightError)) throw error;
    return nothing({ step: null, code: error.code, message: error.message });
  }
  const plan = planRecipe(recipe, await recipeSources(app, where.id, recipe));
  const rows = rowsOf(plan);
  let judged: Pick<Preview, 'rules' | 'suggestion'> = { rules: [], suggestion: null };
  try {
    judged = rulesOf(plan);
  } catch (error) {
    // Records that do not run forward in time have no rules; the plan's own problem says so.
    if (!(error instanceof PennyweightError)) throw error;
  }
  return {
    valid: plan.problems.length === 0, problems: plan.problems, steps: plan.effects, rows: rows || null, columns: plan.columns.length || null, bytes: rows && plan.columns.length ? rows * plan.columns.length * (plan.type === 'float32' ? 4 : 8) : null,
    beam: plan.columns.length > 0 ? beamOf(plan) : null, ...judged,
  };
}
