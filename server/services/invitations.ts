/** Invitations by e-mail: only the SHA-256 of the secret is stored; one use, seven days. */
import { and, desc, eq, inArray, isNull } from 'drizzle-orm';
import { about } from '#contract/access.ts';
import type { Invitation, invitationView, newInvitation } from '#contract/account.ts';
import { PennyweightError } from '#contract/error.ts';
import type { z } from 'zod';
import { hashOfSecret, newSecret } from '../access/secret-text.ts';
import type { Transaction } from '../db/database.ts';
import { campaign, invitation, user } from '../db/schema/index.ts';
import { invitationLetter } from '../mail/letters.ts';
import { makeAccount, selfCaller } from './accounts.ts';
import { recordAudit } from './audit.ts';
import { campaignBySlug } from './campaign-lookup.ts';
import { authorise, type App, type Caller } from './context.ts';
import { rolesOf, setRoles } from './roles.ts';

const days = 7;
type Row = typeof invitation.$inferSelect;

function stateOf(row: Row): Invitation['state'] {
  if (row.acceptedAt) return 'accepted';
  if (row.revokedAt) return 'revoked';
  return row.expiresAt <= new Date() ? 'expired' : 'open';
}

const shown = (row: Row, slug: string | null, invitedBy: string): Invitation => ({
  id: row.id, email: row.email, campaign: slug, roles: row.roles, state: stateOf(row), invitedBy, createdAt: row.createdAt.toISOString(), expiresAt: row.expiresAt.toISOString(),
});

export async function listInvitations(app: App, caller: Caller, slug?: string): Promise<Invitation[]> {
  const places = (await app.db.select({ id: campaign.id }).from(campaign)).map((row) => row.id).filter((id) => caller.ability.can('read', about('Invitation', { campaignId: id })));
  const visible = caller.ability.can('read', about('Invitation', { campaignId: null })) ? undefined : inArray(invitation.campaignId, places);
  const rows = await app.db.select({ invitation, slug: campaign.slug, by: user.name }).from(invitation).leftJoin(campaign, eq(campaign.id, invitation.campaignId)).innerJoin(user, eq(user.id, invitation.invitedBy))
    .where(and(visible, slug === undefined ? undefined : eq(campaign.slug, slug))).orderBy(desc(invitation.createdAt)).limit(500);
  return rows.map((row) => shown(row.invitation, row.slug, row.by));
}

export async function createInvitation(app: App, caller: Caller, input: z.output<typeof newInvitation>): Promise<Invitation> {
  const where = input.campaign ? await campaignBySlug(app.db, caller, input.campaign) : null;
  authorise(caller, 'create', 'Invitation', { campaignId: where?.id ?? null });
  const secret = newSecret();
  const expiresAt = new Date(Date.now() + days * 24 * 3600 * 1000);
  const row = await app.db.transaction(async (tx) => {
    const [made] = await tx.insert(invitation).values({ email: input.email.trim().toLowerCase(), campaignId: where?.id ?? null, roles: input.roles, secretHash: hashOfSecret(secret), invitedBy: caller.user.id, expiresAt }).returning();
    await recordAudit(tx, caller, { action: 'invitation.create', objectType: 'invitation', objectId: made.id, label: made.email, campaignId: made.campaignId, after: { email: made.email, roles: made.roles } });
    return made;
  });
  try {
    await app.mailer.send(invitationLetter(row.email, caller.user.name, where?.title ?? null, row.roles, `${app.config.url}/join/${secret}`, expiresAt));
  } catch (cause) {
    await app.db.transaction((tx) => takeBack(tx, caller, row, 'the letter could not be sent'));
    throw new PennyweightError('unavailable', `The letter to ${row.email} could not be sent, so the invitation was taken back: check the mail server (PENNYWEIGHT_SMTP) and invite again.`, {}, { cause });
  }
  return shown(row, where?.slug ?? null, caller.user.name);
}

export async function revokeInvitation(app: App, caller: Caller, id: string): Promise<void> {
  await app.db.transaction(async (tx) => {
    const [row] = await tx.select().from(invitation).where(eq(invitation.id, id)).for('update');
    if (!row || !caller.ability.can('read', about('Invitation', { campaignId: row.campaignId }))) throw new PennyweightError('not-found', 'There is no such invitation.');
    authorise(caller, 'delete', 'Invitation', { campaignId: row.campaignId });
    if (stateOf(row) !== 'open') throw new PennyweightError('wrong-state', `This invitation is ${stateOf(row)} already.`);
    await takeBack(tx, caller, row, null);
  });
}

async function takeBack(tx: Transaction, caller: Caller, row: Row, why: string | null): Promise<void> {
  await tx.update(invitation).set({ revokedAt: new Date() }).where(eq(invitation.id, row.id));
  await recordAudit(tx, caller, { action: 'invitation.revoke', objectType: 'invitation', objectId: row.id, label: row.email, campaignId: row.campaignId, reason: why });
}

async function openInvitation(app: App, secret: string): Promise<Row> {
  const [row] = await app.db.select().from(invitation).where(eq(invitation.secretHash, hashOfSecret(secret)));
  if (!row) throw new PennyweightError('not-found', 'This invitation is not known: check that the whole link was copied.');
  const state = stateOf(row);
  if (state !== 'open') throw new PennyweightError('wrong-state', state === 'accepted' ? 'This invitation was used already: sign in.' : `This invitation is ${state}: ask for a new one.`);
  return row;
}

export async function viewInvitation(app: App, secret: string): Promise<z.input<typeof invitationView>> {
  const row = await openInvitation(app, secret);
  const [by] = await app.db.select({ name: user.name }).from(user).where(eq(user.id, row.invitedBy));
  const [where] = row.campaignId ? await app.db.select({ title: campaign.title }).from(campaign).where(eq(campaign.id, row.campaignId)) : [];
  const [known] = await app.db.select({ id: user.id }).from(user).where(eq(user.email, row.email));
  return { email: row.email, campaign: where?.title ?? null, roles: row.roles, invitedBy: by?.name ?? '', expiresAt: row.expiresAt.toISOString(), hasAccount: known !== undefined };
}

/**
 * Makes the account and gives the roles. Where the address has an account, holding the secret proves that its mailbox is theirs: the
 * roles are added, and name and password of the form are not used.
 */
export async function acceptInvitation(app: App, secret: string, person: { name: string; password: string }): Promise<{ email: string }> {
  const row = await openInvitation(app, secret);
  await app.db.transaction(async (tx) => {
    const [used] = await tx.update(invitation).set({ acceptedAt: new Date() }).where(and(eq(invitation.id, row.id), isNull(invitation.acceptedAt), isNull(invitation.revokedAt))).returning({ id: invitation.id });
    if (!used) throw new PennyweightError('wrong-state', 'This invitation was used already: sign in.');
    const [known] = await tx.select({ id: user.id, name: user.name, email: user.email, active: user.active }).from(user).where(eq(user.email, row.email)).for('update');
    if (known?.active === false) throw new PennyweightError('wrong-state', `The account of ${row.email} is closed: ask an administrator to open it again first.`);
    const member = known ?? (await makeAccount(tx, null, { ...person, email: row.email }));
    const before = await rolesOf(tx, member.id, row.campaignId);
    await setRoles(tx, member.id, row.campaignId, [...before, ...row.roles]);
    await recordAudit(tx, selfCaller(member), { action: 'invitation.accept', objectType: 'invitation', objectId: row.id, label: row.email, campaignId: row.campaignId, before: { roles: before }, after: { roles: [...new Set([...before, ...row.roles])] } });
  });
  return { email: row.email };
}
