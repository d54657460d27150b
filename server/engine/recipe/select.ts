/** select: which archives and fields; all on one grid. The state then holds every snapshot of every source, in storage order. */
import { compareGrids } from '../checks/grid-differs.ts';
import type { Survey, SurveyAxis } from '../survey.ts';
import { counted, type PlannedField, type RecipeSource, type RecordState } from './record-state.ts';
import { refuse, type Step } from './step.ts';

function axesOf(source: RecipeSource, name: string): SurveyAxis[] {
  const field = source.survey.reading.fields.find((each) => each.name === name);
  const its = source.survey.fields.find((each) => each.name === name);
  if (!field || !its) refuse(`Run ${source.run} has no field "${name}": it has ${source.survey.reading.fields.map((each) => each.name).join(', ') || 'none'}.`, { run: source.run, field: name });
  const axes = field.axes.filter((axis) => axis !== 'time').map((axis) => source.survey.axes.find((each) => each.name === axis));
  const known = axes.filter((axis) => axis !== undefined);
  if (known.length === axes.length && known.reduce((n, axis) => n * axis.count, 1) === its.nodes) return known;
  return [{ name: 'node', path: null, unit: null, count: its.nodes, nodes: null, edges: null, dtype: null, periodic: null }];
}

export function snapshotsOf(survey: Survey, fields: string[]): number {
  return Math.min(...survey.fields.filter((field) => fields.includes(field.name)).map((field) => field.snapshots));
}

export const select: Step<'select'> = {
  name: 'select',
  rank: 0,
  apply(state: RecordState, { archives, fields }) {
    const double = archives.find((archive, i) => archives.indexOf(archive) !== i) ?? fields.find((field, i) => fields.indexOf(field) !== i);
    if (double !== undefined) refuse(`"${double}" is selected twice: remove one.`);
    const missing = archives.find((archive) => !state.sources.some((source) => source.archive === archive));
    if (missing) refuse(`Archive ${missing} is not there, is withdrawn, or has not been read: choose another.`, { archive: missing });
    state.sources = archives.map((archive) => state.sources.find((source) => source.archive === archive)!);
    let from = 0;
    state.fields = fields.map((name): PlannedField => {
      const [first, ...others] = state.sources.map((source) => ({ source, axes: axesOf(source, name) }));
      for (const other of others) {
        const clause = compareGrids(first.axes, other.axes);
        if (clause) refuse(`Field "${name}" of run ${other.source.run} is on another grid than that of run ${first.source.run}: ${clause.replace('here', `in ${first.source.run}`).replace('there', `in ${other.source.run}`)}.`, { field: name, run: other.source.run });
        const [a, b] = [first, other].map(({ source }) => source.survey.fields.find((each) => each.name === name)!.unit);
        if (a !== b) refuse(`Field "${name}" is in ${a ?? 'no unit'} in run ${first.source.run} and in ${b ?? 'no unit'} in run ${other.source.run}: correct the reading.`, { field: name });
      }
      const count = first.axes.reduce((n, axis) => n * axis.count, 1);
      const planned = { name, unit: first.source.survey.fields.find((each) => each.name === name)!.unit, axes: first.axes, from, count };
      from += count;
      return planned;
    });
    state.columns = state.sources.flatMap((source, s) => {
      const m = snapshotsOf(source.survey, fields), { stamps } = source.survey;
      if (stamps && stamps.length < m) refuse(`Run ${source.run} has ${stamps.length} time stamps for ${m} snapshots: correct its reading.`, { run: source.run });
      return Array.from({ length: m }, (_, index) => ({ source: s, index, time: stamps ? stamps[index] : null }));
    });
    const timed = state.sources.filter((source) => source.survey.stamps).length;
    if (timed !== 0 && timed !== state.sources.length) refuse('Some runs have time stamps and others have none: they cannot be weighed together. Give the missing ones in the reading.');
    const units = state.sources.map(({ survey: { reading: { time } } }) => (time && time.kind !== 'ensemble' ? time.unit : null));
    const other = units.findIndex((unit) => unit !== units[0]);
    if (timed > 0 && other > 0) refuse(`Time is in ${units[0] ?? 'no unit'} in run ${state.sources[0].run} and in ${units[other] ?? 'no unit'} in run ${state.sources[other].run}: correct the reading.`, { run: state.sources[other].run });
    return `${counted(state.sources.length, 'run')} with ${counted(state.columns.length, 'snapshot')}; ${counted(fields.length, 'field')} of ${from} values in all.`;
  },
};
