/** Gathers what the texts of a release speak of. */
import { asc, eq, inArray, or } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import type { ReleaseFacts } from '../engine/release/facts.ts';
import { archive, archiveFile, campaign, dataset, finding, run } from '../db/schema/index.ts';
import { version as program } from './version.ts';
import type { App } from './context.ts';
import { archivesOf } from './draft-sources.ts';
import type { DraftRow } from './draft-states.ts';
import { peopleById } from './people.ts';

/** `version` is the number that the release will get. */
export async function releaseFacts(app: App, row: DraftRow, version: number): Promise<ReleaseFacts> {
  if (!row.build || !row.approval || !row.reviewedBy || !row.reviewedAt) throw new PennyweightError('wrong-state', 'The draft is not approved.');
  const [parent] = await app.db.select({ dataset, campaign }).from(dataset).innerJoin(campaign, eq(campaign.id, dataset.campaignId)).where(eq(dataset.id, row.datasetId));
  const ids = archivesOf(row.recipe);
  const archives = await app.db.select({ archive, run: run.name }).from(archive).innerJoin(run, eq(run.id, archive.runId)).where(inArray(archive.id, ids));
  const files = await app.db.select().from(archiveFile).where(inArray(archiveFile.archiveId, ids)).orderBy(asc(archiveFile.position));
  const waived = (await app.db.select().from(finding).where(or(eq(finding.draftId, row.id), inArray(finding.archiveId, ids))).orderBy(asc(finding.position))).filter((each) => each.waivedAt !== null);
  const person = await peopleById(app.db, [row.createdBy, row.reviewedBy, ...archives.map((each) => each.archive.createdBy), ...waived.map((each) => each.waivedBy)]);
  return {
    campaign: { slug: parent.campaign.slug, title: parent.campaign.title }, dataset: { slug: parent.dataset.slug, title: parent.dataset.title, description: parent.dataset.description },
    version, build: row.build, recipe: row.recipe, builtBy: person(row.createdBy), approvedBy: person(row.reviewedBy), approvedAt: row.reviewedAt.toISOString(),
    licence: row.approval.licence, handlingLabel: row.approval.handlingLabel, contact: row.approval.contact, note: row.approval.note,
    sources: ids.map((id) => {
      const found = archives.find((each) => each.archive.id === id)!;
      return { archive: id, run: found.run, name: found.archive.name, files: files.filter((file) => file.archiveId === id).map(({ name, sha256, bytes }) => ({ name, sha256, bytes })), handedInBy: person(found.archive.createdBy), handedInAt: found.archive.createdAt.toISOString() };
    }),
    waivers: waived.map((each) => ({ check: each.checkId, message: each.message, reason: each.waivedReason!, by: person(each.waivedBy!), at: each.waivedAt!.toISOString() })),
    program,
  };
}
