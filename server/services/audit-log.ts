/** Reading the audit log: filters, pages by number, CSV. */
import { and, desc, eq, gte, ilike, inArray, isNull, lt, lte, or, sql, type SQL } from 'drizzle-orm';
import type { z } from 'zod';
import { about } from '#contract/access.ts';
import type { AuditEntry, auditQuery } from '#contract/operation.ts';
import { auditLog, campaign } from '../db/schema/index.ts';
import { authorise, type App, type Caller } from './context.ts';

type Query = z.output<typeof auditQuery>;

/** Campaigns whose entries the caller may read; `all`: those of the organisation too. */
async function readable(app: App, caller: Caller): Promise<{ all: boolean; ids: string[] }> {
  const all = caller.ability.can('read', about('AuditEntry', { campaignId: null })) && !caller.principal.token?.campaignId;
  const rows = await app.db.select({ id: campaign.id }).from(campaign);
  return { all, ids: rows.map((row) => row.id).filter((id) => caller.ability.can('read', about('AuditEntry', { campaignId: id }))) };
}

async function conditions(app: App, caller: Caller, query: Query): Promise<SQL | undefined> {
  const scope = await readable(app, caller);
  if (!scope.all && scope.ids.length === 0) authorise(caller, 'read', 'AuditEntry', {});
  const text = query.q ? `%${query.q.replace(/[\\%_]/g, '\\$&')}%` : null;
  return and(
    scope.all ? undefined : inArray(auditLog.campaignId, scope.ids),
    query.campaign ? (query.campaign === 'organisation' ? isNull(auditLog.campaignId) : eq(campaign.slug, query.campaign)) : undefined,
    query.actor ? eq(auditLog.actorId, query.actor) : undefined,
    query.action ? eq(auditLog.action, query.action) : undefined,
    query.objectType ? eq(auditLog.objectType, query.objectType) : undefined,
    query.objectId ? eq(auditLog.objectId, query.objectId) : undefined,
    query.from ? gte(auditLog.at, new Date(query.from)) : undefined,
    query.to ? lte(auditLog.at, new Date(query.to)) : undefined,
    text ? or(ilike(auditLog.label, text), ilike(auditLog.actorName, text), ilike(auditLog.reason, text), ilike(auditLog.action, text)) : undefined,
  );
}

function shown({ entry, slug }: { entry: typeof auditLog.$inferSelect; slug: string | null }): AuditEntry {
  return {
    seq: entry.seq, at: entry.at.toISOString(), actor: entry.actorId ? { id: entry.actorId, name: entry.actorName } : null, via: entry.via, action: entry.action,
    objectType: entry.objectType, objectId: entry.objectId, label: entry.label, campaign: slug, before: entry.before, after: entry.after, reason: entry.reason, hash: entry.hash,
  };
}

/** Newest first; the next page starts below the last number of this one, so that entries made meanwhile shift nothing. */
async function page(app: App, where: SQL | undefined, before: number | undefined, limit: number): Promise<AuditEntry[]> {
  const rows = await app.db.select({ entry: auditLog, slug: campaign.slug }).from(auditLog).leftJoin(campaign, eq(campaign.id, auditLog.campaignId))
    .where(and(where, before === undefined ? undefined : lt(auditLog.seq, before))).orderBy(desc(auditLog.seq)).limit(limit);
  return rows.map(shown);
}

export async function listAudit(app: App, caller: Caller, query: Query): Promise<{ entries: AuditEntry[]; total: number }> {
  const where = await conditions(app, caller, query);
  const entries = await page(app, where, query.before, query.limit);
  const [{ total }] = await app.db.select({ total: sql<number>`count(*)::int` }).from(auditLog).leftJoin(campaign, eq(campaign.id, auditLog.campaignId)).where(where);
  return { entries, total };
}

/** RFC 4180 field; a leading = + - @ is defused, so that a spreadsheet does not run what somebody typed as a reason. */
function csvField(value: unknown): string {
  const raw = value === null || value === undefined ? '' : typeof value === 'object' ? JSON.stringify(value) : String(value);
  const safe = /^[=+\-@\t\r]/.test(raw) ? `'${raw}` : raw;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

const pageSize = 1000;
const header = ['seq', 'at', 'actor', 'via', 'action', 'object_type', 'object_id', 'label', 'campaign', 'reason', 'before', 'after', 'hash'];

/** The whole selection as lines, page by page, so that a million rows stream in bounded memory. */
export async function* auditCsv(app: App, caller: Caller, query: Query): AsyncGenerator<string> {
  const where = await conditions(app, caller, query);
  yield `${header.join(',')}\r\n`;
  for (let before = query.before; ; ) {
    const entries = await page(app, where, before, pageSize);
    for (const entry of entries) {
      yield `${[entry.seq, entry.at, entry.actor?.name ?? '', entry.via, entry.action, entry.objectType, entry.objectId, entry.label, entry.campaign, entry.reason, entry.before, entry.after, entry.hash].map(csvField).join(',')}\r\n`;
    }
    if (entries.length < pageSize) return;
    before = entries[entries.length - 1].seq;
  }
}
