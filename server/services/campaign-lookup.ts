/** Finds a campaign that the caller may see. */
import { eq } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import type { Queryable } from '../db/database.ts';
import { campaign } from '../db/schema/index.ts';
import { mustSee, type Caller } from './context.ts';

export type CampaignRow = typeof campaign.$inferSelect;

const missing = (slug: string) => new PennyweightError('not-found', `There is no campaign "${slug}", or you are not a member of it.`, { campaign: slug });

export async function campaignBySlug(tx: Queryable, caller: Caller, slug: string): Promise<CampaignRow> {
  const [row] = await tx.select().from(campaign).where(eq(campaign.slug, slug));
  if (!row) throw missing(slug);
  mustSee(caller, 'Campaign', { campaignId: row.id }, `campaign "${slug}"`);
  return row;
}

export async function campaignById(tx: Queryable, id: string): Promise<CampaignRow> {
  const [row] = await tx.select().from(campaign).where(eq(campaign.id, id));
  if (!row) throw missing(id);
  return row;
}
