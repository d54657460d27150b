/** What a check of an archive needs, and how its result is stored: all in one transaction, with one audit row. */
import { asc, eq } from 'drizzle-orm';
import type { CheckPolicy, Finding } from '#contract/finding.ts';
import { PennyweightError } from '#contract/error.ts';
import type { ArchiveContents, Reading } from '#contract/reading.ts';
import type { CampaignDemands, CheckSubject } from '../engine/checks/check.ts';
import { archive, archiveFile, campaign, deliveryFile, run, survey as surveyTable } from '../db/schema/index.ts';
import type { Transaction } from '../db/database.ts';
import type { Survey } from '../engine/survey.ts';
import type { ReadingMisfit } from './archive-reader.ts';
import { enqueueCheck, type ArchiveRow } from './archives.ts';
import { recordAudit } from './audit.ts';
import { storable } from './storable.ts';
import type { App, Caller } from './context.ts';
import { replaceFindings } from './findings.ts';
import { earlierOnOtherGrids, lockGrids, uncomparedArchives } from './grids.ts';
import { mustStillRun } from './job-runs.ts';
import { newestSavedReading } from './readings.ts';
import { gridHash, keepSurvey, loadSurvey, packSurvey } from './survey-store.ts';

export interface CheckedArchive {
  row: ArchiveRow;
  run: typeof run.$inferSelect;
  demands: CampaignDemands;
  policy: CheckPolicy;
  checksum: CheckSubject['checksum'];
  /** the campaign's newest reading for the run's solver */
  saved: { id: string; reading: Reading } | null;
  /** of the last pass, with whatever reading it was made */
  survey: Survey | null;
}

/** How the archive is read: what its arrays mean, and where that comes from. */
export interface ChosenReading {
  proposal: Reading;
  reading: Reading;
  source: 'proposed' | 'saved' | 'corrected';
  savedReadingId: string | null;
  misfits: ReadingMisfit[];
}

export interface CheckResult {
  state: 'checked' | 'unreadable';
  contents: ArchiveContents | null;
  chosen: ChosenReading | null;
  survey: Survey | null;
  findings: Finding[];
  /** earlier archives on other grids that it was compared with */
  comparedWith: string[];
}

export async function archiveToCheck(app: App, id: string): Promise<CheckedArchive> {
  const [found] = await app.db.select({ row: archive, run, campaign }).from(archive).innerJoin(run, eq(run.id, archive.runId)).innerJoin(campaign, eq(campaign.id, archive.campaignId)).where(eq(archive.id, id));
  if (!found) throw new PennyweightError('not-found', 'The archive of this check is not there any more.', { archive: id });
  const files = await app.db.select({ sha256: archiveFile.sha256 }).from(archiveFile).where(eq(archiveFile.archiveId, id)).orderBy(asc(archiveFile.position));
  const [announced] = await app.db.select({ sha256: deliveryFile.announcedSha256 }).from(deliveryFile).where(eq(deliveryFile.deliveryId, found.row.deliveryId)).orderBy(asc(deliveryFile.position)).limit(1);
  return {
    row: found.row, run: found.run, demands: { fields: found.campaign.fields, parameters: found.campaign.parameters }, policy: found.campaign.policy,
    // Of a series each file was compared when it was received.
    checksum: files.length === 1 ? { received: files[0].sha256, announced: announced.sha256 } : null,
    saved: await newestSavedReading(app, found.row.campaignId, found.run.solver),
    survey: await loadSurvey(app, id),
  };
}

/** Snapshots, nodes and stamps of the archive as a list shows them. */
function figuresOf(survey: Survey | null): Pick<ArchiveRow, 'snapshots' | 'nodes' | 'timeFrom' | 'timeTo' | 'fieldNames' | 'layout'> {
  const stamps = Array.from(survey?.stamps ?? []).filter(Number.isFinite);
  const [field] = survey?.fields ?? [];
  return {
    snapshots: survey?.stamps?.length ?? field?.snapshots ?? null, nodes: field?.nodes ?? null,
    timeFrom: stamps.length > 0 ? stamps.reduce((a, b) => Math.min(a, b)) : null, timeTo: stamps.length > 0 ? stamps.reduce((a, b) => Math.max(a, b)) : null,
    fieldNames: survey?.reading.fields.map(({ name }) => name) ?? [], layout: survey?.reading.layout ?? null,
  };
}

const countOf = (findings: Finding[]) => ({
  blocker: findings.filter(({ severity }) => severity === 'blocker').length,
  caution: findings.filter(({ severity }) => severity === 'caution').length,
  note: findings.filter(({ severity }) => severity === 'note').length,
});

export async function keepCheck(app: App, caller: Caller, jobId: string, checked: CheckedArchive, result: CheckResult): Promise<void> {
  const { row } = checked, { survey, state } = result;
  const contents = storable(result.contents), chosen = storable(result.chosen), findings = storable(result.findings);
  const packed = survey && survey !== checked.survey ? await packSurvey(app, survey) : null;
  await app.db.transaction(async (tx) => {
    await mustStillRun(tx, jobId);
    const [now] = await tx.select({ state: archive.state }).from(archive).where(eq(archive.id, row.id)).for('update');
    if (now.state === 'withdrawn') return;
    await tx.update(archive).set({
      state, ...storable(figuresOf(survey)), ...(contents ? { contents, format: contents.format } : {}),
      ...(chosen ? { proposal: chosen.proposal, reading: chosen.reading, readingSource: chosen.source, savedReadingId: chosen.savedReadingId, misfits: chosen.misfits } : {}),
    }).where(eq(archive.id, row.id));
    await replaceFindings(tx, { archiveId: row.id }, row.campaignId, findings);
    await recordAudit(tx, caller, {
      action: 'archive.check', objectType: 'archive', objectId: row.id, label: row.name, campaignId: row.campaignId,
      before: { state: row.state, reading: row.readingSource }, after: { state, reading: chosen?.source ?? row.readingSource, findings: countOf(findings), checks: [...new Set(findings.map(({ id }) => id))], job: jobId },
    });
    if (survey && packed) await keepNewSurvey(app, tx, caller, row, survey, packed, result.comparedWith);
    if (!survey) await tx.delete(surveyTable).where(eq(surveyTable.archiveId, row.id));
  });
}

/** Grids that became known while this archive was checked have not been compared with it: whichever came later is checked again. */
async function keepNewSurvey(app: App, tx: Transaction, caller: Caller, row: ArchiveRow, survey: Survey, packed: Awaited<ReturnType<typeof packSurvey>>, comparedWith: string[]): Promise<void> {
  const grid = gridHash(survey);
  await lockGrids(tx, row.campaignId);
  const [before] = await tx.select({ grid: surveyTable.gridHash }).from(surveyTable).where(eq(surveyTable.archiveId, row.id));
  await keepSurvey(tx, row.id, survey, packed);
  if (grid === null || grid === before?.grid) return;
  for (const later of await uncomparedArchives(tx, row, grid)) await enqueueCheck(app, tx, caller, later);
  const missed = (await earlierOnOtherGrids(tx, row, grid)).some((id) => !comparedWith.includes(id));
  if (missed) await enqueueCheck(app, tx, caller, row);
}
