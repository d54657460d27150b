/** Looked after from time to time by the worker: deliveries cut off at their last step are completed, idle ones given up. */
import { and, eq, inArray, lt, sql } from 'drizzle-orm';
import { callerOf } from '../access/caller.ts';
import { delivery, deliveryFile, user } from '../db/schema/index.ts';
import { hashReceived, listReceived, removeReceived } from '../storage/received-file.ts';
import { findAnnounced, type AnnouncedFile } from './announced-file.ts';
import { recordAudit } from './audit.ts';
import type { App, Caller } from './context.ts';
import { idleDays } from './deliveries.ts';
import { completeDelivery, removeAll, verifyFile } from './hand-in.ts';
import { programCaller } from './job-runs.ts';

/** The web server finishes what it received itself; after this long without a byte it is taken to have been ended before. */
const settleSeconds = 60;

export interface Upkeep {
  completed: number;
  givenUp: number;
  removed: number;
}

/** One delivery's trouble does not keep the others waiting: it is logged and met again the next time. */
export async function keepDeliveries(app: App, settle: number = settleSeconds): Promise<Upkeep> {
  const done: Upkeep = { completed: 0, givenUp: 0, removed: 0 };
  const attempt = async (what: string, id: string, work: () => Promise<boolean>): Promise<number> => {
    try {
      return (await work()) ? 1 : 0;
    } catch (cause) {
      app.log.warn({ err: cause, id }, what);
      return 0;
    }
  };
  const still = new Date(Date.now() - settle * 1000);
  for (const file of await listReceived(app.storage.uploads())) {
    if (file.touchedAt > still) continue;
    done.completed += await attempt('a received file could not be verified', file.id, () => verifyReceived(app, file));
    done.removed += await attempt('a left-over file could not be removed', file.id, () => removeLeftOver(app, file));
  }
  const verified = await app.db.select({ delivery, person: { id: user.id, name: user.name, email: user.email } }).from(delivery).innerJoin(user, eq(user.id, delivery.createdBy))
    .where(and(eq(delivery.state, 'open'), lt(delivery.updatedAt, still), sql`not exists (select 1 from ${deliveryFile} where ${deliveryFile.deliveryId} = ${delivery.id} and ${deliveryFile.state} <> 'verified')`));
  for (const { delivery: { id }, person } of verified) {
    done.completed += await attempt('a delivery could not be completed', id, async () => {
      await completeDelivery(app, await callerOf(app.db, person, 'job', null), id);
      return true;
    });
  }
  const idle = await app.db.select({ id: delivery.id }).from(delivery).where(and(eq(delivery.state, 'open'), lt(delivery.expiresAt, sql`now()`)));
  for (const { id } of idle) done.givenUp += await attempt('an idle delivery could not be given up', id, () => giveUp(app, programCaller(), id));
  return done;
}

async function handedInBy(app: App, { delivery: { createdBy } }: AnnouncedFile): Promise<Caller> {
  const [person] = await app.db.select({ id: user.id, name: user.name, email: user.email }).from(user).where(eq(user.id, createdBy));
  return callerOf(app.db, person, 'job', null);
}

/** A mismatch refuses the delivery here as well; that is stored, and told to whoever looks at it. */
async function verifyReceived(app: App, { id, bytes }: { id: string; bytes: number }): Promise<boolean> {
  const found = await findAnnounced(app.db, id);
  if (!found || found.delivery.state !== 'open' || found.file.state !== 'receiving' || found.file.bytes !== bytes) return false;
  const caller = await handedInBy(app, found);
  await verifyFile(app, caller, found, async () => (await hashReceived(app.storage.uploads(), id, bytes)).digest('hex'));
  await completeDelivery(app, caller, found.delivery.id);
  return true;
}

/** Bytes of a delivery that is over; of no delivery known here only after a week, since the database may be the one that is wrong. */
async function removeLeftOver(app: App, { id, touchedAt }: { id: string; touchedAt: Date }): Promise<boolean> {
  const found = await findAnnounced(app.db, id);
  const over = found ? found.delivery.state !== 'open' : touchedAt.getTime() < Date.now() - idleDays * 86_400_000;
  if (over) await removeReceived(app.storage.uploads(), id);
  return over;
}

async function giveUp(app: App, caller: Caller, id: string): Promise<boolean> {
  const given = await app.db.transaction(async (tx) => {
    const [row] = await tx.update(delivery).set({ state: 'expired', updatedAt: sql`now()` }).where(and(eq(delivery.id, id), inArray(delivery.state, ['open']), lt(delivery.expiresAt, sql`now()`))).returning();
    if (!row) return false;
    await recordAudit(tx, caller, {
      action: 'delivery.expire', objectType: 'delivery', objectId: id, label: row.run, campaignId: row.campaignId,
      before: { state: 'open' }, after: { state: 'expired' }, reason: `No byte came for ${idleDays} days.`,
    });
    return true;
  });
  if (given) await removeAll(app, id);
  return given;
}
