/** Signing in and out, sessions, passwords; and what of it the audit log keeps. */
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { routes } from '#contract/routes.ts';
import { auditLog, session, user } from '../../server/db/schema/index.ts';
import { createTestApp, unique, type TestApp } from '../setup/app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await createTestApp();
});
afterAll(() => app.close());

const actionsOn = async (label: string) => (await app.parts.db.select().from(auditLog).where(eq(auditLog.label, label)).orderBy(auditLog.seq)).map((row) => row.action);
const trySignIn = (email: string, password: string) => app.visitor().http.post('/api/auth/sign-in/email').send({ email, password });

describe('sign-in', () => {
  it('opens a session that scripts cannot read and other sites do not send', async () => {
    const account = await app.makeAccountFor();
    const response = await trySignIn(account.email, account.password);
    expect(response.status).toBe(200);
    const [cookie] = response.get('Set-Cookie')!;
    expect(cookie).toMatch(/^pennyweight\.session_token=/);
    expect(cookie).toMatch(/HttpOnly/i);
    expect(cookie).toMatch(/SameSite=Lax/i);
  });

  it('is recorded, refused or not, and so is signing out', async () => {
    const account = await app.makeAccountFor();
    const refused = await trySignIn(account.email, 'not the password');
    expect(refused.headers['content-type']).toContain('application/problem+json');
    expect(refused.body).toMatchObject({ status: 401, code: 'not-signed-in' });
    const person = await app.signIn(account);
    expect((await person.http.post('/api/auth/sign-out').send({})).status).toBe(200);
    expect(await actionsOn(account.email)).toEqual(['account.create', 'account.sign-in-refused', 'account.sign-in', 'account.sign-out']);
    expect((await person.send(routes.getMe)).body).toMatchObject({ status: 401, code: 'not-signed-in' });
  });

  it('tells an unknown address and a wrong password apart by nothing', async () => {
    const account = await app.makeAccountFor();
    const wrong = await trySignIn(account.email, 'not the password');
    const unknown = await trySignIn(`${unique('nobody')}@example.org`, 'not the password');
    expect(unknown.status).toBe(wrong.status);
    expect({ ...unknown.body, requestId: '' }).toEqual({ ...wrong.body, requestId: '' });
  });

  it('cannot make accounts: that takes an invitation', async () => {
    const response = await app.visitor().http.post('/api/auth/sign-up/email').send({ email: `${unique('new')}@example.org`, password: 'a long enough password', name: 'New' });
    expect(response.status).toBeGreaterThanOrEqual(400);
    expect(await app.parts.db.select().from(user).where(eq(user.name, 'New'))).toEqual([]);
  });

  it('is refused from another site', async () => {
    const account = await app.makeAccountFor();
    const response = await app.visitor({ origin: 'https://elsewhere.example', cookie: 'pennyweight.session_token=x' }).http.post('/api/auth/sign-in/email').send({ email: account.email, password: account.password });
    expect(response.status).toBe(403);
  });
});

describe('a session', () => {
  it('that has expired is told from none at all', async () => {
    const person = await app.makePerson();
    await app.parts.db.update(session).set({ expiresAt: new Date(Date.now() - 1000) }).where(eq(session.userId, person.id));
    expect((await person.send(routes.getMe)).body).toMatchObject({ status: 401, code: 'session-expired' });
    expect((await app.visitor().send(routes.getMe)).body).toMatchObject({ status: 401, code: 'not-signed-in' });
  });

  it('with a forged cookie is none', async () => {
    const forged = app.visitor({ cookie: `pennyweight.session_token=${'a'.repeat(32)}.${'b'.repeat(44)}` });
    expect((await forged.send(routes.getMe)).body).toMatchObject({ status: 401, code: 'session-expired' });
  });

  it('changes nothing for a page of another site', async () => {
    const person = await app.makePerson();
    const order = { body: { name: 'token', scopes: ['read' as const] } };
    expect((await person.send(routes.createToken, order).set('origin', 'https://elsewhere.example')).body).toMatchObject({ status: 403, code: 'not-allowed' });
    expect((await person.send(routes.createToken, order).set('sec-fetch-site', 'cross-site')).body).toMatchObject({ status: 403, code: 'not-allowed' });
    expect((await person.send(routes.createToken, order).set('sec-fetch-site', 'same-origin')).status).toBe(201);
  });
});

describe('a closed account', () => {
  it('loses its sessions and tokens, cannot sign in, and comes back when it is opened again', async () => {
    const person = await app.makePerson();
    const token = await app.makeToken(person, { scopes: ['read'] });
    expect((await token.send(routes.getMe)).status).toBe(200);
    await app.founder.call(routes.updateAccount, { params: { account: person.id }, body: { active: false } });
    expect((await person.send(routes.getMe)).status).toBe(401);
    expect((await token.send(routes.getMe)).body).toMatchObject({ status: 401, code: 'not-signed-in' });
    const refused = await trySignIn(person.email, person.password);
    expect(refused.status).toBe(403);
    expect(refused.get('Set-Cookie') ?? []).toEqual([]);
    await app.founder.call(routes.updateAccount, { params: { account: person.id }, body: { active: true } });
    expect((await person.send(routes.getMe)).status).toBe(401);
    await app.signIn(person);
    const rows = await app.parts.db.select().from(auditLog).where(eq(auditLog.objectId, person.id));
    const closing = rows.find((row) => row.action === 'account.update');
    expect(closing).toMatchObject({ actorId: app.founder.id, before: { active: true }, after: { active: false } });
  });

  it('is not one’s own: there is always an administrator left', async () => {
    const refused = await app.founder.send(routes.updateAccount, { params: { account: app.founder.id }, body: { active: false } });
    expect(refused.body).toMatchObject({ status: 403, code: 'own-work' });
  });
});

describe('a forgotten password', () => {
  const request = (email: string) => app.visitor().http.post('/api/auth/request-password-reset').send({ email, redirectTo: '/reset' });
  const reset = (token: string, newPassword: string) => app.visitor().http.post('/api/auth/reset-password').send({ token, newPassword });
  const tokenIn = (link: string) => new URL(link).searchParams.get('token')!;

  it('is set anew by a letter, once; open sessions end', async () => {
    const person = await app.makePerson();
    expect((await request(person.email)).status).toBe(200);
    const letter = await app.letterTo(person.email);
    expect(letter.links).toHaveLength(1);
    expect(letter.links[0].startsWith(`${app.url}/reset?token=`)).toBe(true);
    const token = tokenIn(letter.links[0]);

    expect((await reset(token, 'too short')).body).toMatchObject({ status: 400, detail: expect.stringContaining('12 characters') });
    expect((await reset(token, 'another long password')).status).toBe(200);
    expect((await reset(token, 'and yet another password')).body).toMatchObject({ status: 400, detail: expect.stringContaining('used already') });

    expect((await person.send(routes.getMe)).status).toBe(401);
    expect((await trySignIn(person.email, person.password)).status).toBe(401);
    await app.signIn({ email: person.email, password: 'another long password' });
    expect(await actionsOn(person.email)).toEqual(['account.create', 'account.sign-in', 'account.password-reset-requested', 'account.password-reset', 'account.sign-in-refused', 'account.sign-in']);
  });

  it('does not tell whether an address has an account', async () => {
    const account = await app.makeAccountFor();
    const [known, unknown] = [await request(account.email), await request(`${unique('nobody')}@example.org`)];
    expect(unknown.status).toBe(known.status);
    expect(unknown.body).toEqual(known.body);
  });

  it('does not open a closed account', async () => {
    const account = await app.makeAccountFor();
    await app.founder.call(routes.updateAccount, { params: { account: account.id }, body: { active: false } });
    await request(account.email);
    const letter = app.parts.inbox!.messages().find((each) => each.to === account.email);
    if (letter) await reset(tokenIn(letter.links[0]), 'another long password');
    expect((await trySignIn(account.email, 'another long password')).status).not.toBe(200);
  });
});
