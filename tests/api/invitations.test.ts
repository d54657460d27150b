/** Invitations: one use, seven days, by letter; the secret is nowhere but in the letter. */
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { MemberRole } from '#contract/access.ts';
import { routes } from '#contract/routes.ts';
import { auditLog, invitation } from '../../server/db/schema/index.ts';
import { createTestApp, unique, type TestApp, type Visitor } from '../setup/app.ts';

const password = 'a long enough password';
let app: TestApp;
beforeAll(async () => {
  app = await createTestApp();
});
afterAll(() => app.close());

async function invite(by: Visitor, campaign: string | null, roles: MemberRole[], email = `${unique('guest')}@example.org`) {
  const made = await by.call(routes.createInvitation, { body: { email, campaign, roles } });
  const letter = await app.letterTo(email);
  return { ...made, letter, secret: new URL(letter.links[0]).pathname.split('/').at(-1)! };
}
const accept = (secret: string, name = 'Guest') => app.visitor().send(routes.acceptInvitation, { params: { secret }, body: { name, password } });
const rolesIn = async (email: string) => (await app.founder.call(routes.listAccounts)).accounts.find((each) => each.email === email)?.roles ?? null;

describe('an invitation', () => {
  it('makes an account with its roles, once', async () => {
    const campaign = await app.makeCampaign({ title: 'Wake of a plate' });
    const sent = await invite(app.founder, campaign.slug, ['contributor', 'modeler']);
    expect(sent.state).toBe('open');
    expect(Date.parse(sent.expiresAt) - Date.parse(sent.createdAt)).toBeCloseTo(7 * 24 * 3600 * 1000, -4);
    expect(sent.letter.links[0]).toBe(`${app.url}/join/${sent.secret}`);
    expect(sent.letter.text).toContain('Wake of a plate');

    const view = await app.visitor().call(routes.viewInvitation, { params: { secret: sent.secret } });
    expect(view).toMatchObject({ email: sent.email, campaign: 'Wake of a plate', roles: ['contributor', 'modeler'], invitedBy: 'Founder', hasAccount: false });

    expect((await accept(sent.secret)).status).toBe(201);
    const guest = await app.signIn({ email: sent.email, password });
    const me = await guest.call(routes.getMe);
    expect(me.roles.map(({ campaign: slug, role }) => [slug, role]).sort()).toEqual([[campaign.slug, 'contributor'], [campaign.slug, 'modeler']]);

    const again = await accept(sent.secret);
    expect(again.body).toMatchObject({ status: 409, code: 'wrong-state' });
    const entries = await app.parts.db.select().from(auditLog).where(eq(auditLog.label, sent.email)).orderBy(auditLog.seq);
    expect(entries.map((row) => row.action)).toEqual(['invitation.create', 'account.create', 'invitation.accept', 'account.sign-in']);
  });

  it('is kept as a hash only', async () => {
    const sent = await invite(app.founder, null, ['auditor']);
    const [row] = await app.parts.db.select().from(invitation).where(eq(invitation.id, sent.id));
    const kept = JSON.stringify([row, await app.parts.db.select().from(auditLog)]);
    expect(sent.secret.length).toBeGreaterThanOrEqual(43);
    expect(kept).not.toContain(sent.secret);
  });

  it('cannot be used by two at the same moment', async () => {
    const sent = await invite(app.founder, null, ['auditor']);
    const answers = await Promise.all([1, 2, 3, 4].map(() => accept(sent.secret)));
    expect(answers.map((answer) => answer.status).sort()).toEqual([201, 409, 409, 409]);
  });

  it('is void after seven days', async () => {
    const sent = await invite(app.founder, null, ['auditor']);
    await app.parts.db.update(invitation).set({ expiresAt: new Date(Date.now() - 1000) }).where(eq(invitation.id, sent.id));
    const refused = await accept(sent.secret);
    expect(refused.body).toMatchObject({ status: 409, code: 'wrong-state' });
    expect(refused.body.detail).toContain('expired');
    expect(await rolesIn(sent.email)).toBeNull();
    const { invitations } = await app.founder.call(routes.listInvitations);
    expect(invitations.find((each) => each.id === sent.id)?.state).toBe('expired');
  });

  it('can be taken back, with a trace', async () => {
    const sent = await invite(app.founder, null, ['auditor']);
    await app.founder.call(routes.revokeInvitation, { params: { invitation: sent.id } });
    expect((await accept(sent.secret)).body).toMatchObject({ code: 'wrong-state' });
    expect((await app.founder.send(routes.revokeInvitation, { params: { invitation: sent.id } })).body).toMatchObject({ code: 'wrong-state' });
    const entries = await app.parts.db.select().from(auditLog).where(eq(auditLog.objectId, sent.id)).orderBy(auditLog.seq);
    expect(entries.map((row) => row.action)).toEqual(['invitation.create', 'invitation.revoke']);
  });

  it('with an unknown secret is not found', async () => {
    expect((await app.visitor().send(routes.viewInvitation, { params: { secret: 'x'.repeat(43) } })).body).toMatchObject({ status: 404, code: 'not-found' });
    expect((await accept('x'.repeat(43))).body).toMatchObject({ status: 404, code: 'not-found' });
  });

  it('wants a name and a password of 12 characters', async () => {
    const sent = await invite(app.founder, null, ['auditor']);
    const refused = await app.visitor().send(routes.acceptInvitation, { params: { secret: sent.secret }, body: { name: 'Guest', password: 'short' } });
    expect(refused.body).toMatchObject({ status: 400, code: 'invalid-input', issues: [{ path: 'password' }] });
  });
});

describe('an invitation to somebody with an account', () => {
  it('adds the roles and keeps name and password', async () => {
    const campaign = await app.makeCampaign();
    const person = await app.makePerson({ [campaign.slug]: ['modeler'] }, 'Known');
    const sent = await invite(app.founder, campaign.slug, ['steward', 'modeler'], person.email);
    expect((await app.visitor().call(routes.viewInvitation, { params: { secret: sent.secret } })).hasAccount).toBe(true);
    expect((await accept(sent.secret, 'Somebody else')).status).toBe(201);
    const me = await (await app.signIn(person)).call(routes.getMe);
    expect(me.user.name).toBe('Known');
    expect(me.roles.map((each) => each.role).sort()).toEqual(['modeler', 'steward']);
  });

  it('whose account is closed is refused', async () => {
    const account = await app.makeAccountFor();
    await app.founder.call(routes.updateAccount, { params: { account: account.id }, body: { active: false } });
    const sent = await invite(app.founder, null, ['auditor'], account.email);
    expect((await accept(sent.secret)).body).toMatchObject({ status: 409, code: 'wrong-state' });
    expect(await rolesIn(account.email)).toEqual([]);
  });
});

describe('the administrator of a campaign', () => {
  it('invites to that campaign, not to another, nor to the organisation', async () => {
    const [here, there] = [await app.makeCampaign(), await app.makeCampaign()];
    const administrator = await app.makePerson({ [here.slug]: ['administrator'] });
    expect((await invite(administrator, here.slug, ['steward'])).campaign).toBe(here.slug);
    const email = `${unique('guest')}@example.org`;
    expect((await administrator.send(routes.createInvitation, { body: { email, campaign: there.slug, roles: ['steward'] } })).body).toMatchObject({ status: 404 });
    expect((await administrator.send(routes.createInvitation, { body: { email, campaign: null, roles: ['administrator'] } })).body).toMatchObject({ status: 403, code: 'not-allowed' });
  });

  it('sees and revokes the invitations of that campaign only', async () => {
    const [here, there] = [await app.makeCampaign(), await app.makeCampaign()];
    const administrator = await app.makePerson({ [here.slug]: ['administrator'] });
    const own = await invite(app.founder, here.slug, ['steward']);
    const foreign = await invite(app.founder, there.slug, ['steward']);
    const { invitations } = await administrator.call(routes.listInvitations);
    expect(invitations.map((each) => each.id)).toEqual([own.id]);
    expect((await administrator.send(routes.revokeInvitation, { params: { invitation: foreign.id } })).status).toBe(404);
  });
});

describe('a letter that cannot be sent', () => {
  it('leaves no open invitation behind, and says so', async () => {
    const lonely = await createTestApp({ config: { smtp: 'smtp://127.0.0.1:1' } });
    try {
      const email = `${unique('guest')}@example.org`;
      const refused = await lonely.founder.send(routes.createInvitation, { body: { email, roles: ['auditor'] } });
      expect(refused.body).toMatchObject({ status: 503, code: 'unavailable' });
      const { invitations } = await lonely.founder.call(routes.listInvitations);
      expect(invitations.map((each) => each.state)).toEqual(['revoked']);
      expect((await lonely.visitor().send(routes.listInbox)).status).toBe(404);
    } finally {
      await lonely.close();
    }
  });
});
