/** Who calls: from a session cookie or a personal token, with the roles held at this moment. */
import type { IncomingHttpHeaders } from 'node:http';
import { fromNodeHeaders } from 'better-auth/node';
import { and, eq, isNull, lt, or, sql } from 'drizzle-orm';
import { abilityFor, type AppAbility, type Principal } from '#contract/access.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Database } from '../db/database.ts';
import { roleAssignment, token, user } from '../db/schema/index.ts';
import type { Auth } from './auth.ts';
import { hashOfSecret } from './secret-text.ts';

/** Who calls, and what they may do at this moment. */
export interface Caller {
  user: { id: string; name: string; email: string };
  principal: Principal;
  ability: AppAbility;
  via: 'session' | 'token' | 'job' | 'command-line' | 'set-up';
  requestId: string | null;
}

type Found = { caller: Caller } | { problem: PennyweightError } | null;

export async function callerOf(db: Database, person: Caller['user'], via: Caller['via'], requestId: string | null, scoped: Principal['token'] = null): Promise<Caller> {
  const roles = await db.select({ campaignId: roleAssignment.campaignId, role: roleAssignment.role }).from(roleAssignment).where(eq(roleAssignment.userId, person.id));
  const principal: Principal = { userId: person.id, roles, token: scoped };
  return { user: person, principal, ability: abilityFor(principal), via, requestId };
}

/** null: no credentials were sent. `problem`: some were, and they do not hold. */
export async function findCaller(db: Database, auth: Auth, headers: IncomingHttpHeaders, requestId: string | null): Promise<Found> {
  const bearer = /^Bearer\s+(\S+)$/i.exec(headers.authorization ?? '')?.[1];
  if (bearer) return byToken(db, bearer, requestId);
  if (!/pennyweight\.session_token=[^;\s]/.test(headers.cookie ?? '')) return null;
  const session = await auth.api.getSession({ headers: fromNodeHeaders(headers) });
  if (!session) return { problem: new PennyweightError('session-expired', 'Your session has ended: sign in again. Nothing that you sent was lost.') };
  const [person] = await db.select({ id: user.id, name: user.name, email: user.email, active: user.active }).from(user).where(eq(user.id, session.user.id));
  if (!person?.active) return { problem: new PennyweightError('not-signed-in', 'This account is closed: ask an administrator.') };
  return { caller: await callerOf(db, { id: person.id, name: person.name, email: person.email }, 'session', requestId) };
}

async function byToken(db: Database, secret: string, requestId: string | null): Promise<Found> {
  const [row] = await db
    .select({ id: token.id, scopes: token.scopes, campaignId: token.campaignId, expiresAt: token.expiresAt, revokedAt: token.revokedAt, person: { id: user.id, name: user.name, email: user.email }, active: user.active })
    .from(token).innerJoin(user, eq(user.id, token.userId)).where(eq(token.hash, hashOfSecret(secret)));
  if (!row || row.revokedAt) return { problem: new PennyweightError('not-signed-in', 'This token is not known or was revoked: make a new one on your tokens page.') };
  if (row.expiresAt <= new Date()) return { problem: new PennyweightError('session-expired', `This token expired on ${row.expiresAt.toISOString().slice(0, 10)}: make a new one on your tokens page.`) };
  if (!row.active) return { problem: new PennyweightError('not-signed-in', 'The account of this token is closed.') };
  // Kept to the minute, so that a thousand pulls are not a thousand writes.
  await db.update(token).set({ lastUsedAt: sql`now()` }).where(and(eq(token.id, row.id), or(isNull(token.lastUsedAt), lt(token.lastUsedAt, sql`now() - interval '1 minute'`))));
  return { caller: await callerOf(db, row.person, 'token', requestId, { scopes: row.scopes, campaignId: row.campaignId }) };
}
