/**
 * What happens to the bytes of a delivery: who may send them, and how the last one turns a delivery into an archive. Finishing can be
 * repeated from any point: verified bytes lie in storage under their hash before the one transaction that makes the archive.
 */
import { and, eq, sql } from 'drizzle-orm';
import { about } from '#contract/access.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Finding } from '#contract/finding.ts';
import { fileChecksumMismatch } from '../engine/checks/file-checksum-mismatch.ts';
import { archive, archiveFile, delivery, deliveryFile, run, storedObject } from '../db/schema/index.ts';
import type { UploadStore } from '../storage/upload-store.ts';
import { recordAudit } from './audit.ts';
import type { App, Caller } from './context.ts';

type File = typeof deliveryFile.$inferSelect;
type Delivery = typeof delivery.$inferSelect;

/** The announced file, when the caller may send it. */
export async function fileForSending(app: App, caller: Caller, fileId: string): Promise<{ file: File; delivery: Delivery }> {
  const [row] = /^[0-9a-f-]{36}$/i.test(fileId) ? await app.db.select({ file: deliveryFile, delivery }).from(deliveryFile).innerJoin(delivery, eq(delivery.id, deliveryFile.deliveryId)).where(eq(deliveryFile.id, fileId)) : [];
  if (!row || row.delivery.createdBy !== caller.user.id) throw new PennyweightError('not-found', 'This upload was not announced, or not by you: announce the delivery first.');
  if (!caller.ability.can('hand-in', about('Delivery', { campaignId: row.delivery.campaignId }))) throw new PennyweightError(caller.principal.token ? 'token-scope' : 'not-allowed', 'You may no longer hand in to this campaign.');
  return row;
}

/** Checks an announcement by tus against the delivery. */
export async function admitUpload(app: App, caller: Caller, metadata: Record<string, string | null> | undefined, length: number | null): Promise<File> {
  const fileId = metadata?.file;
  if (!fileId) throw new PennyweightError('invalid-input', 'The upload names no announced file: send Upload-Metadata with "delivery" and "file" from the delivery.');
  const { file, delivery: parent } = await fileForSending(app, caller, fileId);
  if (metadata.delivery && metadata.delivery !== parent.id) throw new PennyweightError('invalid-input', 'The file does not belong to the delivery that the upload names.');
  if (parent.state !== 'open') throw new PennyweightError('wrong-state', `This delivery is ${parent.state}: announce a new one.`);
  if (file.state === 'verified') throw new PennyweightError('conflict', `${file.name} was received already.`);
  if (length === null) throw new PennyweightError('upload-incomplete', `The length of ${file.name} must be given: it was announced with ${file.bytes} bytes.`, { expected: file.bytes });
  if (length !== file.bytes) throw new PennyweightError(length > file.bytes ? 'upload-too-long' : 'upload-incomplete', `${file.name} was announced with ${file.bytes} bytes, and ${length} are to be sent: announce the delivery again.`, { expected: file.bytes, actual: length });
  await app.db.update(deliveryFile).set({ state: 'receiving' }).where(and(eq(deliveryFile.id, file.id), eq(deliveryFile.state, 'waiting')));
  await app.db.update(delivery).set({ updatedAt: new Date() }).where(eq(delivery.id, parent.id));
  return file;
}

/** All bytes of one file are there: verify, take over, and complete the delivery when it was the last. */
export async function finishFile(app: App, caller: Caller, store: UploadStore, fileId: string): Promise<void> {
  const { file, delivery: parent } = await fileForSending(app, caller, fileId);
  if (file.state !== 'verified') {
    const { sha256, bytes } = await store.digest(fileId);
    if (bytes !== file.bytes) throw new PennyweightError('upload-incomplete', `${file.name} has ${bytes} of its ${file.bytes} bytes.`, { expected: file.bytes, actual: bytes });
    if (file.announcedSha256 && file.announcedSha256 !== sha256) {
      await refuse(app, caller, parent, file, sha256, store);
      throw new PennyweightError('checksum-mismatch', `${file.name} arrived damaged: its SHA-256 is ${sha256}, the sender's is ${file.announcedSha256}. Send it again.`, { expected: file.announcedSha256, actual: sha256 });
    }
    await app.storage.adopt(store.pathOf(fileId), sha256);
    await app.db.transaction(async (tx) => {
      await tx.insert(storedObject).values({ sha256, bytes }).onConflictDoNothing();
      await tx.update(deliveryFile).set({ state: 'verified', sha256 }).where(eq(deliveryFile.id, fileId));
    });
    await store.forget(fileId);
  }
  await completeDelivery(app, caller, parent.id);
}

async function refuse(app: App, caller: Caller, parent: Delivery, file: File, received: string, store: UploadStore): Promise<void> {
  const judgements = fileChecksumMismatch.judge({ survey: null, failure: null, checksum: { received, announced: file.announcedSha256 }, demands: { fields: [], parameters: [] }, parameters: {}, otherGrids: [], timeRule: null }, {});
  const findings: Finding[] = judgements.map((judgement) => ({ ...judgement, path: file.name, id: fileChecksumMismatch.id, severity: fileChecksumMismatch.severity }));
  const problem = findings[0]?.message ?? 'The received bytes are not those that the sender announced.';
  await app.db.transaction(async (tx) => {
    await tx.update(deliveryFile).set({ state: 'refused', sha256: received, problem }).where(eq(deliveryFile.id, file.id));
    await tx.update(delivery).set({ state: 'refused', problem: `${file.name}: ${problem}`, findings, updatedAt: new Date() }).where(eq(delivery.id, parent.id));
    await recordAudit(tx, caller, { action: 'delivery.refuse', objectType: 'delivery', objectId: parent.id, label: file.name, campaignId: parent.campaignId, before: { announced: file.announcedSha256 }, after: { received }, reason: problem });
  });
  await store.forget(file.id);
}

/** One transaction: the archive with its files and run, the delivery complete, the check enqueued, the audit row. Repeating it does nothing. */
export async function completeDelivery(app: App, caller: Caller, deliveryId: string): Promise<void> {
  await app.db.transaction(async (tx) => {
    const [parent] = await tx.select().from(delivery).where(eq(delivery.id, deliveryId)).for('update');
    if (!parent || parent.state !== 'open') return;
    const files = await tx.select().from(deliveryFile).where(eq(deliveryFile.deliveryId, deliveryId)).orderBy(deliveryFile.position);
    if (files.some((file) => file.state !== 'verified')) return;
    const [itsRun] = await tx
      .insert(run).values({ campaignId: parent.campaignId, name: parent.run, solver: parent.solver, parameters: parent.parameters })
      .onConflictDoUpdate({ target: [run.campaignId, run.name], set: { solver: sql`case when excluded.solver = '' then ${run.solver} else excluded.solver end`, parameters: sql`${run.parameters} || excluded.parameters` } })
      .returning({ id: run.id });
    const bytes = files.reduce((sum, file) => sum + file.bytes, 0);
    const name = files.length === 1 ? files[0].name : `${files[0].name} and ${files.length - 1} more`;
    const [made] = await tx.insert(archive).values({ campaignId: parent.campaignId, runId: itsRun.id, deliveryId, name, bytes, note: parent.note, createdBy: parent.createdBy }).returning({ id: archive.id });
    await tx.insert(archiveFile).values(files.map((file) => ({ archiveId: made.id, position: file.position, name: file.name, sha256: file.sha256!, bytes: file.bytes })));
    const jobId = await app.queue.enqueue(tx, { kind: 'check', subjectType: 'archive', subjectId: made.id, label: `Check of ${name}`, campaignId: parent.campaignId, createdBy: parent.createdBy });
    await tx.update(archive).set({ jobId }).where(eq(archive.id, made.id));
    await tx.update(delivery).set({ state: 'complete', updatedAt: new Date() }).where(eq(delivery.id, deliveryId));
    await recordAudit(tx, caller, { action: 'archive.hand-in', objectType: 'archive', objectId: made.id, label: name, campaignId: parent.campaignId, after: { run: parent.run, bytes, files: files.slice(0, 50).map(({ name: fileName, sha256 }) => ({ name: fileName, sha256 })) } });
  });
}
