/** Submission, return and approval. Four eyes: who made any of it does not decide; the database holds that too. */
import { and, asc, eq, inArray, isNull, ne } from 'drizzle-orm';
import { about } from '#contract/access.ts';
import type { Approval, Draft } from '#contract/dataset.ts';
import { PennyweightError } from '#contract/error.ts';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import { archive, draft } from '../db/schema/index.ts';
import { planRecipe } from '../engine/recipe/plan.ts';
import { recordAudit } from './audit.ts';
import { authorise, type App, type Caller } from './context.ts';
import { findingsOfDraft, unsettled } from './draft-findings.ts';
import { archivesOf, inputsHash, recipeSources } from './draft-sources.ts';
import { mustBeEditable, waitsForDecision, type DraftRow } from './draft-states.ts';
import { draftSummaries } from './draft-summaries.ts';
import { draftLabel, findDraft, getDraft } from './drafts.ts';
import { peopleById } from './people.ts';

/** Refuses while something is open: blockers always, cautions when `cautions` too; and when the recipe no longer holds (a source was withdrawn). */
async function mustBeSettled(app: App, row: DraftRow, cautions: boolean): Promise<void> {
  const [gone] = await app.db.select({ name: archive.name, state: archive.state }).from(archive).where(and(inArray(archive.id, archivesOf(row.recipe)), ne(archive.state, 'checked')));
  if (gone) throw new PennyweightError('open-findings', gone.state === 'checking' ? `The source ${gone.name} is being checked again: wait until that is done.` : `The source ${gone.name} is ${gone.state}: take it out of the recipe.`, { source: gone.name, state: gone.state });
  const [problem] = planRecipe(row.recipe, await recipeSources(app, row.campaignId, row.recipe)).problems;
  if (problem) throw new PennyweightError('recipe-invalid', `${problem.step === null ? 'The recipe' : `Step ${problem.step + 1} of the recipe`} does not hold any more: ${problem.message}`, { step: problem.step });
  const open = unsettled(await findingsOfDraft(app, row)).filter((each) => cautions || each.severity === 'blocker');
  if (open.length === 0) return;
  const [first] = open;
  throw new PennyweightError('open-findings', `${open.length === 1 ? 'A finding is' : `${open.length} findings are`} open, first ${first.id} in ${first.archiveName ?? 'the draft'}: ${first.message} ${first.severity === 'blocker' ? 'A blocker must be repaired.' : 'A caution needs a remedy in the recipe or a waiver.'}`, { findings: open.map((each) => each.findingId) });
}

async function mustBeBuilt(app: App, row: DraftRow): Promise<void> {
  if (!row.build) throw new PennyweightError('wrong-state', 'The matrix has not been built: build it first.');
  if (row.buildHash !== (await inputsHash(app.db, row.recipe))) throw new PennyweightError('wrong-state', 'The recipe, the reading of a source or the parameters of a run changed since the matrix was built: build it again.');
}

export async function submitDraft(app: App, caller: Caller, id: string, note: string): Promise<Draft> {
  const row = await findDraft(app, caller, id);
  authorise(caller, 'submit', 'Draft', row);
  mustBeEditable(row);
  await mustBeBuilt(app, row);
  await mustBeSettled(app, row, false);
  await app.db.transaction(async (tx) => {
    const changed = await tx.update(draft).set({ state: 'submitted', submittedBy: caller.user.id, submittedAt: new Date(), reviewedBy: null, reviewedAt: null, reviewReason: null, updatedAt: new Date() }).where(and(eq(draft.id, id), eq(draft.version, row.version), inArray(draft.state, ['draft', 'returned']))).returning({ id: draft.id });
    if (changed.length === 0) throw new PennyweightError('stale-version', 'The draft changed in the meantime: reload it.');
    await recordAudit(tx, caller, { action: 'draft.submit', objectType: 'draft', objectId: id, label: await draftLabel(tx, row), campaignId: row.campaignId, before: { state: row.state }, after: { state: 'submitted', matrix: row.build!.matrixSha256 }, reason: note });
  });
  return getDraft(app, caller, id);
}

/** May decide on it, and it waits for a decision. */
async function mustBeReviewer(app: App, caller: Caller, row: DraftRow): Promise<void> {
  if (row.makers.includes(caller.user.id) && caller.ability.can('review', 'Draft')) {
    throw new PennyweightError('own-work', 'You built this draft, or handed in an archive that it contains: another steward decides on it.', { makers: row.makers });
  }
  authorise(caller, 'review', 'Draft', row);
  if (!(await waitsForDecision(app.db, row))) throw new PennyweightError('wrong-state', `This draft is ${row.state}: only a submitted one can be decided on.`, { state: row.state });
}

/** Nobody decided on it since it was read. */
const asSeen = (row: DraftRow) => and(eq(draft.id, row.id), eq(draft.state, row.state), row.jobId ? eq(draft.jobId, row.jobId) : isNull(draft.jobId));

export async function returnDraft(app: App, caller: Caller, id: string, reason: string): Promise<Draft> {
  const row = await findDraft(app, caller, id);
  await mustBeReviewer(app, caller, row);
  await app.db.transaction(async (tx) => {
    const changed = await tx.update(draft).set({ state: 'returned', reviewedBy: caller.user.id, reviewedAt: new Date(), reviewReason: reason, updatedAt: new Date() }).where(asSeen(row)).returning({ id: draft.id });
    if (changed.length === 0) throw new PennyweightError('wrong-state', 'Somebody decided on this draft in the meantime: reload it.');
    await recordAudit(tx, caller, { action: 'draft.return', objectType: 'draft', objectId: id, label: await draftLabel(tx, row), campaignId: row.campaignId, before: { state: row.state }, after: { state: 'returned' }, reason });
  });
  return getDraft(app, caller, id);
}

/** The approval is stored, and the release job enqueued, in one transaction; the release becomes visible when its bag is complete. */
export async function approveDraft(app: App, caller: Caller, id: string, approval: Approval): Promise<Draft> {
  const row = await findDraft(app, caller, id);
  await mustBeReviewer(app, caller, row);
  await mustBeBuilt(app, row);
  await mustBeSettled(app, row, true);
  await app.db.transaction(async (tx) => {
    const jobId = await app.queue.enqueue(tx, { kind: 'release', subjectType: 'draft', subjectId: id, label: `Release of ${await draftLabel(tx, row)}`, campaignId: row.campaignId, createdBy: caller.user.id });
    const changed = await tx.update(draft).set({ state: 'approved', reviewedBy: caller.user.id, reviewedAt: new Date(), reviewReason: approval.note || null, approval, jobId, updatedAt: new Date() }).where(asSeen(row)).returning({ id: draft.id });
    if (changed.length === 0) throw new PennyweightError('wrong-state', 'Somebody decided on this draft in the meantime: reload it.');
    await recordAudit(tx, caller, { action: 'draft.approve', objectType: 'draft', objectId: id, label: await draftLabel(tx, row), campaignId: row.campaignId, before: { state: row.state }, after: { state: 'approved', matrix: row.build!.matrixSha256, ...approval }, reason: approval.note });
  });
  return getDraft(app, caller, id);
}

export async function listReviews(app: App, caller: Caller): Promise<ResponseOf<typeof routes.listReviews>['drafts']> {
  const rows = (await app.db.select().from(draft).where(inArray(draft.state, ['submitted', 'approved'])).orderBy(asc(draft.submittedAt)).limit(500)).filter((row) => caller.ability.can('read', about('Draft', row)));
  const summaries = await draftSummaries(app, rows);
  const person = await peopleById(app.db, rows.flatMap((row) => row.makers));
  const waiting = await Promise.all(rows.map((row) => waitsForDecision(app.db, row)));
  return summaries.map((summary, i) => {
    const row = rows[i], mine = row.makers.includes(caller.user.id);
    const mayReview = waiting[i] && caller.ability.can('review', about('Draft', row));
    const whyNot = mayReview ? null : !waiting[i] ? 'approved; its release is being made' : mine ? `you are one of its makers (${row.makers.map((id) => person(id).name).join(', ')})` : 'only a steward of the campaign decides';
    return { ...summary, mayReview, whyNot };
  });
}
