/** Jobs, the desk and storage, as people see them. */
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Campaign } from '#contract/campaign.ts';
import { routes } from '#contract/routes.ts';
import { archive, auditLog, delivery, job, run } from '../../server/db/schema/index.ts';
import { createTestApp, unique, type Person, type TestApp } from '../setup/app.ts';

let app: TestApp;
let here: Campaign, there: Campaign;
let contributor: Person, steward: Person, modeler: Person, stranger: Person;
beforeAll(async () => {
  app = await createTestApp();
  [here, there] = [await app.makeCampaign({ title: 'Here' }), await app.makeCampaign({ title: 'There' })];
  contributor = await app.makePerson({ [here.slug]: ['contributor'] });
  steward = await app.makePerson({ [here.slug]: ['steward'] });
  modeler = await app.makePerson({ [here.slug]: ['modeler'] });
  stranger = await app.makePerson({ [there.slug]: ['steward'] });
});
afterAll(() => app.close());

/** An archive that waits for its check: no worker runs here. */
async function queuedCheck(): Promise<{ archive: string; job: string }> {
  const { db, queue } = app.parts;
  const name = unique('run');
  return db.transaction(async (tx) => {
    const [its] = await tx.insert(run).values({ campaignId: here.id, name }).returning();
    const [from] = await tx.insert(delivery).values({ campaignId: here.id, run: name, state: 'complete', createdBy: contributor.id, expiresAt: new Date() }).returning();
    const [made] = await tx.insert(archive).values({ campaignId: here.id, runId: its.id, deliveryId: from.id, name: 'a.h5', bytes: 1000, createdBy: contributor.id }).returning();
    const id = await queue.enqueue(tx, { kind: 'check', subjectType: 'archive', subjectId: made.id, label: `Check of ${name}`, campaignId: here.id, createdBy: contributor.id });
    return { archive: made.id, job: id };
  });
}

describe('a job', () => {
  it('is seen by the members of its campaign and by nobody else', async () => {
    const { job: id } = await queuedCheck();
    for (const member of [contributor, steward, modeler]) {
      expect(await member.call(routes.getJob, { params: { job: id } })).toMatchObject({ id, state: 'queued', campaign: here.slug, createdBy: { id: contributor.id } });
      expect((await member.call(routes.listJobs, { query: { campaign: here.slug, state: 'queued' } })).jobs.map((each) => each.id)).toContain(id);
    }
    expect((await stranger.send(routes.getJob, { params: { job: id } })).status).toBe(404);
    expect((await stranger.call(routes.listJobs)).jobs).toEqual([]);
    expect((await contributor.send(routes.getJob, { params: { job: here.id } })).status).toBe(404);
  });

  it('shows rate and time left while it runs', async () => {
    const { job: id } = await queuedCheck();
    await app.parts.db.update(job).set({ state: 'running', startedAt: new Date(Date.now() - 10_000), done: 1000, total: 4000 }).where(eq(job.id, id));
    const shown = await contributor.call(routes.getJob, { params: { job: id } });
    expect(shown.rate! / 100).toBeCloseTo(1, 0);
    expect(shown.secondsLeft! / 30).toBeCloseTo(1, 0);
  });

  it.each(['queued', 'running'] as const)('that is %s can be cancelled once, by whom it belongs to or a steward, with a trace', async (state) => {
    const { job: id } = await queuedCheck();
    await app.parts.db.update(job).set({ state }).where(eq(job.id, id));
    expect((await modeler.send(routes.cancelJob, { params: { job: id } })).status).toBe(403);
    expect((await stranger.send(routes.cancelJob, { params: { job: id } })).status).toBe(404);
    const who = state === 'queued' ? contributor : steward;
    expect(await who.call(routes.cancelJob, { params: { job: id } })).toMatchObject({ state: 'cancelled' });
    expect((await who.send(routes.cancelJob, { params: { job: id } })).body).toMatchObject({ status: 409, code: 'wrong-state' });
    expect(await app.parts.db.select().from(auditLog).where(eq(auditLog.objectId, id))).toMatchObject([{ action: 'job.cancel', actorId: who.id, before: { state }, after: { state: 'cancelled' } }]);
  });

  it('of a state that there is not is an empty list or a refusal, never a fault', async () => {
    expect((await contributor.send(routes.listJobs, { query: { state: 'asleep' } })).status).toBeLessThan(500);
  });
});

describe('the desk', () => {
  it('shows what waits for the person, and nothing of other campaigns', async () => {
    const { archive: id } = await queuedCheck();
    const announced = await contributor.call(routes.createDelivery, { params: { campaign: here.slug }, body: { run: unique('run'), files: [{ name: 'b.h5', bytes: 10 }] } });
    const desk = await contributor.call(routes.getDesk);
    expect(desk.archives.map((each) => each.id)).toContain(id);
    expect(desk.deliveries.map((each) => each.id)).toEqual([announced.id]);
    expect(desk.jobs.length).toBeGreaterThan(0);
    expect(desk.recent).toEqual([]);
    expect((await steward.call(routes.getDesk)).recent.length).toBeGreaterThan(0);
    expect((await steward.call(routes.getDesk)).deliveries).toEqual([]);
    const elsewhere = await stranger.call(routes.getDesk);
    expect(JSON.stringify(elsewhere)).not.toContain(here.id);
    expect({ ...elsewhere, recent: [] }).toEqual({ reviews: [], returned: [], drafts: [], archives: [], deliveries: [], jobs: [], recent: [] });
    expect(await (await app.makePerson()).call(routes.getDesk)).toMatchObject({ archives: [], jobs: [], recent: [] });
  });
});

describe('storage', () => {
  it('is counted by campaign and as a whole', async () => {
    await queuedCheck();
    const used = (await app.founder.call(routes.getCampaign, { params: { campaign: here.slug } })).usedBytes;
    expect(used).toBeGreaterThanOrEqual(1000);
    expect(used % 1000).toBe(0);
    const before = await app.founder.call(routes.getStorage);
    expect(before.campaigns.find((each) => each.campaign === here.slug)).toMatchObject({ usedBytes: used, quotaBytes: here.quotaBytes });
    await app.parts.storage.put(new Uint8Array(777));
    const after = await app.founder.call(routes.getStorage);
    expect([after.objects - before.objects, after.bytes - before.bytes]).toEqual([1, 777]);
    expect(after.freeBytes).toBeGreaterThan(0);
  });
});
