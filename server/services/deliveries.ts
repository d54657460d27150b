/** Deliveries: files announced before they are sent, on their way, or refused. */
import { and, desc, eq, gt, inArray, or, sql } from 'drizzle-orm';
import type { z } from 'zod';
import { about } from '#contract/access.ts';
import type { Delivery, newDelivery } from '#contract/archive.ts';
import { PennyweightError } from '#contract/error.ts';
import { archive, campaign, delivery, deliveryFile, user } from '../db/schema/index.ts';
import { receivedBytes, removeReceived } from '../storage/received-file.ts';
import { recordAudit } from './audit.ts';
import { campaignBySlug } from './campaign-lookup.ts';
import { authorise, mustSee, type App, type Caller } from './context.ts';
import { reserveBytes } from './quota.ts';

/** A delivery without a byte for this long is given up. */
export const idleDays = 7;
export const untilGivenUp = () => sql`now() + make_interval(days => ${idleDays})`;
/** Refused deliveries stay in the list for this long. */
const refusedDays = 30;

interface Row {
  delivery: typeof delivery.$inferSelect;
  slug: string;
  by: string;
  archive: string | null;
}

const rows = (app: App) =>
  app.db.select({ delivery, slug: campaign.slug, by: user.name, archive: archive.id }).from(delivery)
    .innerJoin(campaign, eq(campaign.id, delivery.campaignId)).innerJoin(user, eq(user.id, delivery.createdBy)).leftJoin(archive, eq(archive.deliveryId, delivery.id));

const factsOf = ({ delivery }: Pick<Row, 'delivery'>) => ({ campaignId: delivery.campaignId, createdBy: delivery.createdBy });

async function describe(app: App, found: Row[]): Promise<Delivery[]> {
  if (found.length === 0) return [];
  const files = await app.db.select().from(deliveryFile).where(inArray(deliveryFile.deliveryId, found.map((row) => row.delivery.id))).orderBy(deliveryFile.position);
  const folder = app.storage.uploads();
  const received = await Promise.all(files.map(async (file) => (file.state === 'verified' ? file.bytes : file.state === 'receiving' ? ((await receivedBytes(folder, file.id)) ?? 0) : 0)));
  return found.map(({ delivery: row, slug, by, archive: made }) => ({
    id: row.id, campaign: slug, run: row.run, solver: row.solver, parameters: row.parameters, note: row.note, state: row.state, problem: row.problem,
    files: files.flatMap((file, i) => (file.deliveryId === row.id ? [{ id: file.id, name: file.name, bytes: file.bytes, received: received[i], sha256: file.sha256, announcedSha256: file.announcedSha256, state: file.state, problem: file.problem }] : [])),
    archive: made, createdBy: { id: row.createdBy, name: by }, createdAt: row.createdAt.toISOString(), updatedAt: row.updatedAt.toISOString(), expiresAt: row.expiresAt.toISOString(), findings: row.findings,
  }));
}

/** On their way, or refused not long ago. */
const current = () => or(eq(delivery.state, 'open'), and(eq(delivery.state, 'refused'), gt(delivery.updatedAt, sql`now() - make_interval(days => ${refusedDays})`)));

export async function listDeliveries(app: App, caller: Caller, slug: string): Promise<Delivery[]> {
  const { id } = await campaignBySlug(app.db, caller, slug);
  const found = await rows(app).where(and(eq(delivery.campaignId, id), current())).orderBy(desc(delivery.createdAt));
  return describe(app, found.filter((row) => caller.ability.can('read', about('Delivery', factsOf(row)))));
}

async function find(app: App, caller: Caller, id: string): Promise<Row> {
  const [row] = await rows(app).where(eq(delivery.id, id));
  if (!row) throw new PennyweightError('not-found', 'There is no such delivery.');
  mustSee(caller, 'Delivery', factsOf(row), 'delivery');
  return row;
}

export async function getDelivery(app: App, caller: Caller, id: string): Promise<Delivery> {
  return (await describe(app, [await find(app, caller, id)]))[0];
}

function refuseNames(files: { name: string }[]): void {
  const seen = new Set<string>();
  for (const { name } of files) {
    // eslint-disable-next-line no-control-regex -- control characters are what is looked for
    if (/[/\\\u0000-\u001f]/.test(name) || name === '.' || name === '..') throw new PennyweightError('invalid-input', `"${name}" is not the plain name of a file: send it without folders.`, { name });
    if (seen.has(name)) throw new PennyweightError('invalid-input', `Two of the files are named "${name}": an archive needs a name of its own for each.`, { name });
    seen.add(name);
  }
}

export async function createDelivery(app: App, caller: Caller, slug: string, input: z.output<typeof newDelivery>): Promise<Delivery> {
  const { id: campaignId } = await campaignBySlug(app.db, caller, slug);
  authorise(caller, 'hand-in', 'Delivery', { campaignId, createdBy: caller.user.id });
  const { files, ...announced } = input;
  refuseNames(files);
  const id = await app.db.transaction(async (tx) => {
    await reserveBytes(tx, campaignId, files.reduce((sum, file) => sum + file.bytes, 0));
    const [made] = await tx.insert(delivery).values({ ...announced, campaignId, createdBy: caller.user.id, expiresAt: untilGivenUp() }).returning({ id: delivery.id });
    await tx.insert(deliveryFile).values(files.map((file, position) => ({ deliveryId: made.id, position, name: file.name, bytes: file.bytes, announcedSha256: file.sha256 })));
    await recordAudit(tx, caller, { action: 'delivery.announce', objectType: 'delivery', objectId: made.id, label: announced.run, campaignId, after: { ...announced, files: files.slice(0, 100), fileCount: files.length } });
    return made.id;
  });
  return getDelivery(app, caller, id);
}

export async function cancelDelivery(app: App, caller: Caller, id: string): Promise<void> {
  const row = await find(app, caller, id);
  authorise(caller, 'cancel', 'Delivery', factsOf(row));
  const files = await app.db.transaction(async (tx) => {
    const [{ state }] = await tx.select({ state: delivery.state }).from(delivery).where(eq(delivery.id, id)).for('update');
    if (state !== 'open' && state !== 'refused') throw new PennyweightError('wrong-state', `This delivery is ${state} already.`, { state });
    const all = await tx.select({ id: deliveryFile.id, state: deliveryFile.state }).from(deliveryFile).where(eq(deliveryFile.deliveryId, id));
    if (all.every((file) => file.state === 'verified')) throw new PennyweightError('wrong-state', 'All files have arrived and are becoming an archive: withdraw the archive instead.', { state });
    await tx.update(delivery).set({ state: 'cancelled', updatedAt: sql`now()` }).where(eq(delivery.id, id));
    await recordAudit(tx, caller, { action: 'delivery.cancel', objectType: 'delivery', objectId: id, label: row.delivery.run, campaignId: row.delivery.campaignId, before: { state }, after: { state: 'cancelled' } });
    return all;
  });
  for (const file of files) await removeReceived(app.storage.uploads(), file.id);
}
