/** The transaction that makes a release of a finished bag. */
import { and, eq, sql } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import type { BagFile } from '../engine/release/bag.ts';
import type { ReleaseFacts } from '../engine/release/facts.ts';
import { dataset, draft, job, release } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import type { App, Caller } from './context.ts';

export async function nextVersion(app: App, datasetId: string): Promise<number> {
  const [{ next }] = await app.db.select({ next: sql<number>`coalesce(max(${release.version}), 0)::int + 1` }).from(release).where(eq(release.datasetId, datasetId));
  return next;
}

export interface MadeRelease {
  version: number;
  folder: string;
  files: BagFile[];
  datasheet: string;
  citation: string;
  waivers: ReleaseFacts['waivers'];
  jobId: string;
}

/** Release row, draft released, the release before superseded, audit row. A second run for the same draft does nothing. */
export async function finishRelease(app: App, caller: Caller, draftId: string, made: MadeRelease): Promise<void> {
  await app.db.transaction(async (tx) => {
    const [its] = await tx.select({ state: job.state }).from(job).where(eq(job.id, made.jobId)).for('update');
    if (its?.state === 'cancelled') throw new PennyweightError('job-cancelled', 'The release was cancelled.');
    const [row] = await tx.select().from(draft).where(eq(draft.id, draftId)).for('update');
    if (row.state !== 'approved') return;
    const [parent] = await tx.select().from(dataset).where(eq(dataset.id, row.datasetId)).for('update');
    const { approval, build } = row;
    const manifestSha256 = made.files.find((file) => file.path === 'manifest-sha256.txt')!.sha256;
    const earlier = await tx.update(release).set({ state: 'superseded' }).where(and(eq(release.datasetId, parent.id), eq(release.state, 'released'))).returning({ draftId: release.draftId });
    for (const each of earlier) await tx.update(draft).set({ state: 'superseded' }).where(eq(draft.id, each.draftId));
    const [out] = await tx.insert(release).values({
      datasetId: parent.id, campaignId: row.campaignId, draftId, version: made.version, build: build!, recipe: row.recipe, files: made.files, waivers: made.waivers, manifestSha256, bytes: made.files.reduce((sum, file) => sum + file.bytes, 0),
      licence: approval!.licence, handlingLabel: approval!.handlingLabel, contact: approval!.contact, note: approval!.note, datasheet: made.datasheet, folder: made.folder, builtBy: row.createdBy, approvedBy: row.reviewedBy!, approvedAt: row.reviewedAt!,
    }).returning({ id: release.id });
    await tx.update(draft).set({ state: 'released', updatedAt: new Date() }).where(eq(draft.id, draftId));
    const label = `${parent.title}, release ${made.version}`;
    await recordAudit(tx, caller, { action: 'release.make', objectType: 'release', objectId: out.id, label, campaignId: row.campaignId, before: earlier.length > 0 ? { superseded: made.version - 1 } : null, after: { version: made.version, matrix: build!.matrixSha256, manifest: manifestSha256 } });
  });
}
