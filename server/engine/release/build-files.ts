/** What a build writes beside the matrix, as names and bytes; and its summary. No clock: the same plan gives the same bytes. */
import type { BuildSummary } from '#contract/dataset.ts';
import type { SplitPart } from '#contract/recipe.ts';
import { rowsOf } from '../recipe/plan.ts';
import { recordRanges, timeUnitOf, type RecordState } from '../recipe/record-state.ts';
import type { Decomposition } from '../spectrum/spectrum.ts';
import { judgeTimeRules } from '../quadrature/judge.ts';
import { npyFile } from './npy.ts';

/** Codes of split.npy. */
export const splitCodes: Record<SplitPart, number> = { train: 0, validation: 1, test: 2, guard: 3 };
const partNames = Object.keys(splitCodes) as SplitPart[];

export type Summary = Omit<BuildSummary, 'builtAt' | 'recipeSha256'>;

export function summarise(plan: RecordState, matrix: { sha256: string; bytes: number; castError: number }, decomposition: Decomposition, modes: number): Summary {
  return {
    rows: rowsOf(plan), columns: plan.columns.length, type: plan.type, bytes: matrix.bytes, matrixSha256: matrix.sha256, castError: matrix.castError,
    fields: plan.fields.map((field) => ({ name: field.name, unit: field.unit, from: field.from, count: field.count, shape: field.axes.map((axis) => axis.count) })),
    records: recordRanges(plan).map(({ source, from, to }) => ({ archive: plan.sources[source].archive, run: plan.sources[source].run, from, count: to - from, parameters: plan.sources[source].parameters })),
    timeRule: plan.timeRule, spaceRule: plan.spaceRule!, duration: plan.duration, centred: plan.centre,
    split: partNames.map((part) => ({ part, columns: plan.split.filter((each) => each === part).length })).filter((each) => each.columns > 0),
    spectrum: decomposition.result, modes,
    steps: plan.effects.map(({ step, before, after, sentence }) => ({ step, before: `${before} columns`, after: `${after} columns`, sentence })),
  };
}

const text = (value: string) => new TextEncoder().encode(value);

/** Every rule judged on each record, for those who wonder what another choice would have been. */
function weightsJson(plan: RecordState): Uint8Array {
  const records = recordRanges(plan).map(({ source, from, to }) => {
    const columns = plan.columns.slice(from, to), { run, survey } = plan.sources[source];
    const rules = columns[0].time === null ? [] : judgeTimeRules(Float64Array.from(columns, (column) => column.time!), survey.stampType);
    return { run, used: plan.timeRule, rules: rules.map((rule) => ({ ...rule, weights: undefined })) };
  });
  return text(`${JSON.stringify({ time: records, space: plan.spaceRule }, null, 2)}\n`);
}

function spectrumCsv(decomposition: Decomposition): Uint8Array {
  const { singular_values: values, floor, energy } = decomposition.result;
  let sum = 0;
  const rows = values.map((sigma, k) => {
    sum += sigma * sigma;
    // Below the floor there is noise: no digits are printed.
    return sigma > floor ? `${k + 1},${sigma},${Math.min(1, sum / energy)},yes` : `${k + 1},,,no`;
  });
  return text(`rank,singular_value,cumulative_energy,above_floor\n${rows.join('\n')}\n`);
}

/** The space axes of every field, so that a row can be put back on its grid. */
function fieldsJson(plan: RecordState): Uint8Array {
  const fields = plan.fields.map((field) => ({
    name: field.name, unit: field.unit, rows: [field.from, field.from + field.count],
    axes: field.axes.map((axis) => ({ name: axis.name, unit: axis.unit, count: axis.count, nodes: axis.nodes ? Array.from(axis.nodes) : null })),
  }));
  return text(`${JSON.stringify({ order: 'C order over the axes of each field; fields one after the other', time_unit: timeUnitOf(plan), split_codes: splitCodes, fields }, null, 2)}\n`);
}

export function buildFiles(plan: RecordState, mean: Float64Array | null, decomposition: Decomposition): Map<string, Uint8Array> {
  const rows = rowsOf(plan), ranges = recordRanges(plan), runIndex = new Int32Array(plan.columns.length);
  ranges.forEach(({ from, to }, r) => runIndex.fill(r, from, to));
  const subtracted = mean ?? new Float64Array(rows);
  return new Map([
    ['time.npy', npyFile(Float64Array.from(plan.columns, (column) => column.time ?? NaN))],
    ['run_index.npy', npyFile(runIndex)],
    ['time_weights.npy', npyFile(plan.timeWeights!)],
    ['space_weights.npy', npyFile(plan.spaceWeights!)],
    ['mean.npy', subtracted.length === rows ? npyFile(subtracted) : npyFile(subtracted, [rows, subtracted.length / rows], true)],
    ['split.npy', npyFile(Int8Array.from(plan.split, (part) => splitCodes[part]))],
    ['singular_values.npy', npyFile(Float64Array.from(decomposition.singularValues.subarray(0, decomposition.result.resolved)))],
    ['spectrum.csv', spectrumCsv(decomposition)],
    ['weights.json', weightsJson(plan)],
    ['fields.json', fieldsJson(plan)],
    ['recipe.json', text(`${JSON.stringify(plan.recipe, null, 2)}\n`)],
  ]);
}
