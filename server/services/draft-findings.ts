/** Findings of a draft: its own, and those of its sources, each with what the recipe does about it. */
import { asc, eq, inArray, or, sql } from 'drizzle-orm';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import { planRecipe } from '../engine/recipe/plan.ts';
import { settledBy } from '../engine/recipe/settle.ts';
import { archive, campaign, finding } from '../db/schema/index.ts';
import type { App, Caller } from './context.ts';
import { archivesOf, recipeSources } from './draft-sources.ts';
import type { DraftRow } from './draft-states.ts';
import { findDraft } from './drafts.ts';
import { shownFindings } from './findings.ts';

export type DraftFinding = ResponseOf<typeof routes.listDraftFindings>['findings'][number];

export async function findingsOfDraft(app: App, row: DraftRow): Promise<DraftFinding[]> {
  const ids = archivesOf(row.recipe);
  if (ids.length === 0) return [];
  const [{ policy }] = await app.db.select({ policy: campaign.policy }).from(campaign).where(eq(campaign.id, row.campaignId));
  const rows = await app.db.select().from(finding).where(or(eq(finding.draftId, row.id), inArray(finding.archiveId, ids))).orderBy(sql`${finding.draftId} nulls last`, asc(finding.archiveId), asc(finding.position));
  const names = new Map((await app.db.select({ id: archive.id, name: archive.name }).from(archive).where(inArray(archive.id, ids))).map((each) => [each.id, each.name]));
  const plan = planRecipe(row.recipe, await recipeSources(app, row.campaignId, row.recipe));
  const shown = await shownFindings(app.db, rows);
  return shown.map((each, i) => ({
    ...each, archive: rows[i].archiveId, archiveName: names.get(rows[i].archiveId ?? '') ?? null,
    settledBy: plan.problems.length === 0 && rows[i].archiveId ? settledBy(each, rows[i].archiveId, plan, policy) : null,
  }));
}

export async function listDraftFindings(app: App, caller: Caller, id: string): Promise<DraftFinding[]> {
  return findingsOfDraft(app, await findDraft(app, caller, id));
}

/** What still asks for something: open, not settled by the recipe, more than a note. */
export const unsettled = (findings: DraftFinding[]) => findings.filter((each) => each.severity !== 'note' && each.state === 'open' && each.settledBy === null);
