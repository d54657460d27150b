/** Submission, return, waivers and approval; four eyes by the service and by the database. */
import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import type { Draft } from '#contract/dataset.ts';
import { routes } from '#contract/routes.ts';
import { auditLog, draft as draftTable, job as jobTable } from '../../server/db/schema/index.ts';
import type { Person } from '../setup/app.ts';
import { approval, makeWakeCampaign, type WakeCampaign } from '../setup/wake-campaign.ts';

// Builds start reading processes, which a busy machine makes wait.
vi.setConfig({ testTimeout: 120_000 });

let wake: WakeCampaign;
let steady: string, gap: string, blemished: string;
let sound: Draft;

beforeAll(async () => {
  wake = await makeWakeCampaign(['steady', 'gap', 'blemished']);
  [steady, gap, blemished] = await Promise.all([wake.handIn('steady'), wake.handIn('gap'), wake.handIn('blemished')]);
  sound = await wake.built(wake.recipe([steady]));
}, 300_000);
afterAll(() => wake.close());

const submit = (id: string, by: Person = wake.modeler, note = '') => by.call(routes.submitDraft, { params: { draft: id }, body: { note } });
const giveBack = (id: string, by: Person, reason = 'The spacing is too coarse.') => by.call(routes.returnDraft, { params: { draft: id }, body: { reason } });
const approve = (id: string, by: Person) => by.call(routes.approveDraft, { params: { draft: id }, body: approval });
const findings = async (id: string) => (await wake.modeler.call(routes.listDraftFindings, { params: { draft: id } })).findings;
const db = () => wake.app.parts.db;
const rowOf = async (id: string) => (await db().select().from(draftTable).where(eq(draftTable.id, id)))[0];

describe('a draft in review', () => {
  it('must be built before it is submitted', async () => {
    const { id } = await wake.draft(wake.recipe([steady]));
    await expect(submit(id)).rejects.toMatchObject({ code: 'wrong-state', message: expect.stringMatching(/build it first/) });
  });

  it('goes to and fro: submitted, returned with a reason, changed, built, submitted again', async () => {
    const { id } = sound;
    expect((await submit(id, wake.modeler, 'Please look.')).state).toBe('submitted');
    await expect(wake.modeler.call(routes.putRecipe, { params: { draft: id }, body: { recipe: sound.recipe, version: sound.version } })).rejects.toMatchObject({ code: 'wrong-state' });
    await expect(wake.modeler.call(routes.buildDraft, { params: { draft: id } })).rejects.toMatchObject({ code: 'wrong-state' });
    expect((await giveBack(id, wake.keeper)).state).toBe('returned');
    await expect(giveBack(id, wake.keeper)).rejects.toMatchObject({ code: 'wrong-state' });
    const changed = await wake.modeler.call(routes.putRecipe, { params: { draft: id }, body: { recipe: wake.recipe([steady], { cast: { type: 'float64' } }), version: sound.version } });
    const { jobId } = await wake.modeler.call(routes.buildDraft, { params: { draft: id } });
    await wake.ended(jobId!);
    const again = await submit(id);
    expect(again).toMatchObject({ state: 'submitted', version: changed.version });
    expect(again.history.map((entry) => [entry.what, entry.by.name, entry.reason])).toEqual([
      ['began the draft', 'Ada Modeler', null], ['asked for a build', 'Ada Modeler', null], ['the matrix was built', 'Ada Modeler', null], ['submitted it for review', 'Ada Modeler', 'Please look.'],
      ['returned it', 'Grace Steward', 'The spacing is too coarse.'], ['changed the recipe', 'Ada Modeler', null], ['asked for a build', 'Ada Modeler', null], ['the matrix was built', 'Ada Modeler', null], ['submitted it for review', 'Ada Modeler', null],
    ]);
  });

  it('waits in every steward\'s list, with whether they may decide and why not', async () => {
    const listed = async (by: Person) => (await by.call(routes.listReviews)).drafts.find((each) => each.id === sound.id);
    expect(await listed(wake.keeper)).toMatchObject({ mayReview: true, whyNot: null });
    expect(await listed(wake.modeler)).toMatchObject({ mayReview: false, whyNot: expect.stringMatching(/you are one of its makers/) });
    const onlooker = await wake.app.makePerson({ [wake.campaign]: ['modeler'] });
    expect(await listed(onlooker)).toMatchObject({ mayReview: false, whyNot: expect.stringMatching(/only a steward/) });
    expect(await listed(await wake.app.makePerson())).toBeUndefined();
  });

  it('is not decided on by its maker, nor by who handed in what it contains, even as a steward', async () => {
    for (const maker of [wake.modeler, wake.contributor]) {
      await wake.app.founder.call(routes.putMember, { params: { campaign: wake.campaign, account: maker.id }, body: { roles: ['contributor', 'modeler', 'steward'] } });
      await expect(approve(sound.id, maker)).rejects.toMatchObject({ code: 'own-work' });
      await expect(giveBack(sound.id, maker)).rejects.toMatchObject({ code: 'own-work' });
    }
    const onlooker = await wake.app.makePerson({ [wake.campaign]: ['modeler'] });
    await expect(approve(sound.id, onlooker)).rejects.toMatchObject({ code: 'not-allowed' });
    expect(await rowOf(sound.id)).toMatchObject({ state: 'submitted', reviewedBy: null });
  });

  it('is not approved by its maker in the database either', async () => {
    const byHand = db().update(draftTable).set({ state: 'approved', reviewedBy: wake.modeler.id, reviewedAt: new Date() }).where(eq(draftTable.id, sound.id));
    await expect(byHand).rejects.toMatchObject({ cause: { constraint: 'draft_four_eyes' } });
    const makers = db().update(draftTable).set({ reviewedBy: wake.keeper.id, makers: [wake.keeper.id] }).where(eq(draftTable.id, sound.id));
    await expect(makers).rejects.toMatchObject({ cause: { constraint: 'draft_four_eyes' } });
  });

  it('that a steward returned and then changes is theirs from then on', async () => {
    const { id } = await wake.built(wake.recipe([steady]));
    await submit(id);
    await giveBack(id, wake.keeper);
    const { version } = await wake.modeler.call(routes.getDraft, { params: { draft: id } });
    await wake.keeper.call(routes.putRecipe, { params: { draft: id }, body: { recipe: wake.recipe([steady], { window: { first: 30 } }), version } });
    const { jobId } = await wake.modeler.call(routes.buildDraft, { params: { draft: id } });
    expect((await wake.ended(jobId!)).state).toBe('done');
    await submit(id);
    await expect(approve(id, wake.keeper)).rejects.toMatchObject({ code: 'own-work' });
    expect((await giveBack(id, wake.warden)).state).toBe('returned');
  });
});

describe('findings in the way', () => {
  it('a blocker that the recipe does not settle refuses the submission; dropping the snapshot settles it', async () => {
    const draft = await wake.built(wake.recipe([blemished], {}, ['p']));
    // The NaN is in u, which this recipe leaves out.
    expect((await findings(draft.id)).find((finding) => finding.id === 'value/non-finite')!.settledBy).toBe('select leaves u out');
    const { id } = await wake.draft(wake.recipe([blemished]));
    await wake.ended((await wake.modeler.call(routes.buildDraft, { params: { draft: id } })).jobId!);
    await expect(submit(id)).rejects.toMatchObject({ code: 'wrong-state' });
    const dropped = await wake.built(wake.recipe([blemished], { order: { drop: [{ archive: blemished, indices: [7] }] } }));
    expect((await findings(dropped.id)).find((finding) => finding.id === 'value/non-finite')!.settledBy).toMatch(/dropped/);
    expect((await submit(dropped.id)).state).toBe('submitted');
  });

  it('a blocker cannot be waived, and one that appears after the build refuses the submission', async () => {
    const archive = await wake.handIn('blemished');
    const { id } = await wake.built(wake.recipe([archive], {}, ['p']));
    const [blocker] = (await findings(id)).filter((finding) => finding.severity === 'blocker');
    await expect(wake.keeper.call(routes.waiveFinding, { params: { finding: blocker.findingId }, body: { reason: 'It does not matter.' } })).rejects.toMatchObject({ code: 'wrong-state', message: expect.stringMatching(/cannot be waived/) });
    // The campaign now asks for a parameter that no run has: param/missing, which no recipe settles.
    const { version, parameters } = await wake.app.founder.call(routes.getCampaign, { params: wake });
    await wake.app.founder.call(routes.updateCampaign, { params: wake, body: { version, parameters: [...parameters, { name: 'mach' }] } });
    const { jobId } = await wake.contributor.call(routes.recheckArchive, { params: { archive } });
    await wake.ended(jobId!);
    await expect(submit(id)).rejects.toMatchObject({ code: 'open-findings', message: expect.stringMatching(/param\/missing in blemished\.h5: .*A blocker must be repaired/) });
    const updated = await wake.app.founder.call(routes.getCampaign, { params: wake });
    await wake.app.founder.call(routes.updateCampaign, { params: wake, body: { version: updated.version, parameters } });
  });

  it('an open caution refuses the approval until it is waived with a reason, and again when the waiver is taken back', async () => {
    const { id } = await wake.built(wake.recipe([gap]));
    await submit(id);
    const open = (await findings(id)).filter((finding) => finding.severity === 'caution' && finding.settledBy === null);
    expect(open.map((finding) => finding.id)).toEqual(['time/gap']);
    await expect(approve(id, wake.keeper)).rejects.toMatchObject({ code: 'open-findings', message: expect.stringMatching(/time\/gap in gap\.h5: .*needs a remedy in the recipe or a waiver/) });
    const waiver = { params: { finding: open[0].findingId } };
    await expect(wake.keeper.call(routes.waiveFinding, { ...waiver, body: { reason: 'short' } })).rejects.toMatchObject({ code: 'invalid-input' });
    await wake.keeper.call(routes.waiveFinding, { ...waiver, body: { reason: 'The pump was changed then.' } });
    await wake.keeper.call(routes.revokeWaiver, waiver);
    await expect(approve(id, wake.keeper)).rejects.toMatchObject({ code: 'open-findings' });
    await wake.keeper.call(routes.waiveFinding, { ...waiver, body: { reason: 'The pump was changed then.' } });
    const approved = await approve(id, wake.keeper);
    expect((await wake.ended(approved.jobId!)).state).toBe('done');
    const release = await wake.modeler.call(routes.getRelease, { params: { ...wake, version: 1 } });
    expect(release).toMatchObject({ draft: id, waivers: [{ check: 'time/gap', reason: 'The pump was changed then.', by: { name: 'Grace Steward' } }], approvedBy: { name: 'Grace Steward' }, builtBy: { name: 'Ada Modeler' } });
    const [entry] = await db().select().from(auditLog).where(and(eq(auditLog.objectId, id), eq(auditLog.action, 'draft.approve')));
    expect(entry).toMatchObject({ actorName: 'Grace Steward', before: { state: 'submitted' }, after: { state: 'approved', licence: 'CC-BY-4.0' }, reason: 'As planned.' });
  });

  it('a caution of the draft itself keeps its waiver when the same thing is built again', async () => {
    const recipe = wake.recipe([steady], { weigh: { space: 'none' } });
    const draft = await wake.built(recipe);
    const own = async () => (await findings(draft.id)).filter((finding) => finding.archive === null);
    expect(await own()).toMatchObject([{ id: 'grid/uneven', severity: 'caution', state: 'open', settledBy: null }]);
    await wake.keeper.call(routes.waiveFinding, { params: { finding: (await own())[0].findingId }, body: { reason: 'The grid hardly varies.' } });
    await wake.ended((await wake.modeler.call(routes.buildDraft, { params: { draft: draft.id } })).jobId!);
    expect(await own()).toMatchObject([{ state: 'waived', waiver: { reason: 'The grid hardly varies.' } }]);
    const { version } = await wake.modeler.call(routes.getDraft, { params: { draft: draft.id } });
    await wake.modeler.call(routes.putRecipe, { params: { draft: draft.id }, body: { recipe: wake.recipe([steady]), version } });
    await wake.ended((await wake.modeler.call(routes.buildDraft, { params: { draft: draft.id } })).jobId!);
    expect(await own()).toEqual([]);
  });

  it('a source that was withdrawn after the build refuses the submission', async () => {
    const archive = await wake.handIn('steady');
    const { id } = await wake.built(wake.recipe([archive]));
    await wake.keeper.call(routes.withdrawArchive, { params: { archive }, body: { reason: 'The solver had a bug.' } });
    await expect(submit(id)).rejects.toMatchObject({ code: 'open-findings', message: expect.stringMatching(/source steady\.h5 is withdrawn: take it out/) });
  });
});

describe('an approval whose release could not be made', () => {
  it('is given again', async () => {
    const { id } = await wake.built(wake.recipe([steady], { window: { first: 20 } }));
    await submit(id);
    await wake.stopWorker();
    const { jobId } = await approve(id, wake.warden);
    await expect(approve(id, wake.warden)).rejects.toMatchObject({ code: 'wrong-state' });
    await db().update(jobTable).set({ state: 'failed' }).where(eq(jobTable.id, jobId!));
    expect((await wake.keeper.call(routes.listReviews)).drafts.find((each) => each.id === id)).toMatchObject({ state: 'approved', mayReview: true });
    const again = await approve(id, wake.keeper);
    expect(again.jobId).not.toBe(jobId);
    expect(await rowOf(id)).toMatchObject({ state: 'approved', reviewedBy: wake.keeper.id });
  });
});
