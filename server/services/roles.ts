/** Role assignments as sets: what a person holds in a campaign, or in the organisation (campaign null). */
import { and, eq, isNull, notInArray } from 'drizzle-orm';
import type { MemberRole } from '#contract/access.ts';
import type { Queryable } from '../db/database.ts';
import { roleAssignment } from '../db/schema/index.ts';

const held = (userId: string, campaignId: string | null) => and(eq(roleAssignment.userId, userId), campaignId === null ? isNull(roleAssignment.campaignId) : eq(roleAssignment.campaignId, campaignId));

export async function rolesOf(tx: Queryable, userId: string, campaignId: string | null): Promise<MemberRole[]> {
  const rows = await tx.select({ role: roleAssignment.role }).from(roleAssignment).where(held(userId, campaignId)).orderBy(roleAssignment.role);
  return rows.map((row) => row.role);
}

/** Sets exactly these roles; those that stay keep their date. Callers lock the person's row first, so that two changes do not mix. */
export async function setRoles(tx: Queryable, userId: string, campaignId: string | null, roles: MemberRole[]): Promise<void> {
  const wanted = [...new Set(roles)];
  await tx.delete(roleAssignment).where(and(held(userId, campaignId), notInArray(roleAssignment.role, wanted)));
  if (wanted.length > 0) await tx.insert(roleAssignment).values(wanted.map((role) => ({ userId, campaignId, role }))).onConflictDoNothing();
}
