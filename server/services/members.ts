/** Members of a campaign and their roles. */
import { asc, eq } from 'drizzle-orm';
import type { MemberRole } from '#contract/access.ts';
import type { Member } from '#contract/campaign.ts';
import { PennyweightError } from '#contract/error.ts';
import { roleAssignment, user } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { campaignBySlug } from './campaign-lookup.ts';
import { authorise, type App, type Caller } from './context.ts';
import { rolesOf, setRoles } from './roles.ts';

export async function listMembers(app: App, caller: Caller, slug: string): Promise<Member[]> {
  const where = await campaignBySlug(app.db, caller, slug);
  authorise(caller, 'read', 'Membership', { campaignId: where.id });
  const rows = await app.db.select({ id: user.id, name: user.name, email: user.email, role: roleAssignment.role, since: roleAssignment.createdAt }).from(roleAssignment).innerJoin(user, eq(user.id, roleAssignment.userId)).where(eq(roleAssignment.campaignId, where.id)).orderBy(asc(user.name), asc(roleAssignment.role));
  const members = new Map<string, Member>();
  for (const row of rows) {
    const known = members.get(row.id);
    if (known) known.roles.push(row.role);
    else members.set(row.id, { person: { id: row.id, name: row.name }, email: row.email, roles: [row.role], since: row.since.toISOString() });
  }
  return [...members.values()];
}

export async function putMember(app: App, caller: Caller, slug: string, account: string, roles: MemberRole[]): Promise<Member> {
  const where = await campaignBySlug(app.db, caller, slug);
  authorise(caller, 'update', 'Membership', { campaignId: where.id });
  await app.db.transaction(async (tx) => {
    const [person] = await tx.select().from(user).where(eq(user.id, account)).for('update');
    if (!person) throw new PennyweightError('not-found', 'There is no such account: invite the person by e-mail.');
    const before = await rolesOf(tx, account, where.id);
    await setRoles(tx, account, where.id, roles);
    await recordAudit(tx, caller, { action: before.length ? 'member.change-roles' : 'member.add', objectType: 'member', objectId: account, label: person.name, campaignId: where.id, before: { roles: before }, after: { roles } });
  });
  return (await listMembers(app, caller, slug)).find((member) => member.person.id === account)!;
}

export async function removeMember(app: App, caller: Caller, slug: string, account: string): Promise<void> {
  const where = await campaignBySlug(app.db, caller, slug);
  authorise(caller, 'delete', 'Membership', { campaignId: where.id });
  await app.db.transaction(async (tx) => {
    const [person] = await tx.select({ name: user.name }).from(user).where(eq(user.id, account)).for('update');
    const before = await rolesOf(tx, account, where.id);
    if (before.length === 0) throw new PennyweightError('not-found', 'This person is no member of the campaign.');
    await setRoles(tx, account, where.id, []);
    await recordAudit(tx, caller, { action: 'member.remove', objectType: 'member', objectId: account, label: person.name, campaignId: where.id, before: { roles: before } });
  });
}
