/** What a release is made of, and the transaction that makes it of a finished bag. */
import { and, eq, sql } from 'drizzle-orm';
import type { BuildSummary } from '#contract/dataset.ts';
import { PennyweightError } from '#contract/error.ts';
import type { BagFile } from '../engine/release/bag.ts';
import type { ReleaseFacts } from '../engine/release/facts.ts';
import { dataset, draft, release } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import type { App, Caller } from './context.ts';
import type { DraftRow } from './draft-states.ts';
import { mustStillRun } from './job-runs.ts';

/** The approved draft and the number that its release will get; null when it is out already. */
export async function draftToRelease(app: App, id: string): Promise<{ draft: DraftRow; build: BuildSummary; buildFolder: string; version: number } | null> {
  const [row] = await app.db.select().from(draft).where(eq(draft.id, id));
  if (!row) throw new PennyweightError('not-found', 'The draft is gone.');
  if (row.state === 'released') return null;
  if (row.state !== 'approved' || !row.build || !row.buildFolder) throw new PennyweightError('wrong-state', `The draft is ${row.state}: a release is made of an approved one.`);
  const [{ next }] = await app.db.select({ next: sql<number>`coalesce(max(${release.version}), 0)::int + 1` }).from(release).where(eq(release.datasetId, row.datasetId));
  return { draft: row, build: row.build, buildFolder: row.buildFolder, version: next };
}

export interface MadeRelease {
  version: number;
  folder: string;
  files: BagFile[];
  datasheet: string;
  waivers: ReleaseFacts['waivers'];
  jobId: string;
}

/** Release row, draft released, the release before superseded, audit row. A bag that becomes no release goes again. */
export async function finishRelease(app: App, caller: Caller, draftId: string, made: MadeRelease): Promise<void> {
  try {
    await recordRelease(app, caller, draftId, made);
  } catch (cause) {
    // A refusal comes before the commit. After a lost connection nobody knows, and the next worker clears what no release names.
    if (cause instanceof PennyweightError) await app.storage.removeFolder('releases', made.folder);
    throw cause;
  }
}

async function recordRelease(app: App, caller: Caller, draftId: string, made: MadeRelease): Promise<void> {
  await app.db.transaction(async (tx) => {
    await mustStillRun(tx, made.jobId);
    const [row] = await tx.select().from(draft).where(eq(draft.id, draftId)).for('update');
    if (row.state !== 'approved') throw new PennyweightError('wrong-state', `The draft is ${row.state} by now: no release is made.`, { state: row.state });
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
