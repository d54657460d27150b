/**
 * Builds a draft's matrix: streams the kept snapshots out of each source, centres, casts, weighs, and writes arrays that are the same
 * bytes for the same sources and recipe. Everything is made in a scratch folder; publishing it and one transaction make it visible.
 */
import { randomUUID } from 'node:crypto';
import { rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { judgePlan } from '../engine/recipe/judge-plan.ts';
import { mustPlan, rowsOf } from '../engine/recipe/plan.ts';
import { recordRanges, type RecordState } from '../engine/recipe/record-state.ts';
import { coefficientsOf, modesOf, weightedSpectrum, type RowTileSource } from '../engine/spectrum/spectrum.ts';
import { npyFile } from '../engine/release/npy.ts';
import { linearAlgebra } from '../linalg/choose.ts';
import type { App } from '../services/context.ts';
import { recipeSources } from '../services/draft-sources.ts';
import { draftToBuild, finishBuild } from '../services/draft-builds.ts';
import { openArchiveFiles } from '../services/reading-pool.ts';
import { MatrixReader, MatrixWriter, writeTiles } from '../services/matrix-store.ts';
import { buildFiles, summarise } from '../engine/release/build-files.ts';
import type { JobHandle, JobHandler } from './handle.ts';

const modesKept = 20;

export const build: JobHandler = async (app, job) => {
  const { draft, policy, inputs } = await draftToBuild(app, job.subjectId);
  const plan = mustPlan(draft.recipe, await recipeSources(app, draft.campaignId, draft.recipe));
  const scratch = await app.storage.scratchFolder(`build-${job.id}`);
  try {
    const raw = join(scratch, 'raw.npy');
    const mean = await gather(app, job, plan, raw);
    const matrix = await centreAndCast(job, plan, raw, mean, join(scratch, 'matrix.npy'));
    await rm(raw);
    const reader = await MatrixReader.open(join(scratch, 'matrix.npy'), shapeOf(plan));
    try {
      const watched = watchedTiles(job, plan, reader);
      const algebra = await linearAlgebra();
      const single = plan.type === 'float32' || plan.sources.some(({ survey }) => survey.fields.some((field) => field.dtype === 'float32' && plan.fields.some((each) => each.name === field.name)));
      const decomposition = await weightedSpectrum(watched, plan.timeWeights!, plan.spaceWeights!, algebra, single ? 2 ** -23 : Number.EPSILON);
      const count = Math.min(modesKept, decomposition.result.resolved);
      await writeTiles(join(scratch, 'modes.npy'), rowsOf(plan), count, modesOf(watched, plan.timeWeights!, decomposition, count, algebra));
      const coefficients = coefficientsOf(decomposition, plan.timeWeights!, count);
      await writeFile(join(scratch, 'coefficients.npy'), npyFile(coefficients, [count, plan.columns.length]));
      const summary = summarise(plan, matrix, decomposition, count);
      for (const [name, content] of buildFiles(plan, mean, decomposition)) await writeFile(join(scratch, name), content);
      job.signal.throwIfAborted();
      const folder = `${draft.id}-${randomUUID().slice(0, 8)}`;
      await app.storage.publish(scratch, 'builds', folder);
      await finishBuild(app, job.caller, draft.id, { recipeHash: draft.recipeHash, inputs, summary, findings: judgePlan(plan, policy), folder, jobId: job.id });
    } finally {
      await reader.close();
    }
  } finally {
    await app.storage.discard(scratch);
  }
};

const shapeOf = (plan: RecordState) => ({ rows: rowsOf(plan), columns: plan.columns.length, type: plan.type });

const rounds = ['reading', 'centring and writing', 'spectrum', 'modes'] as const;

/** Progress counts the matrix once a round; `share` of the round is done. */
function report(job: JobHandle, plan: RecordState, round: (typeof rounds)[number], share: number, what = ''): void {
  const bytes = 8 * rowsOf(plan) * plan.columns.length;
  job.report({ done: bytes * (rounds.indexOf(round) + share), total: bytes * rounds.length, unit: 'bytes', phase: round + what });
}

/** The matrix for the two passes of the decomposition, with progress; a cancel is seen at every tile. */
function watchedTiles(job: JobHandle, plan: RecordState, reader: MatrixReader): RowTileSource {
  let pass: 'spectrum' | 'modes' = 'spectrum';
  return {
    snapshots: reader.snapshots,
    nodes: reader.nodes,
    async *tiles() {
      for await (const tile of reader.tiles()) {
        job.signal.throwIfAborted();
        report(job, plan, pass, tile.from / reader.nodes);
        yield tile;
      }
      pass = 'modes';
    },
  };
}

/** Streams all columns into `path` in double precision; returns what is to be subtracted: n values, or n x runs, or null. */
async function gather(app: App, job: JobHandle, plan: RecordState, path: string): Promise<Float64Array | null> {
  const rows = rowsOf(plan), names = plan.fields.map((field) => field.name), ranges = recordRanges(plan);
  const perRun = plan.centre === 'weighted-mean-per-run';
  const mean = plan.centre === 'nothing' ? null : new Float64Array(rows * (perRun ? ranges.length : 1));
  const totals = ranges.map(({ from, to }) => plan.timeWeights!.subarray(from, to).reduce((a, b) => a + b, 0));
  const total = totals.reduce((a, b) => a + b, 0);
  const writer = await MatrixWriter.create(path, { rows, columns: plan.columns.length, type: 'float64' });
  try {
    for (const [r, { source, from, to }] of ranges.entries()) {
      const archive = await openArchiveFiles(app, plan.sources[source].archive);
      try {
        const indices = plan.columns.slice(from, to).map((column) => column.index);
        for await (const block of archive.snapshots(plan.sources[source].survey.reading, names, indices, { reuse: true })) {
          job.signal.throwIfAborted();
          if (mean && plan.centre !== 'first-snapshot') {
            const into = perRun ? mean.subarray(r * rows, (r + 1) * rows) : mean;
            for (let j = 0; j < block.count; j++) {
              const share = plan.timeWeights![from + block.from + j] / (perRun ? totals[r] : total);
              for (let i = 0; i < rows; i++) into[i] += share * block.values[j * rows + i];
            }
          } else if (mean && from === 0 && block.from === 0) mean.set(block.values.subarray(0, rows));
          await writer.append(block.values);
          report(job, plan, 'reading', (from + block.from + block.count) / plan.columns.length, ` run ${plan.sources[source].run}`);
        }
      } finally {
        await archive.close();
      }
    }
    await writer.close();
  } catch (cause) {
    await writer.abandon();
    throw cause;
  }
  return mean;
}

async function centreAndCast(job: JobHandle, plan: RecordState, raw: string, mean: Float64Array | null, path: string): Promise<{ sha256: string; bytes: number; castError: number }> {
  const rows = rowsOf(plan), ranges = recordRanges(plan), perRun = plan.centre === 'weighted-mean-per-run';
  const reader = await MatrixReader.open(raw, { rows, columns: plan.columns.length, type: 'float64' });
  const writer = await MatrixWriter.create(path, shapeOf(plan));
  try {
    for await (const { first, columns, values } of reader.columnBlocks()) {
      job.signal.throwIfAborted();
      for (let j = 0; mean && j < columns; j++) {
        const offset = perRun ? ranges.findIndex(({ from, to }) => first + j >= from && first + j < to) * rows : 0;
        for (let i = 0; i < rows; i++) values[j * rows + i] -= mean[offset + i];
      }
      await writer.append(values);
      report(job, plan, 'centring and writing', (first + columns) / plan.columns.length);
    }
    return { ...(await writer.close()), castError: writer.castError };
  } catch (cause) {
    await writer.abandon();
    throw cause;
  } finally {
    await reader.close();
  }
}
