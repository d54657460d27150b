/** Builds of drafts: asked for by a person, finished by the job in one transaction. */
import { eq } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import type { Recipe } from '#contract/recipe.ts';
import type { Summary } from '../engine/release/build-files.ts';
import { dataset, draft, job } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import type { App, Caller } from './context.ts';

export type DraftRow = typeof draft.$inferSelect;

export async function draftForBuild(app: App, id: string): Promise<{ draft: DraftRow; recipe: Recipe }> {
  const [row] = await app.db.select().from(draft).where(eq(draft.id, id));
  if (!row) throw new PennyweightError('not-found', 'The draft is gone.');
  return { draft: row, recipe: row.recipe };
}

/** Makes a finished build the draft's; the folder of the one before goes. A job that was cancelled meanwhile finishes nothing. */
export async function finishBuild(app: App, caller: Caller, id: string, made: { recipeHash: string; summary: Summary; folder: string; jobId: string }): Promise<void> {
  const drop = (name: string) => app.storage.removeFolder('builds', name);
  try {
    const old = await app.db.transaction(async (tx) => {
      const [its] = await tx.select({ state: job.state }).from(job).where(eq(job.id, made.jobId)).for('update');
      if (its && its.state === 'cancelled') throw new PennyweightError('job-cancelled', 'The build was cancelled.');
      const [row] = await tx.select().from(draft).where(eq(draft.id, id)).for('update');
      const build = { ...made.summary, recipeSha256: made.recipeHash, builtAt: new Date().toISOString() };
      await tx.update(draft).set({ build, buildHash: made.recipeHash, buildFolder: made.folder, updatedAt: new Date() }).where(eq(draft.id, id));
      const [parent] = await tx.select({ title: dataset.title }).from(dataset).where(eq(dataset.id, row.datasetId));
      await recordAudit(tx, caller, { action: 'draft.build', objectType: 'draft', objectId: id, label: `${parent.title}, draft ${row.number}`, campaignId: row.campaignId, before: { matrix: row.build?.matrixSha256 ?? null }, after: { matrix: build.matrixSha256, rows: build.rows, columns: build.columns, recipe: made.recipeHash } });
      return row.buildFolder;
    });
    if (old && old !== made.folder) await drop(old);
  } catch (cause) {
    await drop(made.folder);
    throw cause;
  }
}

/** Folders of builds that no draft names (a worker was killed between publishing and its transaction). */
export async function isOrphanedBuild(app: App, folder: string): Promise<boolean> {
  const [row] = await app.db.select({ id: draft.id }).from(draft).where(eq(draft.buildFolder, folder));
  return row === undefined;
}
