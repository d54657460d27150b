/** The archives of a recipe as the plan needs them, and who made a draft from them. */
import { and, eq, inArray } from 'drizzle-orm';
import type { Recipe } from '#contract/recipe.ts';
import type { RecipeSource } from '../engine/recipe/record-state.ts';
import { archive, run } from '../db/schema/index.ts';
import type { App } from './context.ts';
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
    const survey = await loadSurvey(app, row.id);
    if (survey) sources.push({ archive: row.id, run: row.run, parameters: row.parameters, survey });
  }
  return sources;
}

/** The builder and everyone who handed in an archive of the recipe: none of them may approve it. */
export async function makersOf(app: App, recipe: Recipe, builder: string): Promise<string[]> {
  const ids = archivesOf(recipe);
  const rows = ids.length === 0 ? [] : await app.db.select({ by: archive.createdBy }).from(archive).where(inArray(archive.id, ids));
  return [...new Set([builder, ...rows.map((row) => row.by)])];
}
