/** Accounts: who I am, all accounts, organisation-wide roles, closing, and the making of an account (by invitation or set-up). */
import { randomUUID } from 'node:crypto';
import { asc, eq } from 'drizzle-orm';
import { abilityFor, type MemberRole } from '#contract/access.ts';
import type { Account, Me } from '#contract/account.ts';
import { PennyweightError } from '#contract/error.ts';
import { hashPassword } from '../access/password.ts';
import type { Queryable, Transaction } from '../db/database.ts';
import { account, campaign, roleAssignment, session, user } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { authorise, type App, type Caller } from './context.ts';
import { rolesOf, setRoles } from './roles.ts';

export async function describeMe(app: App, caller: Caller): Promise<Me> {
  const slugs = await app.db.select({ id: campaign.id, slug: campaign.slug }).from(campaign);
  const slugOf = new Map(slugs.map((row) => [row.id, row.slug]));
  return {
    user: caller.user,
    roles: caller.principal.roles.map(({ campaignId, role }) => ({ campaignId, role, campaign: campaignId ? (slugOf.get(campaignId) ?? null) : null })),
    rules: caller.ability.rules,
    demo: app.config.demo,
  };
}

export async function listAccounts(app: App, caller: Caller): Promise<Account[]> {
  authorise(caller, 'read', 'User', {});
  const people = await app.db.select().from(user).orderBy(asc(user.name));
  const roles = await app.db.select({ userId: roleAssignment.userId, role: roleAssignment.role, campaign: campaign.slug }).from(roleAssignment).leftJoin(campaign, eq(campaign.id, roleAssignment.campaignId));
  return people.map((person) => ({
    id: person.id, name: person.name, email: person.email, active: person.active, createdAt: person.createdAt.toISOString(),
    roles: roles.filter((row) => row.userId === person.id).map(({ campaign: slug, role }) => ({ campaign: slug, role })),
  }));
}

export async function updateAccount(app: App, caller: Caller, id: string, change: { roles?: MemberRole[]; active?: boolean }): Promise<Account> {
  authorise(caller, 'update', 'User', {});
  if (id === caller.user.id) throw new PennyweightError('own-work', 'You cannot change your own roles or close your own account: ask another administrator.');
  await app.db.transaction(async (tx) => {
    const [person] = await tx.select().from(user).where(eq(user.id, id)).for('update');
    if (!person) throw new PennyweightError('not-found', 'There is no such account.');
    const before = { roles: await rolesOf(tx, id, null), active: person.active };
    if (change.roles) await setRoles(tx, id, null, change.roles);
    if (change.active !== undefined) await tx.update(user).set({ active: change.active }).where(eq(user.id, id));
    if (change.active === false) await tx.delete(session).where(eq(session.userId, id));
    await recordAudit(tx, caller, { action: 'account.update', objectType: 'account', objectId: id, label: person.email, campaignId: null, before, after: { ...before, ...change } });
  });
  return (await listAccounts(app, caller)).find((each) => each.id === id)!;
}

/** Makes an account with a password, in the caller's transaction. Errors: 'conflict' when the address has one already. */
export async function makeAccount(tx: Transaction, caller: Caller | null, person: { name: string; email: string; password: string }): Promise<{ id: string; name: string; email: string }> {
  const email = person.email.trim().toLowerCase();
  const [taken] = await tx.select({ id: user.id }).from(user).where(eq(user.email, email));
  if (taken) throw new PennyweightError('conflict', `The address ${email} has an account already: sign in with it.`);
  const id = randomUUID();
  await tx.insert(user).values({ id, name: person.name, email, emailVerified: true });
  await tx.insert(account).values({ id: randomUUID(), accountId: id, providerId: 'credential', userId: id, password: await hashPassword(person.password) });
  const made = { id, name: person.name, email };
  const self: Caller = caller ?? selfCaller(made);
  await recordAudit(tx, self, { action: 'account.create', objectType: 'account', objectId: id, label: email, campaignId: null, after: { name: person.name, email } });
  return made;
}

/** The new person as the one who acts, when an invitation is accepted. */
export function selfCaller(person: { id: string; name: string; email: string }): Caller {
  return { user: person, principal: { userId: person.id, roles: [], token: null }, ability: abilityFor({ userId: person.id, roles: [], token: null }), via: 'session', requestId: null };
}

/** Whether anybody has an account: the demo is seeded only where nobody has. */
export async function anyAccount(tx: Queryable): Promise<boolean> {
  return (await tx.select({ id: user.id }).from(user).limit(1)).length > 0;
}
