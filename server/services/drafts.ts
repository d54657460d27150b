/** Drafts: begun from a recipe, changed, handed to a build. */
import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Draft } from '#contract/dataset.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Recipe } from '#contract/recipe.ts';
import { readRecipe } from '../engine/recipe/plan.ts';
import type { Queryable } from '../db/database.ts';
import { archive, dataset, draft } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { authorise, mustSee, type App, type Caller } from './context.ts';
import { findDataset } from './datasets.ts';
import { describeDraft } from './draft-description.ts';
import { archivesOf, makersOf } from './draft-sources.ts';
import { mustBeEditable, type DraftRow } from './draft-states.ts';
import { recipeHash } from './recipe-hash.ts';

export async function findDraft(app: App, caller: Caller, id: string): Promise<DraftRow> {
  const [row] = await app.db.select().from(draft).where(eq(draft.id, id));
  if (!row) throw new PennyweightError('not-found', 'There is no such draft, or you are not a member of its campaign.');
  mustSee(caller, 'Draft', row, 'draft');
  return row;
}

/** What a person calls it: 'Plume temperature, draft 2'. */
export async function draftLabel(tx: Queryable, row: DraftRow): Promise<string> {
  const [parent] = await tx.select({ title: dataset.title }).from(dataset).where(eq(dataset.id, row.datasetId));
  return `${parent.title}, draft ${row.number}`;
}

export async function getDraft(app: App, caller: Caller, id: string): Promise<Draft> {
  return describeDraft(app, await findDraft(app, caller, id));
}

export async function createDraft(app: App, caller: Caller, campaignSlug: string, slug: string, given: Recipe): Promise<Draft> {
  const { row: parent } = await findDataset(app, caller, campaignSlug, slug);
  authorise(caller, 'create', 'Draft', { campaignId: parent.campaignId });
  const recipe = readRecipe(given), makers = await makersOf(app.db, recipe, null, caller.user.id);
  await mustBelong(app, parent.campaignId, recipe);
  const made = await app.db.transaction(async (tx) => {
    await tx.select({ id: dataset.id }).from(dataset).where(eq(dataset.id, parent.id)).for('update');
    const [{ next }] = await tx.select({ next: sql<number>`coalesce(max(${draft.number}), 0)::int + 1` }).from(draft).where(eq(draft.datasetId, parent.id));
    const [row] = await tx.insert(draft).values({ datasetId: parent.id, campaignId: parent.campaignId, number: next, recipe, recipeHash: recipeHash(recipe), makers, createdBy: caller.user.id }).returning();
    await recordAudit(tx, caller, { action: 'draft.begin', objectType: 'draft', objectId: row.id, label: `${parent.title}, draft ${next}`, campaignId: parent.campaignId, after: { recipe } });
    return row;
  });
  return describeDraft(app, made);
}

/** An archive of another campaign is not there for this one. */
async function mustBelong(app: App, campaignId: string, recipe: Recipe): Promise<void> {
  const ids = archivesOf(recipe);
  const rows = ids.length === 0 ? [] : await app.db.select({ id: archive.id }).from(archive).where(and(inArray(archive.id, ids), eq(archive.campaignId, campaignId)));
  const missing = ids.find((id) => !rows.some((row) => row.id === id));
  if (missing) throw new PennyweightError('recipe-invalid', `Step 1: archive ${missing} is not in this campaign: choose one that is.`, { archive: missing });
}

export async function putRecipe(app: App, caller: Caller, id: string, given: Recipe, version: number): Promise<Draft> {
  const row = await findDraft(app, caller, id);
  authorise(caller, 'update', 'Draft', row);
  mustBeEditable(row);
  const recipe = readRecipe(given);
  await mustBelong(app, row.campaignId, recipe);
  await app.db.transaction(async (tx) => {
    const makers = await makersOf(tx, recipe, id, caller.user.id);
    // The review is over: whoever returned it may now be among its makers. The audit log keeps who it was.
    const changed = await tx.update(draft).set({ recipe, recipeHash: recipeHash(recipe), makers, reviewedBy: null, reviewedAt: null, version: version + 1, updatedAt: new Date() }).where(and(eq(draft.id, id), eq(draft.version, version), inArray(draft.state, ['draft', 'returned']))).returning({ id: draft.id });
    if (changed.length === 0) throw new PennyweightError('stale-version', 'Somebody changed this draft in the meantime: reload it and make your change again.', { version });
    await recordAudit(tx, caller, { action: 'draft.recipe', objectType: 'draft', objectId: id, label: await draftLabel(tx, row), campaignId: row.campaignId, before: row.recipe, after: recipe });
  });
  return getDraft(app, caller, id);
}

export async function buildDraft(app: App, caller: Caller, id: string): Promise<Draft> {
  const row = await findDraft(app, caller, id);
  authorise(caller, 'build', 'Draft', row);
  mustBeEditable(row);
  await app.db.transaction(async (tx) => {
    const makers = await makersOf(tx, row.recipe, id, caller.user.id);
    const jobId = await app.queue.enqueue(tx, { kind: 'build', subjectType: 'draft', subjectId: id, label: `Build of ${await draftLabel(tx, row)}`, campaignId: row.campaignId, createdBy: caller.user.id });
    const changed = await tx.update(draft).set({ jobId, makers, reviewedBy: null, reviewedAt: null, updatedAt: new Date() }).where(and(eq(draft.id, id), eq(draft.version, row.version), inArray(draft.state, ['draft', 'returned']))).returning({ id: draft.id });
    if (changed.length === 0) throw new PennyweightError('stale-version', 'Somebody changed this draft in the meantime: reload it and build again.');
    await recordAudit(tx, caller, { action: 'draft.ask-build', objectType: 'draft', objectId: id, label: await draftLabel(tx, row), campaignId: row.campaignId, after: { recipe: row.recipeHash } });
  });
  return getDraft(app, caller, id);
}
