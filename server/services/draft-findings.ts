/** Findings of a draft: those of its sources, each with what the recipe does about it. */
import { asc, inArray } from 'drizzle-orm';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import { planRecipe } from '../engine/recipe/plan.ts';
import { settledBy } from '../engine/recipe/settle.ts';
import { archive, finding } from '../db/schema/index.ts';
import type { App, Caller } from './context.ts';
import type { DraftRow } from './draft-builds.ts';
import { archivesOf, recipeSources } from './draft-sources.ts';
import { findDraft } from './drafts.ts';
import { shownFindings } from './findings.ts';

export type DraftFinding = ResponseOf<typeof routes.listDraftFindings>['findings'][number];

export async function findingsOfDraft(app: App, row: DraftRow): Promise<DraftFinding[]> {
  const ids = archivesOf(row.recipe);
  if (ids.length === 0) return [];
  const rows = await app.db.select().from(finding).where(inArray(finding.archiveId, ids)).orderBy(asc(finding.position));
  const names = new Map((await app.db.select({ id: archive.id, name: archive.name }).from(archive).where(inArray(archive.id, ids))).map((each) => [each.id, each.name]));
  const plan = planRecipe(row.recipe, await recipeSources(app, row.campaignId, row.recipe));
  const shown = await shownFindings(app.db, rows);
  return shown.map((each, i) => ({
    ...each, archive: rows[i].archiveId, archiveName: names.get(rows[i].archiveId!) ?? null,
    settledBy: plan.problems.length === 0 ? settledBy(each, rows[i].archiveId!, plan) : null,
  }));
}

export async function listDraftFindings(app: App, caller: Caller, id: string): Promise<DraftFinding[]> {
  return findingsOfDraft(app, await findDraft(app, caller, id));
}

/** What still asks for something: open, not settled by the recipe, more than a note. */
export const unsettled = (findings: DraftFinding[]) => findings.filter((each) => each.severity !== 'note' && each.state === 'open' && each.settledBy === null);
