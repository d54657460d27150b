/** The archives of a recipe as the plan needs them, and who made a draft from them. */
import { createHash } from 'node:crypto';
import { and, asc, eq, inArray } from 'drizzle-orm';
import type { Recipe } from '#contract/recipe.ts';
import type { RecipeSource } from '../engine/recipe/record-state.ts';
import type { Queryable } from '../db/database.ts';
import { archive, auditLog, run, survey } from '../db/schema/index.ts';
import { canonicalJson } from './canonical-json.ts';
import type { App } from './context.ts';
import { recipeHash } from './recipe-hash.ts';
import { parametersOf } from './run-parameters.ts';
import { loadSurvey } from './survey-store.ts';

export function archivesOf(recipe: Recipe): string[] {
  const step = recipe.steps.find((each) => each.step === 'select');
  return step ? [...new Set(step.archives)] : [];
}

/** Sources that can be used: of the campaign, checked, surveyed. Others are left out, and the plan says that they are missing. */
export async function recipeSources(app: App, campaignId: string, recipe: Recipe): Promise<RecipeSource[]> {
  const ids = archivesOf(recipe);
  if (ids.length === 0) return [];
  const rows = await app.db.select({ id: archive.id, state: archive.state, run: run.name, parameters: run.parameters }).from(archive).innerJoin(run, eq(run.id, archive.runId)).where(and(inArray(archive.id, ids), eq(archive.campaignId, campaignId), eq(archive.state, 'checked')));
  const sources: RecipeSource[] = [];
  for (const row of rows) {
    const surveyed = await loadSurvey(app, row.id);
    if (surveyed) sources.push({ archive: row.id, run: row.run, parameters: parametersOf(row.parameters, surveyed.reading), survey: surveyed });
  }
  return sources;
}

/**
 * SHA-256 of all that a build depends on: the recipe, and for each archive (whose bytes never change) how it is read and the run's
 * parameters. A build made of other inputs is stale.
 */
export async function inputsHash(tx: Queryable, recipe: Recipe): Promise<string> {
  const ids = archivesOf(recipe);
  const rows = ids.length === 0 ? [] : await tx.select({ id: archive.id, reading: survey.readingHash, parameters: run.parameters }).from(archive)
    .innerJoin(run, eq(run.id, archive.runId)).leftJoin(survey, eq(survey.archiveId, archive.id)).where(inArray(archive.id, ids)).orderBy(asc(archive.id));
  return createHash('sha256').update(canonicalJson([recipeHash(recipe), rows])).digest('hex');
}

/** Verbs of the audit log by which a person puts a hand to the matrix. */
const making = ['draft.begin', 'draft.recipe', 'draft.ask-build'];

/** Who began the draft, changed its recipe or had it built, and everyone who handed in an archive of the recipe: none of them may approve it. */
export async function makersOf(tx: Queryable, recipe: Recipe, draftId: string | null, hand: string): Promise<string[]> {
  const ids = archivesOf(recipe);
  const handedIn = ids.length === 0 ? [] : await tx.select({ by: archive.createdBy }).from(archive).where(inArray(archive.id, ids));
  const earlier = draftId === null ? [] : await tx.select({ by: auditLog.actorId }).from(auditLog).where(and(eq(auditLog.objectType, 'draft'), eq(auditLog.objectId, draftId), inArray(auditLog.action, making)));
  return [...new Set([hand, ...handedIn.map((row) => row.by), ...earlier.flatMap((row) => row.by ?? [])])];
}
