/** The quota of a campaign: archives held, and what open deliveries have announced. */
import { eq, sql } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import type { Transaction } from '../db/database.ts';
import { campaign } from '../db/schema/index.ts';
import { bytesPhrase } from './phrases.ts';

interface Sums extends Record<string, unknown> {
  archived: string;
  announced: string;
}

/** Locks the campaign's row, so that two deliveries announced at once cannot both take the last room. */
export async function reserveBytes(tx: Transaction, campaignId: string, wanted: number): Promise<void> {
  const [{ quotaBytes }] = await tx.select({ quotaBytes: campaign.quotaBytes }).from(campaign).where(eq(campaign.id, campaignId)).for('update');
  const { rows } = await tx.execute<Sums>(sql`
    select (select coalesce(sum(bytes), 0) from archive where campaign_id = ${campaignId}) as archived,
      (select coalesce(sum(f.bytes), 0) from delivery_file f join delivery d on d.id = f.delivery_id where d.campaign_id = ${campaignId} and d.state = 'open') as announced`);
  const archived = Number(rows[0].archived), announced = Number(rows[0].announced);
  if (archived + announced + wanted <= quotaBytes) return;
  throw new PennyweightError(
    'quota-exceeded',
    `These files have ${bytesPhrase(wanted)}, and ${bytesPhrase(Math.max(0, quotaBytes - archived - announced))} are left of the campaign's quota of ${bytesPhrase(quotaBytes)} (${bytesPhrase(archived)} in archives, ${bytesPhrase(announced)} on their way): ask an administrator of the campaign for more.`,
    { quotaBytes, archivedBytes: archived, announcedBytes: announced, wantedBytes: wanted },
  );
}
