/** Audit entries of what better-auth does itself: sign-in, refused sign-in, sign-out, password reset. */
import { sql } from 'drizzle-orm';
import { auditLog } from '../db/schema/index.ts';
import type { SignInEvent } from '../access/auth.ts';
import type { App } from './context.ts';

export async function recordSignIn(app: App, action: SignInEvent, person: { id: string | null; name?: string; email: string }, requestId: string | null): Promise<void> {
  await app.db.insert(auditLog).values({
    seq: 0, at: sql`now()`, prevHash: '', hash: '', actorId: person.id, actorName: person.name ?? person.email, via: 'session', requestId, action,
    objectType: 'account', objectId: person.id ?? person.email, label: person.email, campaignId: null,
  });
}
