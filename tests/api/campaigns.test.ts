/** Campaigns, their settings and their members. */
import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { routes } from '#contract/routes.ts';
import { auditLog } from '../../server/db/schema/index.ts';
import { createTestApp, unique, type TestApp } from '../setup/app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await createTestApp();
});
afterAll(() => app.close());

const entries = (objectId: string, action: string) => app.parts.db.select().from(auditLog).where(and(eq(auditLog.objectId, objectId), eq(auditLog.action, action))).orderBy(auditLog.seq);

describe('a campaign', () => {
  it('keeps fields with units and limits, parameters with ranges, thresholds and quota', async () => {
    const input = {
      title: 'Jet', description: 'A round jet.', quotaBytes: 5 * 2 ** 30,
      fields: [{ name: 'u', unit: 'm/s', min: -5, max: 5, required: true }, { name: 'p', unit: null, min: null, max: null, required: false }],
      parameters: [{ name: 're', unit: null, min: 100, max: 2000 }],
      policy: { thresholds: { 'time/gap': { factor: 4 } } },
      handlingLabel: 'internal', contact: 'A. Person', licence: 'CC-BY-4.0',
    };
    const made = await app.makeCampaign(input);
    expect(await app.founder.call(routes.getCampaign, { params: { campaign: made.slug } })).toMatchObject({ ...input, version: 1, usedBytes: 0, myRoles: ['administrator'] });
    expect(await entries(made.id, 'campaign.open')).toMatchObject([{ actorId: app.founder.id, campaignId: made.id, before: null, after: { title: 'Jet' } }]);
  });

  it('has a short name of its own', async () => {
    const { slug } = await app.makeCampaign();
    const refused = await app.founder.send(routes.createCampaign, { body: { slug, title: 'Again' } });
    expect(refused.body).toMatchObject({ status: 409, code: 'conflict' });
    expect(refused.body.detail).toContain(slug);
  });

  it('is changed from the version that was read, by one of two who changed it', async () => {
    const made = await app.makeCampaign({ title: 'Before' });
    const change = (title: string) => app.founder.send(routes.updateCampaign, { params: { campaign: made.slug }, body: { version: made.version, title, reason: `because of ${title}` } });
    const [first, second] = await Promise.all([change('One'), change('Two')]);
    expect([first.status, second.status].sort()).toEqual([200, 409]);
    const refused = first.status === 409 ? first : second;
    expect(refused.body).toMatchObject({ code: 'stale-version' });
    const kept = await app.founder.call(routes.getCampaign, { params: { campaign: made.slug } });
    expect(kept.version).toBe(2);
    expect(await entries(made.id, 'campaign.update')).toMatchObject([{ before: { title: 'Before' }, after: { title: kept.title }, reason: `because of ${kept.title}` }]);
  });

  it('keeps every setting that a change does not name', async () => {
    const settings = { description: 'A jet.', quotaBytes: 5 * 2 ** 30, fields: [{ name: 'u', unit: 'm/s', min: null, max: null, required: true }], policy: { thresholds: { 'time/gap': { ratio: 4 } } }, handlingLabel: 'confidential', contact: 'A. Person', licence: 'CC-BY-4.0' };
    const made = await app.makeCampaign(settings);
    const changed = await app.founder.call(routes.updateCampaign, { params: { campaign: made.slug }, body: { version: made.version, title: 'Renamed' } });
    expect(changed).toMatchObject({ ...settings, title: 'Renamed' });
    expect((await entries(made.id, 'campaign.update'))[0].after).toEqual({ title: 'Renamed' });
  });

  it.each([
    ['a field that is there twice', { fields: [{ name: 'u' }, { name: 'u' }] }, 'u'],
    ['limits the wrong way round', { fields: [{ name: 'u', min: 2, max: 1 }] }, 'lower limit'],
    ['a range the wrong way round', { parameters: [{ name: 're', min: 2, max: 1 }] }, 'starts above'],
    ['no title', { title: ' ' }, 'name'],
    ['a negative quota', { quotaBytes: -1 }, 'quotaBytes'],
  ])('is refused with %s', async (_, change, words) => {
    const refused = await app.founder.send(routes.createCampaign, { body: { slug: unique('campaign'), title: 'A campaign', ...change } });
    expect(refused.body).toMatchObject({ status: 400, code: 'invalid-input' });
    expect(refused.body.detail).toContain(words);
  });

  it('that one is no member of is not there', async () => {
    const { slug, id } = await app.makeCampaign({ title: 'Secret title' });
    const stranger = await app.makePerson();
    const hidden = await stranger.send(routes.getCampaign, { params: { campaign: slug } });
    const missing = await stranger.send(routes.getCampaign, { params: { campaign: unique('nothing') } });
    expect([hidden.status, missing.status]).toEqual([404, 404]);
    expect(hidden.body.code).toBe(missing.body.code);
    expect(hidden.text).not.toContain('Secret title');
    expect(hidden.text).not.toContain(id);
    expect((await stranger.call(routes.listCampaigns)).campaigns).toEqual([]);
  });
});

describe('members', () => {
  it('get, change and lose roles at once, each with an entry', async () => {
    const { slug, id } = await app.makeCampaign();
    const person = await app.makePerson({}, 'Newcomer');
    const params = { campaign: slug, account: person.id };
    expect((await person.send(routes.getCampaign, { params })).status).toBe(404);
    expect(await app.founder.call(routes.putMember, { params, body: { roles: ['modeler'] } })).toMatchObject({ person: { name: 'Newcomer' }, roles: ['modeler'] });
    expect((await person.send(routes.getCampaign, { params })).body).toMatchObject({ myRoles: ['modeler'] });
    await app.founder.call(routes.putMember, { params, body: { roles: ['steward', 'modeler'] } });
    expect((await app.founder.call(routes.listMembers, { params })).members.find((each) => each.person.id === person.id)?.roles.sort()).toEqual(['modeler', 'steward']);
    await app.founder.call(routes.removeMember, { params });
    expect((await person.send(routes.getCampaign, { params })).status).toBe(404);
    expect((await app.founder.send(routes.removeMember, { params })).status).toBe(404);
    const log = await app.parts.db.select().from(auditLog).where(and(eq(auditLog.objectType, 'member'), eq(auditLog.objectId, person.id))).orderBy(auditLog.seq);
    expect(log.map((row) => [row.action, row.campaignId, row.before, row.after])).toEqual([
      ['member.add', id, { roles: [] }, { roles: ['modeler'] }],
      ['member.change-roles', id, { roles: ['modeler'] }, { roles: ['steward', 'modeler'] }],
      ['member.remove', id, { roles: ['modeler', 'steward'] }, null],
    ]);
  });

  it('keep the day since when they are members when their roles change', async () => {
    const { slug } = await app.makeCampaign();
    const person = await app.makePerson({ [slug]: ['modeler'] });
    const since = async () => (await app.founder.call(routes.listMembers, { params: { campaign: slug } })).members.find((each) => each.person.id === person.id)!.since;
    const before = await since();
    await app.founder.call(routes.putMember, { params: { campaign: slug, account: person.id }, body: { roles: ['modeler', 'steward'] } });
    expect(await since()).toBe(before);
  });

  it('are set by two administrators at the same time without harm', async () => {
    const { slug } = await app.makeCampaign();
    const person = await app.makePerson();
    const params = { campaign: slug, account: person.id };
    const answers = await Promise.all(Array.from({ length: 8 }, (_, i) => app.founder.send(routes.putMember, { params, body: { roles: i % 2 ? ['modeler'] : ['modeler', 'steward'] } })));
    expect(answers.map((answer) => answer.status)).toEqual(Array(8).fill(200));
  });

  it('must have an account', async () => {
    const { slug } = await app.makeCampaign();
    expect((await app.founder.send(routes.putMember, { params: { campaign: slug, account: 'nobody' }, body: { roles: ['modeler'] } })).status).toBe(404);
  });
});

describe('roles in the organisation', () => {
  it('hold in every campaign, and are given by its administrator', async () => {
    const { slug } = await app.makeCampaign();
    const person = await app.makePerson();
    await app.founder.call(routes.updateAccount, { params: { account: person.id }, body: { roles: ['auditor'] } });
    expect((await person.send(routes.getCampaign, { params: { campaign: slug } })).status).toBe(200);
    expect((await person.send(routes.verifyAudit)).status).toBe(200);
    expect((await person.send(routes.updateAccount, { params: { account: person.id }, body: { roles: ['administrator'] } })).status).toBe(403);
    expect(await entries(person.id, 'account.update')).toMatchObject([{ before: { roles: [] }, after: { roles: ['auditor'] } }]);
  });
});

describe('the catalogue of checks', () => {
  it('names each check with its source and thresholds', async () => {
    const { checks } = await (await app.makePerson()).call(routes.listChecks);
    expect(checks.length).toBeGreaterThan(20);
    expect(new Set(checks.map((each) => each.id)).size).toBe(checks.length);
    for (const check of checks) expect(check.source.length, check.id).toBeGreaterThan(0);
  });
});
