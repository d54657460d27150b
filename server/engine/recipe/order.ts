/**
 * order: every record strictly forward in time. First listed and frozen snapshots go, then at a restart the earlier or the later
 * segment, then repeated stamps (the first of them stays), then what is left is sorted.
 */
import { describeOrder } from '../checks/record-order.ts';
import { roundOff } from '../checks/space-axes.ts';
import { copies } from '../checks/value-frozen.ts';
import { counted, type Column, type RecordState } from './record-state.ts';
import { refuse, type Step } from './step.ts';

/** Positions that stay when the earlier segment wins: those of the later one up to the stamp where the jump back happened go. */
function withoutOverlap(t: Float64Array, restarts: { index: number; from: number }[]): number[] {
  let limit = -Infinity, next = 0;
  const kept: number[] = [];
  for (let j = 0; j < t.length; j++) {
    if (next < restarts.length && restarts[next].index === j) limit = Math.max(limit, restarts[next++].from);
    if (next > 0 && t[j] <= limit) continue;
    kept.push(j);
  }
  return kept;
}

export const order: Step<'order'> = {
  name: 'order',
  rank: 1,
  apply(state: RecordState, step) {
    const names = state.fields.map((field) => field.name);
    let listed = 0, frozen = 0, overlapped = 0, repeated = 0;
    const kept: Column[] = [];
    state.sources.forEach((source, s) => {
      let columns = state.columns.filter((column) => column.source === s);
      const drop = new Set(step.drop.filter((each) => each.archive === source.archive).flatMap((each) => each.indices));
      const outside = [...drop].find((index) => index >= columns.length);
      if (outside !== undefined) refuse(`Snapshot ${outside} of run ${source.run} is to be dropped, and it has only ${columns.length}, numbered from 0.`, { run: source.run, index: outside });
      const before = columns.length;
      columns = columns.filter((column) => !drop.has(column.index));
      listed += before - columns.length;
      if (step.dropFrozen) {
        // A copy is a snapshot in which every selected field stands still.
        const sets = source.survey.fields.filter((field) => names.includes(field.name)).map((field) => new Set(copies(field, field.snapshots)));
        const moving = columns.filter((column) => !sets.every((set) => set.has(column.index)));
        frozen += columns.length - moving.length;
        columns = moving;
      }
      if (source.survey.stamps) {
        const t = Float64Array.from(columns, (column) => column.time!);
        const unit = roundOff(source.survey.stampType);
        const found = describeOrder(t, unit);
        if (found.undefinedStamps.length > 0) refuse(`Run ${source.run} has no time stamp at snapshot ${columns[found.undefinedStamps[0]].index}: drop it or correct the reading.`, { run: source.run });
        if (found.restarts.length > 0 && step.restart === 'refuse') {
          const first = found.restarts[0];
          refuse(`Run ${source.run} was restarted: at snapshot ${columns[first.index].index} time goes back from ${first.from} to ${first.to}. Say which segment to keep.`, { run: source.run, index: columns[first.index].index });
        }
        if (found.backward.length > 0 && !step.sort) refuse(`Run ${source.run} is not in order of time at snapshot ${columns[found.backward[0]].index}: let the step sort.`, { run: source.run, index: columns[found.backward[0]].index });
        if (step.restart === 'keep-earlier' && found.restarts.length > 0) {
          const stay = withoutOverlap(t, found.restarts);
          overlapped += columns.length - stay.length;
          columns = stay.map((j) => columns[j]);
        }
        const again = describeOrder(Float64Array.from(columns, (column) => column.time!), unit);
        if (!step.dropDuplicates && again.duplicates.length > 0) refuse(`Run ${source.run} has the time stamp ${columns[again.duplicates[0]].time} twice: let the step drop repeated stamps.`, { run: source.run });
        repeated += again.duplicates.length;
        overlapped += columns.length - again.kept.length - again.duplicates.length;
        columns = again.kept.map((j) => columns[j]);
      }
      kept.push(...columns);
    });
    state.columns = kept;
    const parts = [
      listed > 0 && `${counted(listed, 'listed snapshot')} dropped`, frozen > 0 && `${counted(frozen, 'frozen copy').replace('copys', 'copies')} dropped`,
      overlapped > 0 && `${counted(overlapped, 'overlapped snapshot')} of restarts dropped`, repeated > 0 && `${counted(repeated, 'repeated stamp')} dropped`,
    ].filter(Boolean);
    return parts.length > 0 ? `${parts.join(', ')}.` : 'Nothing to mend: every record runs forward in time.';
  },
};
