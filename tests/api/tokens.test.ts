/** Personal tokens: scope, campaign, expiry, revocation. */
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { routes } from '#contract/routes.ts';
import { auditLog, token } from '../../server/db/schema/index.ts';
import { createTestApp, type Person, type TestApp } from '../setup/app.ts';

let app: TestApp;
let here: string, there: string;
let steward: Person;
beforeAll(async () => {
  app = await createTestApp();
  here = (await app.makeCampaign()).slug;
  there = (await app.makeCampaign()).slug;
  steward = await app.makePerson({ [here]: ['steward'], [there]: ['steward'] });
});
afterAll(() => app.close());

const announced = { run: 'run 1', files: [{ name: 'a.h5', bytes: 100 }] };

describe('a personal token', () => {
  it('reads as its owner does', async () => {
    const reader = await app.makeToken(steward, { scopes: ['read'] });
    expect((await reader.call(routes.getMe)).user.id).toBe(steward.id);
    expect((await reader.call(routes.listCampaigns)).campaigns.map((each) => each.slug).sort()).toEqual([here, there].sort());
  });

  it('without the scope is refused in words', async () => {
    const reader = await app.makeToken(steward, { scopes: ['read'] });
    const refused = await reader.send(routes.createDelivery, { params: { campaign: here }, body: announced });
    expect(refused.body).toMatchObject({ status: 403, code: 'token-scope', details: { needed: 'hand-in' } });
    expect(refused.body.detail).toContain('hand-in');
    const sender = await app.makeToken(steward, { scopes: ['hand-in'] });
    expect((await sender.send(routes.createDelivery, { params: { campaign: here }, body: announced })).status).toBe(201);
  });

  it('for one campaign opens no other', async () => {
    const elsewhere = await app.makeToken(steward, { scopes: ['read', 'pull', 'hand-in'], campaign: there });
    expect((await elsewhere.call(routes.listCampaigns)).campaigns.map((each) => each.slug)).toEqual([there]);
    expect((await elsewhere.send(routes.getCampaign, { params: { campaign: here } })).body).toMatchObject({ status: 403, code: 'token-scope' });
    expect((await elsewhere.send(routes.createDelivery, { params: { campaign: here }, body: announced })).body).toMatchObject({ status: 403, code: 'token-scope' });
    expect((await elsewhere.send(routes.getCampaign, { params: { campaign: there } })).status).toBe(200);
  });

  it('gives no more than the roles its owner holds at the moment', async () => {
    const person = await app.makePerson({ [here]: ['contributor'] });
    const sender = await app.makeToken(person, { scopes: ['hand-in'] });
    await app.founder.call(routes.removeMember, { params: { campaign: here, account: person.id } });
    expect((await sender.send(routes.createDelivery, { params: { campaign: here }, body: announced })).status).toBe(403);
  });

  it('cannot do what takes a session: make tokens, change campaigns', async () => {
    const all = await app.makeToken(app.founder, { scopes: ['read', 'pull', 'hand-in'] });
    expect((await all.send(routes.createToken, { body: { name: 'more', scopes: ['read'] } })).body).toMatchObject({ status: 403, code: 'token-scope' });
    expect((await all.send(routes.updateCampaign, { params: { campaign: here }, body: { version: 1, title: 'Taken' } })).body).toMatchObject({ status: 403, code: 'token-scope' });
  });

  it('that has expired says when', async () => {
    const reader = await app.makeToken(steward, { scopes: ['read'], days: 1 });
    await app.parts.db.update(token).set({ expiresAt: new Date('2026-01-31T12:00:00Z') }).where(eq(token.id, reader.id));
    const refused = await reader.send(routes.getMe);
    expect(refused.body).toMatchObject({ status: 401, code: 'session-expired' });
    expect(refused.body.detail).toContain('2026-01-31');
  });

  it('that was revoked or never was is not known', async () => {
    const reader = await app.makeToken(steward, { scopes: ['read'] });
    await steward.call(routes.revokeToken, { params: { token: reader.id } });
    expect((await reader.send(routes.getMe)).body).toMatchObject({ status: 401, code: 'not-signed-in' });
    expect((await steward.call(routes.listTokens)).tokens.map((each) => each.id)).not.toContain(reader.id);
    expect((await steward.send(routes.revokeToken, { params: { token: reader.id } })).status).toBe(404);
    expect((await app.visitor({ authorization: 'Bearer pw_nothing' }).send(routes.getMe)).body).toMatchObject({ status: 401, code: 'not-signed-in' });
    expect((await app.visitor({ authorization: 'Basic eDp5' }).send(routes.getMe)).body).toMatchObject({ status: 401, code: 'not-signed-in' });
  });

  it('of somebody else cannot be revoked', async () => {
    const reader = await app.makeToken(steward, { scopes: ['read'] });
    expect((await app.founder.send(routes.revokeToken, { params: { token: reader.id } })).status).toBe(404);
    expect((await app.founder.send(routes.revokeToken, { params: { token: 'not-an-id' } })).status).toBe(404);
    expect((await reader.send(routes.getMe)).status).toBe(200);
  });

  it('is kept as a hash only, and its making is recorded', async () => {
    const { secret, id } = await app.makeToken(steward, { scopes: ['read'], campaign: here });
    expect(secret).toMatch(/^pw_[\w-]{43}$/);
    const [row] = await app.parts.db.select().from(token).where(eq(token.id, id));
    expect(row.start).toBe(secret.slice(0, 8));
    const entries = await app.parts.db.select().from(auditLog).where(eq(auditLog.objectId, id));
    expect(entries).toMatchObject([{ action: 'token.create', actorId: steward.id, after: { scopes: ['read'] } }]);
    expect(JSON.stringify([row, entries, (await steward.call(routes.listTokens)).tokens])).not.toContain(secret);
  });

  it('remembers when it was last used', async () => {
    const reader = await app.makeToken(steward, { scopes: ['read'] });
    const lastUse = async () => (await steward.call(routes.listTokens)).tokens.find((each) => each.id === reader.id)!.lastUsedAt;
    expect(await lastUse()).toBeNull();
    await reader.call(routes.getMe);
    expect(Date.now() - Date.parse((await lastUse())!)).toBeLessThan(60_000);
  });

  it('needs no cookie and no origin, and is refused none', async () => {
    const sender = await app.makeToken(steward, { scopes: ['hand-in'] });
    expect((await sender.send(routes.createDelivery, { params: { campaign: here }, body: { ...announced, run: 'run 2' } }).set('origin', 'https://elsewhere.example')).status).toBe(201);
  });
});
