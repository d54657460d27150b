/** Bytes held, by campaign, and what is free. */
import { asc, eq, sql } from 'drizzle-orm';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import { archive, campaign } from '../db/schema/index.ts';
import { authorise, type App, type Caller } from './context.ts';

export async function storageUsage(app: App, caller: Caller): Promise<ResponseOf<typeof routes.getStorage>> {
  authorise(caller, 'read', 'Storage', {});
  const held = await app.storage.usage();
  const campaigns = await app.db.select({ campaign: campaign.slug, title: campaign.title, quotaBytes: campaign.quotaBytes, usedBytes: sql<string>`coalesce(sum(${archive.bytes}), 0)` })
    .from(campaign).leftJoin(archive, eq(archive.campaignId, campaign.id)).groupBy(campaign.id).orderBy(asc(campaign.title));
  return { ...held, campaigns: campaigns.map((row) => ({ ...row, usedBytes: Number(row.usedBytes) })) };
}
