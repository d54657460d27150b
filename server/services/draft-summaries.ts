/** Drafts in lists, and the names around them. */
import { eq, inArray } from 'drizzle-orm';
import type { DraftSummary } from '#contract/dataset.ts';
import { campaign, dataset, release } from '../db/schema/index.ts';
import { findingCounts } from './archives.ts';
import type { App } from './context.ts';
import type { DraftRow } from './draft-states.ts';
import { peopleById } from './people.ts';

export async function draftSummaries(app: App, rows: DraftRow[]): Promise<DraftSummary[]> {
  if (rows.length === 0) return [];
  const parents = await app.db.select({ id: dataset.id, slug: dataset.slug, title: dataset.title, campaign: campaign.slug }).from(dataset).innerJoin(campaign, eq(campaign.id, dataset.campaignId)).where(inArray(dataset.id, rows.map((row) => row.datasetId)));
  const releases = await app.db.select({ draftId: release.draftId, version: release.version }).from(release).where(inArray(release.draftId, rows.map((row) => row.id)));
  const counts = await findingCounts(app.db, 'draft', rows.map((row) => row.id));
  const person = await peopleById(app.db, rows.map((row) => row.createdBy));
  return rows.map((row) => {
    const parent = parents.find((each) => each.id === row.datasetId)!;
    return {
      id: row.id, number: row.number, state: row.state, createdBy: person(row.createdBy), createdAt: row.createdAt.toISOString(), updatedAt: row.updatedAt.toISOString(), campaign: parent.campaign, campaignId: row.campaignId,
      dataset: parent.slug, datasetTitle: parent.title, built: row.build !== null, findings: counts(row.id), releaseVersion: releases.find((each) => each.draftId === row.id)?.version ?? null,
    };
  });
}
