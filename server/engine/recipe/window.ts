/** window: from and to (inclusive), every k-th, the first or the last of each record. */
import { counted, recordRanges, type RecordState } from './record-state.ts';
import { refuse, type Step } from './step.ts';

export const window: Step<'window'> = {
  name: 'window',
  rank: 2,
  apply(state: RecordState, { from, to, every, first, last }) {
    if (from !== null && to !== null && from > to) refuse(`The window starts at ${from}, after its end ${to}.`, { from, to });
    const before = state.columns.length;
    if ((from !== null || to !== null) && state.columns.some((column) => column.time === null)) refuse('The records have no time axis: choose snapshots by number instead of time.');
    const runs = recordRanges(state).map(({ source, from: begin, to: end }) => ({ source, columns: state.columns.slice(begin, end) }));
    state.columns = runs.flatMap(({ source, columns }) => {
      let kept = columns.filter(({ time }) => (from === null || time! >= from) && (to === null || time! <= to));
      kept = kept.filter((_, j) => j % every === 0);
      if (first !== null) kept = kept.slice(0, first);
      if (last !== null) kept = kept.slice(-last);
      if (kept.length === 0) {
        const [a, b] = [columns[0].time, columns[columns.length - 1].time];
        refuse(`The window leaves no snapshot of run ${state.sources[source].run}${a !== null ? `, which spans ${a} to ${b}` : ''}.`, { run: state.sources[source].run });
      }
      return kept;
    });
    return `${counted(before - state.columns.length, 'snapshot')} outside the window left out.`;
  },
};
