/** Bytes held, by campaign, and what is free. */
import { asc, sql } from 'drizzle-orm';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import { campaign } from '../db/schema/index.ts';
import { authorise, type App, type Caller } from './context.ts';

export async function storageUsage(app: App, caller: Caller): Promise<ResponseOf<typeof routes.getStorage>> {
  authorise(caller, 'read', 'Storage', {});
  const held = await app.storage.usage();
  const campaigns = await app.db.select({ campaign: campaign.slug, title: campaign.title, quotaBytes: campaign.quotaBytes, usedBytes: sql<string>`(select coalesce(sum(bytes), 0) from archive where archive.campaign_id = ${campaign.id})` }).from(campaign).orderBy(asc(campaign.title));
  return { ...held, campaigns: campaigns.map((row) => ({ ...row, usedBytes: Number(row.usedBytes) })) };
}
