/** One archive weighed in time and space, with the spectrum of its snapshots: what `weights` reports. */
import { PennyweightError } from '#contract/error.ts';
import type { ArchiveContents, ElementType, Reading } from '#contract/reading.ts';
import type { SpaceRuleId, TimeRuleId, WeightsReport } from '#contract/weights.ts';
import { assertStamps } from '../engine/quadrature/stamps.ts';
import { weightedSpectrum, type Decomposition } from '../engine/spectrum/spectrum.ts';
import type { LinearAlgebra } from '../linalg/linear-algebra.ts';
import { openIsolated, type IsolatedArchive } from '../reading/isolated.ts';
import type { ArchiveFile } from './archive-files.ts';
import { chosenReading } from './checked-archive.ts';
import type { ReadingChoice } from './reading-choice.ts';
import { snapshotMatrix, type SnapshotMatrix } from './snapshot-matrix.ts';
import { stateWeights } from './state-weights.ts';
import { timeWeights } from './time-weights.ts';

/** m^2 doubles of the correlation matrix, and m^3 operations of its eigenproblem. */
const mostSnapshots = 4000;

export interface WeighedArchive {
  report: WeightsReport;
  stamps: Float64Array | null;
  timeWeights: Float64Array;
  spaceWeights: Float64Array;
  /** null when the rule was refused or there is no spectrum; `refusal` then says why */
  decomposition: Decomposition | null;
  refusal: PennyweightError | null;
  matrix: SnapshotMatrix;
}

function snapshotsIn(contents: ArchiveContents, reading: Reading): number {
  const [field] = reading.fields;
  const [before, after] = field.path.split('{step}');
  if (after !== undefined)
    return contents.arrays.filter(({ path }) => path.startsWith(before) && path.endsWith(after)).length;
  const at = field.axes.indexOf('time');
  return at < 0 ? 1 : (contents.arrays.find(({ path }) => path === field.path)?.shape[at] ?? 0);
}

async function fill(
  archive: IsolatedArchive,
  reading: Reading,
  matrix: SnapshotMatrix,
  space: Float64Array,
  onShare: (share: number) => void,
): Promise<Float64Array> {
  const energies = new Float64Array(matrix.snapshots);
  const indices = Uint32Array.from({ length: matrix.snapshots }, (_, j) => j);
  for await (const { from, count, nodes, values } of archive.snapshots(
    reading,
    reading.fields.map((field) => field.name),
    indices,
  )) {
    for (let k = 0; k < count; k++) {
      const column = values.subarray(k * nodes, (k + 1) * nodes);
      let energy = 0;
      for (let i = 0; i < nodes; i++) energy += space[i] * column[i] * column[i];
      energies[from + k] = energy;
      matrix.put(from + k, column);
    }
    onShare((from + count) / matrix.snapshots);
  }
  return energies;
}

/** Rounding unit of the coarsest stored type among the fields. */
function dataEpsilon(contents: ArchiveContents, reading: Reading): number {
  const units: Partial<Record<ElementType, number>> = { float16: 2 ** -10, float32: 2 ** -23 };
  return Math.max(
    Number.EPSILON,
    ...reading.fields.map(
      (field) =>
        units[
          contents.arrays.find(
            ({ path }) => path === field.path || path.endsWith(field.path.split('{step}')[1] ?? path),
          )?.dtype ?? 'float64'
        ] ?? 0,
    ),
  );
}

async function refusable(work: () => Promise<Decomposition>): Promise<Decomposition | PennyweightError> {
  try {
    return await work();
  } catch (error) {
    if (error instanceof PennyweightError && error.code !== 'internal') return error;
    throw error;
  }
}

async function weighOpened(archive: IsolatedArchive, options: WeighOptions): Promise<WeighedArchive> {
  const contents = await archive.contents();
  const reading = await chosenReading(archive, options.choice);
  const [mismatch] = await archive.fits(reading);
  if (mismatch)
    throw new PennyweightError(
      'reading-mismatch',
      `${mismatch.message} Correct the reading; "pennyweight check" shows it.`,
      { path: mismatch.path },
    );
  const vectors = await archive.axes(reading);
  const count = vectors.stamps?.length ?? snapshotsIn(contents, reading);
  if (vectors.stamps) assertStamps(vectors.stamps);
  if (count === 0)
    throw new PennyweightError(
      'matrix-invalid',
      `${reading.fields[0].path} holds no snapshot: there is nothing to weigh.`,
      { path: reading.fields[0].path },
    );
  const space = stateWeights(contents, reading, vectors, options.space);
  const matrix = snapshotMatrix(space.weights.length, count);
  try {
    const energies = await fill(archive, reading, matrix, space.weights, options.onShare);
    const time = timeWeights({ ...vectors, count }, options.rule, energies);
    const chosen = time.rules.find((rule) => rule.id === time.chosen);
    const refused = !chosen?.admissible
      ? new PennyweightError('rule-not-admissible', time.reason, { rule: time.chosen })
      : count > mostSnapshots
        ? new PennyweightError(
            'limit-exceeded',
            `A spectrum is computed up to ${mostSnapshots} snapshots, and there are ${count}.`,
            { count },
          )
        : null;
    const weights = Float64Array.from(chosen?.weights ?? []);
    const outcome =
      refused ??
      (await refusable(() =>
        weightedSpectrum(matrix, weights, space.weights, options.algebra, dataEpsilon(contents, reading)),
      ));
    const decomposition = outcome instanceof PennyweightError ? null : outcome;
    return {
      report: { time, space: space.result, spectrum: decomposition?.result ?? null },
      stamps: vectors.stamps,
      timeWeights: weights,
      spaceWeights: space.weights,
      decomposition,
      refusal: outcome instanceof PennyweightError ? outcome : null,
      matrix,
    };
  } catch (error) {
    matrix.close();
    throw error;
  }
}

export interface WeighOptions {
  choice: ReadingChoice;
  rule: TimeRuleId | null;
  space: SpaceRuleId | null;
  algebra: LinearAlgebra;
  onShare: (share: number) => void;
}

/** The caller closes `matrix`. Errors: what reading refuses; 'reading-mismatch', 'stamps-invalid', 'weights-invalid'. */
export async function weighArchive(files: ArchiveFile[], options: WeighOptions): Promise<WeighedArchive> {
  const archive = await openIsolated(files.map(({ name, path }) => ({ name, path })));
  try {
    return await weighOpened(archive, options);
  } finally {
    await archive.close();
  }
}
