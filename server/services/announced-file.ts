/** An announced file with its delivery, and who may send it. */
import { eq } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import type { Queryable } from '../db/database.ts';
import { delivery, deliveryFile, user } from '../db/schema/index.ts';
import { authorise, mustSee, type Caller } from './context.ts';

export interface AnnouncedFile {
  file: typeof deliveryFile.$inferSelect;
  delivery: typeof delivery.$inferSelect;
  by: string;
}

const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

export const noSuchFile = () => new PennyweightError('not-found', 'No such file was announced: announce a delivery with its files first.');

export async function findAnnounced(tx: Queryable, fileId: string): Promise<AnnouncedFile | null> {
  if (!uuid.test(fileId)) return null;
  const [row] = await tx
    .select({ file: deliveryFile, delivery, by: user.name }).from(deliveryFile)
    .innerJoin(delivery, eq(delivery.id, deliveryFile.deliveryId)).innerJoin(user, eq(user.id, delivery.createdBy))
    .where(eq(deliveryFile.id, fileId));
  return row ?? null;
}

/** Only who announced a delivery sends its files, and only while they may hand in. */
export function mustOwn(caller: Caller, { delivery, by }: AnnouncedFile): void {
  const facts = { campaignId: delivery.campaignId, createdBy: delivery.createdBy };
  mustSee(caller, 'Delivery', facts, 'delivery');
  authorise(caller, 'hand-in', 'Delivery', facts);
  if (delivery.createdBy !== caller.user.id) {
    throw new PennyweightError('not-allowed', `${by} announced this delivery, and only ${by} can send its files: announce one of your own.`, { delivery: delivery.id });
  }
}

/** What a delivery that takes no bytes any more says. */
export function closedDelivery({ delivery, file }: AnnouncedFile): PennyweightError {
  const details = { delivery: delivery.id, file: file.id, state: delivery.state };
  switch (delivery.state) {
    case 'refused':
      return new PennyweightError('checksum-mismatch', delivery.problem ?? 'This delivery was refused: announce it again.', details);
    case 'complete':
      return new PennyweightError('wrong-state', `${file.name} is complete and verified: there is nothing left to send.`, details);
    case 'expired':
      return new PennyweightError('wrong-state', 'This delivery was given up after a week without a byte, and what was received was removed: announce it again.', details);
    default:
      return new PennyweightError('wrong-state', 'This delivery was cancelled: announce it again.', details);
  }
}
