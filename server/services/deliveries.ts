/** Deliveries: announced before a byte travels, so that permission, names and quota are settled first. */
import { stat } from 'node:fs/promises';
import { join } from 'node:path';
import { and, desc, eq, inArray, sql } from 'drizzle-orm';
import type { z } from 'zod';
import { about } from '#contract/access.ts';
import type { Delivery, newDelivery } from '#contract/archive.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Queryable } from '../db/database.ts';
import { archive, campaign, delivery, deliveryFile } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { campaignBySlug } from './campaign-lookup.ts';
import { authorise, type App, type Caller } from './context.ts';
import { peopleById } from './people.ts';
import { bytesPhrase } from './phrases.ts';

const days = 7;
type Row = typeof delivery.$inferSelect;

/** Bytes of a campaign's archives and of what is announced and still open. */
export async function heldBytes(tx: Queryable, campaignId: string): Promise<number> {
  const { rows } = await tx.execute<{ held: string }>(sql`
    select (select coalesce(sum(bytes), 0) from archive where campaign_id = ${campaignId})
      + (select coalesce(sum(f.bytes), 0) from delivery_file f join delivery d on d.id = f.delivery_id where d.campaign_id = ${campaignId} and d.state = 'open') as held`);
  return Number(rows[0].held);
}

export async function createDelivery(app: App, caller: Caller, slug: string, input: z.output<typeof newDelivery>): Promise<Delivery> {
  const where = await campaignBySlug(app.db, caller, slug);
  authorise(caller, 'hand-in', 'Delivery', { campaignId: where.id });
  const names = input.files.map((file) => file.name);
  const double = names.find((name, i) => names.indexOf(name) !== i);
  if (double !== undefined) throw new PennyweightError('invalid-input', `The file name "${double}" is there twice: the files of one archive need different names.`, { name: double });
  const bad = names.find((name) => /[/\\\0]/.test(name) || name === '.' || name === '..');
  if (bad !== undefined) throw new PennyweightError('invalid-input', `"${bad}" is not a file name: leave folders out.`, { name: bad });
  const bytes = input.files.reduce((sum, file) => sum + file.bytes, 0);
  const id = await app.db.transaction(async (tx) => {
    await tx.select({ id: campaign.id }).from(campaign).where(eq(campaign.id, where.id)).for('update');
    const held = await heldBytes(tx, where.id);
    if (held + bytes > where.quotaBytes) {
      throw new PennyweightError('quota-exceeded', `${bytesPhrase(bytes)} do not fit: the campaign holds ${bytesPhrase(held)} of its ${bytesPhrase(where.quotaBytes)}. Ask an administrator for a larger quota.`, { bytes, held, quota: where.quotaBytes });
    }
    const [made] = await tx.insert(delivery).values({ campaignId: where.id, run: input.run, solver: input.solver, parameters: input.parameters, note: input.note, createdBy: caller.user.id, expiresAt: new Date(Date.now() + days * 86_400_000) }).returning();
    await tx.insert(deliveryFile).values(input.files.map((file, position) => ({ deliveryId: made.id, position, name: file.name, bytes: file.bytes, announcedSha256: file.sha256 })));
    await recordAudit(tx, caller, { action: 'delivery.announce', objectType: 'delivery', objectId: made.id, label: `${input.run}: ${names.slice(0, 3).join(', ')}`, campaignId: where.id, after: { run: input.run, files: input.files.slice(0, 50) } });
    return made.id;
  });
  return getDelivery(app, caller, id);
}

async function describe(app: App, rows: (Row & { slug: string })[]): Promise<Delivery[]> {
  if (rows.length === 0) return [];
  const ids = rows.map((row) => row.id);
  const files = await app.db.select().from(deliveryFile).where(inArray(deliveryFile.deliveryId, ids)).orderBy(deliveryFile.position);
  const archives = await app.db.select({ id: archive.id, deliveryId: archive.deliveryId }).from(archive).where(inArray(archive.deliveryId, ids));
  const person = await peopleById(app.db, rows.map((row) => row.createdBy));
  const received = new Map<string, number>();
  for (const file of files) {
    if (file.state === 'receiving') received.set(file.id, await stat(join(app.storage.uploads(), file.id)).then((info) => info.size, () => 0));
  }
  return rows.map((row) => ({
    id: row.id, campaign: row.slug, run: row.run, solver: row.solver, parameters: row.parameters, note: row.note, state: row.state, problem: row.problem, findings: row.findings,
    archive: archives.find((each) => each.deliveryId === row.id)?.id ?? null, createdBy: person(row.createdBy),
    createdAt: row.createdAt.toISOString(), updatedAt: row.updatedAt.toISOString(), expiresAt: row.expiresAt.toISOString(),
    files: files.filter((file) => file.deliveryId === row.id).map((file) => ({
      id: file.id, name: file.name, bytes: file.bytes, received: file.state === 'verified' ? file.bytes : (received.get(file.id) ?? 0), sha256: file.sha256, announcedSha256: file.announcedSha256, state: file.state, problem: file.problem,
    })),
  }));
}

/** Open and refused ones, newest first: those that the caller may read. */
export async function listDeliveries(app: App, caller: Caller, slug: string): Promise<Delivery[]> {
  const where = await campaignBySlug(app.db, caller, slug);
  const rows = await app.db.select().from(delivery).where(and(eq(delivery.campaignId, where.id), inArray(delivery.state, ['open', 'refused']))).orderBy(desc(delivery.createdAt)).limit(200);
  return describe(app, rows.filter((row) => caller.ability.can('read', about('Delivery', row))).map((row) => ({ ...row, slug: where.slug })));
}

export async function findDelivery(app: App, caller: Caller, id: string): Promise<Row & { slug: string }> {
  const [row] = await app.db.select({ delivery, slug: campaign.slug }).from(delivery).innerJoin(campaign, eq(campaign.id, delivery.campaignId)).where(eq(delivery.id, id));
  if (!row || !caller.ability.can('read', about('Delivery', row.delivery))) throw new PennyweightError('not-found', 'There is no such delivery, or it is not yours.');
  return { ...row.delivery, slug: row.slug };
}

export async function getDelivery(app: App, caller: Caller, id: string): Promise<Delivery> {
  return (await describe(app, [await findDelivery(app, caller, id)]))[0];
}

/** Gives an open delivery up; the received bytes go. A refused one is only taken off the list. */
export async function cancelDelivery(app: App, caller: Caller, id: string, drop: (fileId: string) => Promise<void>): Promise<void> {
  const row = await findDelivery(app, caller, id);
  authorise(caller, 'cancel', 'Delivery', row);
  const files = await app.db.transaction(async (tx) => {
    const changed = await tx.update(delivery).set({ state: 'cancelled', updatedAt: new Date() }).where(and(eq(delivery.id, id), inArray(delivery.state, ['open', 'refused']))).returning({ id: delivery.id });
    if (changed.length === 0) throw new PennyweightError('wrong-state', row.state === 'complete' ? 'This delivery is complete: its archive can be withdrawn by a steward.' : `This delivery is ${row.state} already.`);
    await recordAudit(tx, caller, { action: 'delivery.cancel', objectType: 'delivery', objectId: id, label: row.run, campaignId: row.campaignId, before: { state: row.state }, after: { state: 'cancelled' } });
    return tx.select({ id: deliveryFile.id }).from(deliveryFile).where(eq(deliveryFile.deliveryId, id));
  });
  for (const file of files) await drop(file.id);
}
