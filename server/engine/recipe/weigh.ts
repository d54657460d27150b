/**
 * weigh: time weights on each record by itself (they never span two runs), space weights on each field's grid, and the weights of runs.
 * One run: the weights sum to its duration. Several: each run's weights are scaled to the mean duration of all, so that a run counts the
 * same however many snapshots it stored and however long it ran; the sum is then the total duration.
 * An ensemble without time: every sample has the weight 1/m of its run, each run the sum 1.
 */
import { judgeTimeRule } from '../quadrature/judge.ts';
import { providedWeights } from '../quadrature/provided.ts';
import { accurateSum } from '../quadrature/stamps.ts';
import { spaceWeights } from '../space/space-weights.ts';
import { PennyweightError } from '#contract/error.ts';
import type { SpaceRuleId, TimeRuleId } from '#contract/weights.ts';
import { recordRanges, type Column, type RecordState } from './record-state.ts';
import type { Step } from './step.ts';

function recordWeights(rule: TimeRuleId, state: RecordState, columns: Column[], source: number): Float64Array {
  const { survey, run } = state.sources[source];
  if (columns[0].time === null) {
    if (rule !== 'equal') throw new PennyweightError('rule-not-admissible', `Run ${run} has no time axis: only the rule "equal" can weigh it.`, { run, rule });
    return new Float64Array(columns.length).fill(1 / columns.length);
  }
  const stamps = Float64Array.from(columns, (column) => column.time!);
  if (rule === 'provided') {
    const given = survey.timeWeights;
    if (!given) throw new PennyweightError('rule-not-admissible', `Run ${run} brings no time weights: choose another time rule.`, { run, rule });
    return providedWeights(stamps, columns.map((column) => given[column.index])).weights;
  }
  const result = judgeTimeRule(rule, stamps, survey.stampType);
  if (!result.admissible) throw new PennyweightError('rule-not-admissible', `The time rule "${rule}" cannot be used on run ${run}: ${result.why}`, { run, rule });
  return Float64Array.from(result.weights);
}

export function applyWeights(state: RecordState, time: TimeRuleId, space: SpaceRuleId): string {
  const ranges = recordRanges(state);
  const weights = ranges.map(({ source, from, to }) => recordWeights(time, state, state.columns.slice(from, to), source));
  const totals = weights.map((each) => accurateSum(each));
  const mean = accurateSum(Float64Array.from(totals)) / totals.length;
  state.timeWeights = new Float64Array(state.columns.length);
  ranges.forEach(({ from }, r) => state.timeWeights!.set(weights[r].map((a) => (a * mean) / totals[r]), from));
  state.timeRule = time;
  state.duration = accurateSum(state.timeWeights);
  const fields = state.fields.map((field) => ({ field, ...spaceWeights(space, field.axes, space === 'provided' ? state.sources[0].survey.spaceWeights : null) }));
  const rows = state.fields.reduce((n, field) => n + field.count, 0);
  state.spaceWeights = new Float64Array(rows);
  for (const { field, weights: each } of fields) state.spaceWeights.set(each, field.from);
  state.spaceRule = fields[0].result;
  const runs = ranges.length > 1 ? ` Each of the ${ranges.length} runs has the same total weight.` : '';
  return `Time rule ${time}, sum ${Number(state.duration.toPrecision(6))}; space rule ${space}, sum ${Number(fields[0].result.sum.toPrecision(6))}.${runs}`;
}

export const weigh: Step<'weigh'> = {
  name: 'weigh',
  rank: 3,
  apply: (state, { time, space }) => applyWeights(state, time, space),
};
