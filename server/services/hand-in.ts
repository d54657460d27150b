/**
 * From received bytes to an archive. Every step may be cut off by a crash and is then done again from where it stood:
 *   1. a file is complete: its SHA-256 is judged and kept (one transaction); a mismatch refuses the delivery
 *   2. all files are verified: they move into storage, each by its hash (doing it twice changes nothing)
 *   3. archive, run, check job and audit row appear together with the delivery's end (one transaction)
 * Who gets here twice at once is held by the lock on the delivery's row.
 */
import { randomUUID } from 'node:crypto';
import { and, eq, sql } from 'drizzle-orm';
import type { Finding } from '#contract/finding.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Transaction } from '../db/database.ts';
import { archive, archiveFile, campaign, delivery, deliveryFile, run, storedObject } from '../db/schema/index.ts';
import { judgeAll } from '../engine/checks/index.ts';
import { receivedBytes, removeReceived } from '../storage/received-file.ts';
import { recordAudit } from './audit.ts';
import { closedDelivery, type AnnouncedFile } from './announced-file.ts';
import type { App, Caller } from './context.ts';

type DeliveryRow = typeof delivery.$inferSelect;
type FileRow = typeof deliveryFile.$inferSelect;

async function lockDelivery(tx: Transaction, id: string): Promise<DeliveryRow> {
  const [row] = await tx.select().from(delivery).where(eq(delivery.id, id)).for('update');
  return row;
}

/** Step 1. `digest` tells the SHA-256 of the bytes on disk, which are all here. */
export async function verifyFile(app: App, caller: Caller, announced: AnnouncedFile, digest: () => Promise<string>): Promise<void> {
  const { file, delivery: { id: deliveryId, campaignId } } = announced;
  const received = await digest();
  const [{ policy }] = await app.db.select({ policy: campaign.policy }).from(campaign).where(eq(campaign.id, campaignId));
  const findings = judgeAll({ survey: null, failure: null, checksum: { received, announced: file.announcedSha256 }, demands: { fields: [], parameters: [] }, parameters: {}, otherGrids: [], timeRule: null }, policy);
  const refused = findings.find((finding) => finding.id === 'file/checksum-mismatch');
  const closed = await app.db.transaction(async (tx) => {
    const row = await lockDelivery(tx, deliveryId);
    if (row.state !== 'open') return row;
    if (refused) {
      await refuse(tx, caller, row, file, refused, received);
      return { ...row, state: 'refused' as const, problem: sentenceFor(file, refused) };
    }
    await tx.update(deliveryFile).set({ sha256: received, state: 'verified', problem: null }).where(eq(deliveryFile.id, file.id));
    await tx.update(delivery).set({ updatedAt: sql`now()` }).where(eq(delivery.id, deliveryId));
    return null;
  });
  if (!closed || closed.state === 'complete') return;
  if (closed.state === 'refused') await removeAll(app, deliveryId);
  throw closedDelivery({ ...announced, delivery: closed });
}

const sentenceFor = (file: FileRow, finding: Finding) => `${file.name}: ${finding.message}`;

async function refuse(tx: Transaction, caller: Caller, row: DeliveryRow, file: FileRow, finding: Finding, received: string): Promise<void> {
  const problem = sentenceFor(file, finding);
  await tx.update(deliveryFile).set({ state: 'refused', problem, sha256: received }).where(eq(deliveryFile.id, file.id));
  await tx.update(delivery).set({ state: 'refused', problem, findings: [finding], updatedAt: sql`now()` }).where(eq(delivery.id, row.id));
  await recordAudit(tx, caller, {
    action: 'delivery.refuse', objectType: 'delivery', objectId: row.id, label: row.run, campaignId: row.campaignId,
    before: { state: row.state }, after: { state: 'refused', file: file.name, received, announced: file.announcedSha256 }, reason: problem,
  });
}

export async function removeAll(app: App, deliveryId: string): Promise<void> {
  const files = await app.db.select({ id: deliveryFile.id }).from(deliveryFile).where(eq(deliveryFile.deliveryId, deliveryId));
  for (const { id } of files) await removeReceived(app.storage.uploads(), id);
}

/** Steps 2 and 3, once all files of an open delivery are verified; otherwise nothing happens. */
export async function completeDelivery(app: App, caller: Caller, deliveryId: string): Promise<void> {
  const files = await app.db.select().from(deliveryFile).where(eq(deliveryFile.deliveryId, deliveryId)).orderBy(deliveryFile.position);
  const [{ state }] = await app.db.select({ state: delivery.state }).from(delivery).where(eq(delivery.id, deliveryId));
  if (state !== 'open' || files.some((file) => file.state !== 'verified')) return;
  for (const file of files) await moveIntoStorage(app, file);
  await app.db.transaction(async (tx) => {
    const row = await lockDelivery(tx, deliveryId);
    if (row.state === 'open') await makeArchive(app, tx, caller, row, files);
  });
}

async function moveIntoStorage(app: App, file: FileRow): Promise<void> {
  const { storage } = app, folder = storage.uploads(), sha256 = file.sha256 as string;
  try {
    if ((await receivedBytes(folder, file.id)) !== null) return await storage.adopt(`${folder}/${file.id}`, sha256);
  } catch (cause) {
    // Somebody else has just moved it.
    if ((cause as NodeJS.ErrnoException).code !== 'ENOENT') throw cause;
  }
  if ((await storage.has(sha256)) && (await storage.size(sha256)) === file.bytes) return;
  throw new PennyweightError('internal', `${file.name} was received and verified, and its bytes are gone from the server: send it again, and tell the administrator.`, { file: file.id, sha256 });
}

async function makeArchive(app: App, tx: Transaction, caller: Caller, row: DeliveryRow, files: FileRow[]): Promise<void> {
  const id = randomUUID(), { campaignId } = row;
  const name = files.length === 1 ? files[0].name : `${files[0].name} and ${files.length - 1} more`;
  const bytes = files.reduce((sum, file) => sum + file.bytes, 0);
  const objects = new Map(files.map((file) => [file.sha256 as string, file.bytes]));
  await tx.insert(storedObject).values([...objects].map(([sha256, size]) => ({ sha256, bytes: size }))).onConflictDoNothing();
  // A run keeps its solver; parameters given anew count.
  const [{ runId }] = await tx.insert(run).values({ campaignId, name: row.run, solver: row.solver, parameters: row.parameters })
    .onConflictDoUpdate({ target: [run.campaignId, run.name], set: { solver: sql`coalesce(nullif(${run.solver}, ''), excluded.solver)`, parameters: sql`${run.parameters} || excluded.parameters` } })
    .returning({ runId: run.id });
  const jobId = await app.queue.enqueue(tx, { kind: 'check', subjectType: 'archive', subjectId: id, label: `Check of ${name}`, campaignId, createdBy: row.createdBy });
  await tx.insert(archive).values({ id, campaignId, runId, deliveryId: row.id, name, bytes, note: row.note, jobId, createdBy: row.createdBy });
  await tx.insert(archiveFile).values(files.map((file, position) => ({ archiveId: id, position, name: file.name, sha256: file.sha256 as string, bytes: file.bytes })));
  await tx.update(delivery).set({ state: 'complete', updatedAt: sql`now()` }).where(and(eq(delivery.id, row.id), eq(delivery.state, 'open')));
  await recordAudit(tx, caller, {
    action: 'archive.hand-in', objectType: 'archive', objectId: id, label: name, campaignId,
    after: { delivery: row.id, run: row.run, solver: row.solver, parameters: row.parameters, bytes, fileCount: files.length, files: files.slice(0, 100).map((file) => ({ name: file.name, bytes: file.bytes, sha256: file.sha256 })) },
  });
}
