/** The record of an archive as pages draw it: beam, rules, statistics, snapshots. */
import type { z } from 'zod';
import type { fieldStatistics } from '#contract/archive.ts';
import { PennyweightError } from '#contract/error.ts';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import type { Beam, FieldValues } from '#contract/shape.ts';
import { timeRuleId } from '#contract/weights.ts';
import { findGaps, timeGap } from '../engine/checks/time-gap.ts';
import { describeOrder } from '../engine/checks/record-order.ts';
import { chooseTimeRule } from '../engine/quadrature/choose.ts';
import { judgeTimeRules, weightsBySegment } from '../engine/quadrature/judge.ts';
import { describeSpacing } from '../engine/quadrature/spacing.ts';
import type { FieldSurvey, Survey } from '../engine/survey.ts';
import { findArchive } from './archives.ts';
import type { App, Caller } from './context.ts';
import { fieldValues } from './field-values.ts';
import { withArchive } from './reading-pool.ts';
import { loadSurvey } from './survey-store.ts';

async function surveyOf(app: App, caller: Caller, id: string): Promise<{ survey: Survey; name: string }> {
  const { row } = await findArchive(app, caller, id);
  const survey = await loadSurvey(app, id);
  if (!survey) throw new PennyweightError('wrong-state', row.state === 'checking' ? 'The archive is being read: its record appears when that is done.' : 'This archive could not be read, so it has no record.');
  return { survey, name: row.name };
}

const snapshotsOf = (survey: Survey) => survey.stamps?.length ?? survey.fields[0]?.snapshots ?? 0;

/** Gaps, repeated stamps and restarts, by index in storage order. */
export function marksOf(stamps: Float64Array | null): Beam['marks'] {
  if (!stamps) return { gaps: [], duplicates: [], restarts: [] };
  const order = describeOrder(stamps);
  const kept = Float64Array.from(order.kept, (j) => stamps[j]);
  const { ratio, growth, share } = timeGap.thresholds;
  const gaps = findGaps(kept, ratio.default, growth.default, share.default).map((gap) => order.kept[gap.position]);
  return { gaps, duplicates: order.duplicates, restarts: [...order.restarts.map((restart) => restart.index), ...order.backward].sort((a, b) => a - b) };
}

/** Weights of the snapshots that an ordering step would keep, put back in storage order; the others weigh nothing. */
function orderedWeights(survey: Survey, rule: string): number[] | null {
  const stamps = survey.stamps, id = timeRuleId.safeParse(rule);
  if (!stamps || !id.success || stamps.length === 0) return null;
  const { kept } = describeOrder(stamps);
  const weights = weightsBySegment(id.data, Float64Array.from(kept, (j) => stamps[j]), survey.stampType);
  const all = new Array<number>(stamps.length).fill(0);
  kept.forEach((j, k) => { all[j] = weights[k]; });
  return all;
}

export async function archiveBeam(app: App, caller: Caller, id: string, asked: string | undefined): Promise<Beam> {
  const { survey, name } = await surveyOf(app, caller, id);
  const rule = asked ?? 'trapezoid', time = survey.reading.time;
  const weights = orderedWeights(survey, rule);
  return {
    stamps: survey.stamps ? Array.from(survey.stamps) : null, count: snapshotsOf(survey), unit: time && time.kind !== 'ensemble' ? time.unit : null, weights, rule: weights ? rule : null,
    marks: marksOf(survey.stamps), split: null, records: [{ label: name, from: 0, count: snapshotsOf(survey) }],
  };
}

/** Mean-free energies would need the data; the norms of the pass serve the error estimate. */
function energiesOf(survey: Survey, kept: number[]): Float64Array | null {
  if (survey.fields.length === 0 || survey.fields.some((field) => field.snapshots !== survey.stamps?.length)) return null;
  return Float64Array.from(kept, (j) => survey.fields.reduce((sum, field) => sum + field.norm[j] ** 2, 0));
}

export async function archiveWeights(app: App, caller: Caller, id: string): Promise<ResponseOf<typeof routes.getArchiveWeights>> {
  const { survey } = await surveyOf(app, caller, id);
  if (!survey.stamps || survey.stamps.length === 0) return { chosen: 'equal', reason: chooseTimeRule([], null).reason, rules: [] };
  const { kept } = describeOrder(survey.stamps);
  const stamps = Float64Array.from(kept, (j) => survey.stamps![j]);
  const provided = survey.timeWeights && survey.timeWeights.length === survey.stamps.length ? kept.map((j) => survey.timeWeights![j]) : null;
  const rules = judgeTimeRules(stamps, survey.stampType, { provided, energies: energiesOf(survey, kept) });
  const choice = chooseTimeRule(rules, describeSpacing(stamps, survey.stampType));
  // Put back in storage order: repeated snapshots weigh nothing.
  const spread = (weights: number[]) => {
    const all = new Array<number>(survey.stamps!.length).fill(0);
    if (weights.length === 0) return weights;
    kept.forEach((j, k) => { all[j] = weights[k]; });
    return all;
  };
  const left = survey.stamps.length - kept.length;
  return {
    chosen: choice.rule, rules: rules.map((rule) => ({ ...rule, weights: spread(rule.weights) })),
    reason: `${choice.reason}${choice.runnerUp ? ` Runner-up: ${choice.runnerUp}.` : ''}${left > 0 ? ` Judged without ${left} repeated or overlapped snapshot${left === 1 ? '' : 's'}, which the recipe's order step drops.` : ''}`,
  };
}

const finite = (values: Float64Array) => Array.from(values, (value) => (Number.isFinite(value) ? value : null));

export async function archiveStatistics(app: App, caller: Caller, id: string): Promise<{ fields: z.input<typeof fieldStatistics>[] }> {
  const { survey } = await surveyOf(app, caller, id);
  const shown = (field: FieldSurvey) => ({
    path: field.path, name: field.name, unit: field.unit, dtype: field.dtype, snapshots: field.snapshots, nodes: field.nodes,
    min: finite(field.min), max: finite(field.max), mean: finite(field.mean), norm: finite(field.norm), nonFinite: finite(field.nonFinite), stepChange: finite(field.stepChange),
  });
  return { fields: survey.fields.map(shown) };
}

export async function archiveSnapshot(app: App, caller: Caller, id: string, name: string, index: number): Promise<FieldValues> {
  const { survey } = await surveyOf(app, caller, id);
  const field = survey.reading.fields.find((each) => each.name === name);
  const its = survey.fields.find((each) => each.name === name);
  if (!field || !its) throw new PennyweightError('not-found', `The archive has no field "${name}": it has ${survey.reading.fields.map((each) => each.name).join(', ') || 'none'}.`, { field: name });
  if (index >= its.snapshots) throw new PennyweightError('range-invalid', `Snapshot ${index} is outside: ${name} has ${its.snapshots}, numbered from 0.`, { index, count: its.snapshots });
  const axes = field.axes.filter((axis) => axis !== 'time').map((axis) => survey.axes.find((each) => each.name === axis));
  const known = axes.every((axis) => axis !== undefined) && axes.reduce((n, axis) => n * axis!.count, 1) === its.nodes;
  const grid = known ? axes.map((axis) => ({ name: axis!.name, unit: axis!.unit, count: axis!.count, nodes: axis!.nodes })) : [{ name: 'node', unit: null, count: its.nodes, nodes: null }];
  return withArchive(app, id, async (open) => {
    for await (const block of open.snapshots(survey.reading, [name], [index])) {
      const time = survey.stamps?.[index];
      return fieldValues(block.values, grid, { label: `${name}, snapshot ${index}`, field: name, unit: field.unit, time: time !== undefined && Number.isFinite(time) ? time : null, index, count: its.snapshots });
    }
    throw new PennyweightError('internal', `Snapshot ${index} of ${name} could not be read.`, { index });
  });
}
