/** One audit row a change, in the change's own transaction. The database numbers and hashes it (drizzle/, audit_chain). */
import { sql } from 'drizzle-orm';
import { auditLog } from '../db/schema/index.ts';
import type { Queryable } from '../db/database.ts';
import type { Caller } from './context.ts';

export interface AuditEvent {
  /** verb in the trade's words: 'archive.hand-in', 'finding.waive', 'draft.approve' */
  action: string;
  objectType: string;
  objectId: string;
  /** what a person calls it */
  label: string;
  campaignId: string | null;
  before?: unknown;
  after?: unknown;
  reason?: string | null;
}

export async function recordAudit(tx: Queryable, caller: Caller, event: AuditEvent): Promise<void> {
  await tx.insert(auditLog).values({
    // seq, at, prev_hash and hash are overwritten by the trigger; the columns are NOT NULL
    seq: 0, at: sql`now()`, prevHash: '', hash: '',
    actorId: caller.user.id, actorName: caller.user.name, via: caller.via, requestId: caller.requestId,
    action: event.action, objectType: event.objectType, objectId: event.objectId, label: event.label, campaignId: event.campaignId,
    before: event.before ?? null, after: event.after ?? null, reason: event.reason || null,
  });
}
