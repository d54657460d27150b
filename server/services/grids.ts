/** Grids of a campaign's other archives, to compare a new one with. */
import { and, asc, eq, inArray, isNotNull, ne, sql } from 'drizzle-orm';
import type { CheckSubject } from '../engine/checks/check.ts';
import { archive, run, survey as surveyTable } from '../db/schema/index.ts';
import type { Queryable } from '../db/database.ts';
import type { Survey } from '../engine/survey.ts';
import type { ArchiveRow } from './archives.ts';
import type { App } from './context.ts';
import { gridHash, loadSurvey } from './survey-store.ts';

/** Grids that are loaded to be compared: more of them that differ from each other say nothing new. */
const mostGrids = 10;
/** Archives named with one grid. */
const mostNamed = 20;

/** Handed in earlier: what came first sets the campaign's grid, so that one odd archive does not put all others in doubt. */
const earlierThan = (row: ArchiveRow) => sql`(${archive.createdAt}, ${archive.id}) < (select mine.created_at, mine.id from ${archive} mine where mine.id = ${row.id})`;
/** Those whose grid is known, also while they are checked again. */
const comparable = (row: ArchiveRow) => and(eq(archive.campaignId, row.campaignId), inArray(archive.state, ['checked', 'checking']), isNotNull(surveyTable.gridHash));

/** Ids of the earlier archives whose grid is not this one to the last bit: what a check compared with, or should have. */
export async function earlierOnOtherGrids(tx: Queryable, row: ArchiveRow, grid: string): Promise<string[]> {
  const found = await tx.select({ id: archive.id }).from(archive).innerJoin(surveyTable, eq(surveyTable.archiveId, archive.id)).where(and(comparable(row), earlierThan(row), ne(surveyTable.gridHash, grid)));
  return found.map((each) => each.id);
}

/** One archive of a campaign settles its grid at a time, until its transaction ends: two that are checked at once would miss each other. */
export async function lockGrids(tx: Queryable, campaignId: string): Promise<void> {
  await tx.execute(sql`select pg_advisory_xact_lock(7020982, hashtext(${campaignId}))`);
}

/** Grids that are not equal to this one to the last bit; whether they are equal to rounding is for the check to say. */
export async function otherGrids(app: App, row: ArchiveRow, survey: Survey): Promise<CheckSubject['otherGrids']> {
  const mine = gridHash(survey);
  if (mine === null) return [];
  const others = await app.db
    .select({ id: archive.id, name: archive.name, run: run.name, grid: surveyTable.gridHash }).from(archive)
    .innerJoin(surveyTable, eq(surveyTable.archiveId, archive.id)).innerJoin(run, eq(run.id, archive.runId))
    .where(and(comparable(row), earlierThan(row), ne(surveyTable.gridHash, mine))).orderBy(asc(archive.createdAt)).limit(1000);
  const byGrid = new Map<string | null, typeof others>();
  for (const each of others) byGrid.set(each.grid, [...(byGrid.get(each.grid) ?? []), each]);
  const grids = await Promise.all([...byGrid.values()].slice(0, mostGrids).map(async (same) => {
    const theirs = await loadSurvey(app, same[0].id);
    return theirs ? same.slice(0, mostNamed).map((each) => ({ archive: `${each.run} (${each.name})`, axes: theirs.axes })) : [];
  }));
  return grids.flat();
}

/** Archives handed in later and checked before this one's grid was known: they have not been compared with it. */
export async function uncomparedArchives(tx: Queryable, row: ArchiveRow, grid: string): Promise<ArchiveRow[]> {
  const found = await tx.select({ row: archive }).from(archive).innerJoin(surveyTable, eq(surveyTable.archiveId, archive.id))
    .where(and(comparable(row), sql`not ${earlierThan(row)}`, ne(archive.id, row.id), ne(surveyTable.gridHash, grid)));
  return found.map((each) => each.row);
}
