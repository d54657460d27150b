/** A draft as its page shows it: with makers, sources and history. */
import { and, asc, eq, inArray, or } from 'drizzle-orm';
import type { Draft } from '#contract/dataset.ts';
import { archive, archiveFile, auditLog, release, run } from '../db/schema/index.ts';
import { findingCounts } from './archives.ts';
import type { App } from './context.ts';
import { archivesOf, inputsHash } from './draft-sources.ts';
import type { DraftRow } from './draft-states.ts';
import { draftSummaries } from './draft-summaries.ts';
import { peopleById } from './people.ts';

/** What of the audit log is the draft's history, in words. */
const events: Record<string, string> = {
  'draft.begin': 'began the draft', 'draft.recipe': 'changed the recipe', 'draft.ask-build': 'asked for a build', 'draft.build': 'the matrix was built',
  'draft.submit': 'submitted it for review', 'draft.return': 'returned it', 'draft.approve': 'approved it', 'release.make': 'the release was made', 'release.withdraw': 'withdrew the release',
};

export async function describeDraft(app: App, row: DraftRow): Promise<Draft> {
  const [summary] = await draftSummaries(app, [row]);
  const ids = archivesOf(row.recipe);
  const archives = ids.length === 0 ? [] : await app.db.select({ id: archive.id, name: archive.name, state: archive.state, by: archive.createdBy, run: run.name, sha256: archiveFile.sha256 }).from(archive).innerJoin(run, eq(run.id, archive.runId)).innerJoin(archiveFile, and(eq(archiveFile.archiveId, archive.id), eq(archiveFile.position, 0))).where(and(inArray(archive.id, ids), eq(archive.campaignId, row.campaignId)));
  const [out] = await app.db.select({ id: release.id }).from(release).where(eq(release.draftId, row.id));
  const log = await app.db.select().from(auditLog).where(and(or(and(eq(auditLog.objectType, 'draft'), eq(auditLog.objectId, row.id)), out && and(eq(auditLog.objectType, 'release'), eq(auditLog.objectId, out.id))), inArray(auditLog.action, Object.keys(events)))).orderBy(asc(auditLog.seq));
  const counts = await findingCounts(app.db, 'archive', ids);
  const person = await peopleById(app.db, [...row.makers, ...archives.map((each) => each.by)]);
  return {
    ...summary, recipe: row.recipe, version: row.version, stale: row.build !== null && row.buildHash !== (await inputsHash(app.db, row.recipe)), build: row.build, jobId: row.jobId, makers: row.makers.map(person),
    history: log.map((entry) => ({ at: entry.at.toISOString(), by: { id: entry.actorId ?? '', name: entry.actorName }, what: events[entry.action], reason: entry.reason })),
    sources: ids.flatMap((id) => {
      const found = archives.find((each) => each.id === id);
      return found ? [{ archive: id, run: found.run, name: found.name, sha256: found.sha256, state: found.state, handedInBy: person(found.by), findings: counts(id) }] : [];
    }),
  };
}
