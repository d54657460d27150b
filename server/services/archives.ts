/** Archives: list, one, withdrawal, run parameters, check again. */
import { and, desc, eq, ilike, inArray, or, sql, type SQL } from 'drizzle-orm';
import type { z } from 'zod';
import { about } from '#contract/access.ts';
import type { Archive, ArchiveSummary } from '#contract/archive.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Queryable } from '../db/database.ts';
import { archive, archiveFile, campaign, dataset, draft, finding, job, run } from '../db/schema/index.ts';
import type { routes } from '#contract/routes.ts';
import { recordAudit } from './audit.ts';
import { campaignBySlug } from './campaign-lookup.ts';
import { authorise, mustSee, type App, type Caller } from './context.ts';
import { peopleById } from './people.ts';
import { parametersOf } from './run-parameters.ts';

export type ArchiveRow = typeof archive.$inferSelect;
export interface FoundArchive {
  row: ArchiveRow;
  slug: string;
  run: typeof run.$inferSelect;
}

const columns = { row: archive, slug: campaign.slug, run };

export async function findArchive(app: App, caller: Caller, id: string): Promise<FoundArchive> {
  const [found] = await app.db.select(columns).from(archive).innerJoin(campaign, eq(campaign.id, archive.campaignId)).innerJoin(run, eq(run.id, archive.runId)).where(eq(archive.id, id));
  if (!found) throw new PennyweightError('not-found', 'There is no such archive, or you are not a member of its campaign.');
  mustSee(caller, 'Archive', found.row, 'archive');
  return found;
}

type Counts = ArchiveSummary['findings'];
const none: Counts = { blocker: 0, caution: 0, note: 0, waived: 0 };

/** Open findings of each archive (or draft), by severity; waived cautions apart. */
export async function findingCounts(tx: Queryable, of: 'archive' | 'draft', ids: string[]): Promise<(id: string) => Counts> {
  if (ids.length === 0) return () => none;
  const key = of === 'archive' ? finding.archiveId : finding.draftId;
  const rows = await tx
    .select({
      id: key, blocker: sql<number>`count(*) filter (where ${finding.severity} = 'blocker')::int`, caution: sql<number>`count(*) filter (where ${finding.severity} = 'caution' and ${finding.waivedAt} is null)::int`,
      note: sql<number>`count(*) filter (where ${finding.severity} = 'note')::int`, waived: sql<number>`count(*) filter (where ${finding.waivedAt} is not null)::int`,
    })
    .from(finding).where(inArray(key, ids)).groupBy(key);
  const counts = new Map(rows.map(({ id, ...rest }) => [id, rest]));
  return (id) => counts.get(id) ?? none;
}

export async function summaries(app: App, found: FoundArchive[]): Promise<ArchiveSummary[]> {
  const counts = await findingCounts(app.db, 'archive', found.map(({ row }) => row.id));
  const person = await peopleById(app.db, found.map(({ row }) => row.createdBy));
  return found.map(({ row, slug, run: its }) => ({
    id: row.id, campaign: slug, campaignId: row.campaignId, run: its.name, solver: its.solver, name: row.name, bytes: row.bytes, format: row.format, state: row.state, layout: row.layout,
    snapshots: row.snapshots, nodes: row.nodes, fields: row.fieldNames, timeFrom: row.timeFrom, timeTo: row.timeTo, findings: counts(row.id), createdBy: person(row.createdBy), createdAt: row.createdAt.toISOString(),
  }));
}

type ListQuery = z.output<(typeof routes.listArchives)['query']>;

export async function listArchives(app: App, caller: Caller, slug: string, query: ListQuery): Promise<{ archives: ArchiveSummary[]; total: number }> {
  const where = await campaignBySlug(app.db, caller, slug);
  const text = query.q ? `%${query.q.replace(/[\\%_]/g, '\\$&')}%` : null;
  const states = query.state?.split(',') as ArchiveRow['state'][] | undefined;
  const filter: SQL | undefined = and(
    eq(archive.campaignId, where.id),
    text ? or(ilike(archive.name, text), ilike(run.name, text), ilike(run.solver, text)) : undefined,
    states ? inArray(archive.state, states) : undefined,
    query.severity ? sql`exists (select 1 from ${finding} where ${finding.archiveId} = ${archive.id} and ${finding.severity} = ${query.severity} and ${finding.waivedAt} is null)` : undefined,
  );
  const found = await app.db.select(columns).from(archive).innerJoin(campaign, eq(campaign.id, archive.campaignId)).innerJoin(run, eq(run.id, archive.runId)).where(filter).orderBy(desc(archive.createdAt)).offset(query.offset).limit(query.limit);
  const [{ total }] = await app.db.select({ total: sql<number>`count(*)::int` }).from(archive).innerJoin(run, eq(run.id, archive.runId)).where(filter);
  return { archives: await summaries(app, found), total };
}

/** Drafts whose recipe selects the archive. */
export async function usesOf(tx: Queryable, archiveId: string): Promise<Archive['usedIn']> {
  const rows = await tx
    .select({ dataset: dataset.title, draft: draft.id, number: draft.number, state: draft.state })
    .from(draft).innerJoin(dataset, eq(dataset.id, draft.datasetId))
    .where(sql`${draft.recipe} @> ${JSON.stringify({ steps: [{ archives: [archiveId] }] })}::jsonb`).orderBy(desc(draft.updatedAt));
  return rows;
}

export async function getArchive(app: App, caller: Caller, id: string): Promise<Archive> {
  const found = await findArchive(app, caller, id);
  const [summary] = await summaries(app, [found]);
  const files = await app.db.select().from(archiveFile).where(eq(archiveFile.archiveId, id)).orderBy(archiveFile.position);
  const mayReadDrafts = caller.ability.can('read', about('Draft', { campaignId: found.row.campaignId }));
  return {
    ...summary, files: files.map(({ name, bytes, sha256 }) => ({ name, bytes, sha256 })), parameters: parametersOf(found.run.parameters, found.row.reading), note: found.row.note, jobId: found.row.jobId,
    readingSource: found.row.readingSource, usedIn: mayReadDrafts ? await usesOf(app.db, id) : [], withdrawnReason: found.row.withdrawnReason,
  };
}

/** Puts the archive back to 'checking' with a new job, in the caller's transaction. */
export async function enqueueCheck(app: App, tx: Queryable, caller: Caller, row: ArchiveRow): Promise<void> {
  const jobId = await app.queue.enqueue(tx, { kind: 'check', subjectType: 'archive', subjectId: row.id, label: `Check of ${row.name}`, campaignId: row.campaignId, createdBy: caller.user.id });
  await tx.update(archive).set({ state: 'checking', jobId }).where(eq(archive.id, row.id));
}

/** Refuses to touch what is withdrawn, or what a job is at; a check that failed or was cancelled stands in nobody's way. */
export async function mustBeSettled(tx: Queryable, row: ArchiveRow): Promise<void> {
  if (row.state === 'withdrawn') throw new PennyweightError('wrong-state', 'This archive is withdrawn: hand it in again if it is needed.');
  if (row.state !== 'checking' || !row.jobId) return;
  const [busy] = await tx.select({ state: job.state }).from(job).where(and(eq(job.id, row.jobId), inArray(job.state, ['queued', 'running'])));
  if (busy) throw new PennyweightError('wrong-state', 'This archive is being checked: wait until that is done.', { job: row.jobId });
}

export async function recheckArchive(app: App, caller: Caller, id: string): Promise<Archive> {
  const { row } = await findArchive(app, caller, id);
  authorise(caller, 'check', 'Archive', row);
  await mustBeSettled(app.db, row);
  await app.db.transaction(async (tx) => {
    await enqueueCheck(app, tx, caller, row);
    await recordAudit(tx, caller, { action: 'archive.check-again', objectType: 'archive', objectId: id, label: row.name, campaignId: row.campaignId });
  });
  return getArchive(app, caller, id);
}

export async function putRunParameters(app: App, caller: Caller, id: string, parameters: Record<string, number>, reason: string): Promise<Archive> {
  const { row, run: its } = await findArchive(app, caller, id);
  authorise(caller, 'correct', 'Archive', row);
  await mustBeSettled(app.db, row);
  await app.db.transaction(async (tx) => {
    await tx.update(run).set({ parameters }).where(eq(run.id, its.id));
    await enqueueCheck(app, tx, caller, row);
    await recordAudit(tx, caller, { action: 'run.parameters', objectType: 'run', objectId: its.id, label: its.name, campaignId: row.campaignId, before: its.parameters, after: parameters, reason });
  });
  return getArchive(app, caller, id);
}

export async function withdrawArchive(app: App, caller: Caller, id: string, reason: string): Promise<Archive> {
  const { row } = await findArchive(app, caller, id);
  authorise(caller, 'withdraw', 'Archive', row);
  await mustBeSettled(app.db, row);
  await app.db.transaction(async (tx) => {
    await tx.update(archive).set({ state: 'withdrawn', withdrawnReason: reason }).where(eq(archive.id, id));
    await recordAudit(tx, caller, { action: 'archive.withdraw', objectType: 'archive', objectId: id, label: row.name, campaignId: row.campaignId, before: { state: row.state }, after: { state: 'withdrawn' }, reason });
  });
  return getArchive(app, caller, id);
}
