/** What waits for the person: reviews, returned and own drafts, archives with open findings, deliveries on their way, jobs. */
import { and, desc, eq, inArray, sql } from 'drizzle-orm';
import { about } from '#contract/access.ts';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import { archive, auditLog, campaign, delivery, draft, finding, run } from '../db/schema/index.ts';
import { summaries } from './archives.ts';
import { listAudit } from './audit-log.ts';
import type { App, Caller } from './context.ts';
import { listDeliveries } from './deliveries.ts';
import { draftSummaries } from './draft-summaries.ts';
import { listJobs } from './jobs.ts';

const most = 12;

export async function describeDesk(app: App, caller: Caller): Promise<ResponseOf<typeof routes.getDesk>> {
  const { ability, user } = caller;
  const campaigns = (await app.db.select({ id: campaign.id, slug: campaign.slug }).from(campaign)).filter(({ id }) => ability.can('read', about('Campaign', { campaignId: id })));
  const ids = campaigns.map(({ id }) => id);
  if (ids.length === 0) return { reviews: [], returned: [], drafts: [], archives: [], deliveries: [], jobs: [], recent: [] };
  const draftsWhere = async (...conditions: Parameters<typeof and>) => app.db.select().from(draft).where(and(inArray(draft.campaignId, ids), ...conditions)).orderBy(desc(draft.updatedAt)).limit(most);
  const submitted = (await draftsWhere(eq(draft.state, 'submitted'))).filter((row) => ability.can('review', about('Draft', { campaignId: row.campaignId, makers: row.makers })));
  const mine = await draftsWhere(eq(draft.createdBy, user.id), inArray(draft.state, ['draft', 'returned', 'submitted']));
  const flagged = await app.db
    .select({ row: archive, slug: campaign.slug, run }).from(archive).innerJoin(campaign, eq(campaign.id, archive.campaignId)).innerJoin(run, eq(run.id, archive.runId))
    .where(and(inArray(archive.campaignId, ids), inArray(archive.state, ['checked', 'unreadable', 'checking']), sql`(${archive.state} = 'checking' or exists (select 1 from ${finding} where ${finding.archiveId} = ${archive.id} and ${finding.severity} <> 'note' and ${finding.waivedAt} is null))`))
    .orderBy(desc(archive.createdAt)).limit(100);
  const concerned = flagged.filter(({ row }) => row.createdBy === user.id || ability.can('waive', about('Finding', { campaignId: row.campaignId }))).slice(0, most);
  const open = await app.db.select({ campaignId: delivery.campaignId }).from(delivery).where(and(eq(delivery.createdBy, user.id), inArray(delivery.state, ['open', 'refused'])));
  const deliveries = (await Promise.all(campaigns.filter(({ id }) => open.some((row) => row.campaignId === id)).map(({ slug }) => listDeliveries(app, caller, slug)))).flat();
  const mayReadLog = ability.can('read', 'AuditEntry');
  const seen = await app.db.select({ seq: auditLog.seq }).from(auditLog).orderBy(desc(auditLog.seq)).limit(1);
  return {
    reviews: await draftSummaries(app, submitted),
    returned: await draftSummaries(app, mine.filter((row) => row.state === 'returned')),
    drafts: await draftSummaries(app, mine.filter((row) => row.state !== 'returned')),
    archives: await summaries(app, concerned),
    deliveries: deliveries.filter((each) => each.createdBy.id === user.id).slice(0, most),
    jobs: (await listJobs(app, caller, { state: 'queued,running' })).slice(0, most),
    recent: mayReadLog && seen.length > 0 ? (await listAudit(app, caller, { limit: 8 })).entries : [],
  };
}
