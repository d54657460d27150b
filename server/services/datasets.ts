/** Datasets with their drafts and releases. */
import { and, asc, desc, eq, ilike, inArray, or } from 'drizzle-orm';
import { about } from '#contract/access.ts';
import type { Dataset } from '#contract/dataset.ts';
import { PennyweightError } from '#contract/error.ts';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import { campaign, dataset, draft, release } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { campaignBySlug } from './campaign-lookup.ts';
import { authorise, mustSee, type App, type Caller } from './context.ts';
import { draftSummaries } from './draft-summaries.ts';
import { peopleById } from './people.ts';

export type DatasetRow = typeof dataset.$inferSelect;
type Summary = ResponseOf<typeof routes.listDatasets>['datasets'][number];

async function summaries(app: App, rows: (DatasetRow & { campaignSlug: string })[]): Promise<Summary[]> {
  if (rows.length === 0) return [];
  const ids = rows.map((row) => row.id);
  const drafts = await app.db.select({ datasetId: draft.datasetId, state: draft.state, build: draft.build }).from(draft).where(inArray(draft.datasetId, ids));
  const releases = await app.db.select({ datasetId: release.datasetId, version: release.version, state: release.state, build: release.build, releasedAt: release.releasedAt }).from(release).where(inArray(release.datasetId, ids)).orderBy(desc(release.version));
  const person = await peopleById(app.db, rows.map((row) => row.createdBy));
  return rows.map((row) => {
    const latest = releases.find((each) => each.datasetId === row.id);
    const build = latest?.build ?? drafts.find((each) => each.datasetId === row.id && each.build)?.build;
    return {
      id: row.id, campaign: row.campaignSlug, campaignId: row.campaignId, slug: row.slug, title: row.title, description: row.description, createdBy: person(row.createdBy), createdAt: row.createdAt.toISOString(),
      latestRelease: latest ? { version: latest.version, state: latest.state, rows: latest.build.rows, columns: latest.build.columns, releasedAt: latest.releasedAt.toISOString() } : null,
      openDrafts: drafts.filter((each) => each.datasetId === row.id && ['draft', 'submitted', 'returned', 'approved'].includes(each.state)).length,
      fields: build?.fields.map((field) => field.name) ?? [],
    };
  });
}

export async function listDatasets(app: App, caller: Caller, query: { campaign?: string; q?: string }): Promise<Summary[]> {
  const text = query.q ? `%${query.q.replace(/[\\%_]/g, '\\$&')}%` : null;
  const rows = await app.db
    .select({ dataset, campaignSlug: campaign.slug }).from(dataset).innerJoin(campaign, eq(campaign.id, dataset.campaignId))
    .where(and(query.campaign ? eq(campaign.slug, query.campaign) : undefined, text ? or(ilike(dataset.title, text), ilike(dataset.description, text), ilike(dataset.slug, text)) : undefined)).orderBy(asc(dataset.title));
  const visible = rows.filter((row) => caller.ability.can('read', about('Dataset', { campaignId: row.dataset.campaignId })));
  return summaries(app, visible.map((row) => ({ ...row.dataset, campaignSlug: row.campaignSlug })));
}

export async function findDataset(app: App, caller: Caller, campaignSlug: string, slug: string): Promise<{ row: DatasetRow; campaign: typeof campaign.$inferSelect }> {
  const where = await campaignBySlug(app.db, caller, campaignSlug);
  const [row] = await app.db.select().from(dataset).where(and(eq(dataset.campaignId, where.id), eq(dataset.slug, slug)));
  if (!row) throw new PennyweightError('not-found', `The campaign has no dataset "${slug}".`, { dataset: slug });
  mustSee(caller, 'Dataset', row, 'dataset');
  return { row, campaign: where };
}

export async function getDataset(app: App, caller: Caller, campaignSlug: string, slug: string): Promise<Dataset> {
  const { row } = await findDataset(app, caller, campaignSlug, slug);
  const [summary] = await summaries(app, [{ ...row, campaignSlug }]);
  const mayReadDrafts = caller.ability.can('read', about('Draft', { campaignId: row.campaignId }));
  const drafts = mayReadDrafts ? await app.db.select().from(draft).where(eq(draft.datasetId, row.id)).orderBy(desc(draft.number)) : [];
  const releases = await app.db.select().from(release).where(eq(release.datasetId, row.id)).orderBy(desc(release.version));
  const person = await peopleById(app.db, releases.flatMap((each) => [each.approvedBy, each.builtBy]));
  return {
    ...summary, drafts: await draftSummaries(app, drafts),
    releases: releases.map((each) => ({ id: each.id, version: each.version, state: each.state, rows: each.build.rows, columns: each.build.columns, bytes: each.bytes, approvedBy: person(each.approvedBy), builtBy: person(each.builtBy), releasedAt: each.releasedAt.toISOString() })),
  };
}

export async function createDataset(app: App, caller: Caller, campaignSlug: string, input: { slug: string; title: string; description: string }): Promise<Dataset> {
  const where = await campaignBySlug(app.db, caller, campaignSlug);
  authorise(caller, 'create', 'Dataset', { campaignId: where.id });
  await app.db.transaction(async (tx) => {
    const [made] = await tx.insert(dataset).values({ ...input, campaignId: where.id, createdBy: caller.user.id }).onConflictDoNothing().returning();
    if (!made) throw new PennyweightError('conflict', `The campaign has a dataset "${input.slug}" already: choose another short name.`, { slug: input.slug });
    await recordAudit(tx, caller, { action: 'dataset.begin', objectType: 'dataset', objectId: made.id, label: made.title, campaignId: where.id, after: input });
  });
  return getDataset(app, caller, campaignSlug, input.slug);
}
