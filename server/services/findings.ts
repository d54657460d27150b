/** Findings of archives as they are stored, and waivers: only cautions, by a steward, with a reason. */
import { asc, eq } from 'drizzle-orm';
import type { StoredFinding } from '#contract/archive.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Finding } from '#contract/finding.ts';
import type { Queryable } from '../db/database.ts';
import { finding } from '../db/schema/index.ts';
import { findArchive } from './archives.ts';
import { recordAudit } from './audit.ts';
import { canonicalJson } from './canonical-json.ts';
import { authorise, mustSee, type App, type Caller } from './context.ts';
import { peopleById } from './people.ts';

export type FindingRow = typeof finding.$inferSelect;

export async function shownFindings(tx: Queryable, rows: FindingRow[]): Promise<StoredFinding[]> {
  const person = await peopleById(tx, rows.map((row) => row.waivedBy));
  return rows.map((row) => ({
    findingId: row.id, id: row.checkId, severity: row.severity, path: row.path, message: row.message, evidence: row.evidence, remedy: row.remedy,
    state: row.waivedAt ? 'waived' : 'open', waiver: row.waivedAt ? { reason: row.waivedReason!, by: person(row.waivedBy!), at: row.waivedAt.toISOString() } : null,
  }));
}

export async function listArchiveFindings(app: App, caller: Caller, archiveId: string): Promise<StoredFinding[]> {
  await findArchive(app, caller, archiveId);
  return shownFindings(app.db, await app.db.select().from(finding).where(eq(finding.archiveId, archiveId)).orderBy(asc(finding.position)));
}

/**
 * Replaces the findings of an archive or draft. One that says the very same thing at the same place on the same evidence keeps its
 * id and its waiver: the waiver was given for that evidence and no other.
 */
export async function replaceFindings(tx: Queryable, owner: { archiveId: string } | { draftId: string }, campaignId: string, found: Finding[]): Promise<void> {
  const mine = 'archiveId' in owner ? eq(finding.archiveId, owner.archiveId) : eq(finding.draftId, owner.draftId);
  const says = (each: { path: string | null; message: string; evidence: unknown }, check: string) => canonicalJson([check, each.path, each.message, each.evidence]);
  const old = new Map((await tx.delete(finding).where(mine).returning()).map((row) => [says(row, row.checkId), row]));
  if (found.length === 0) return;
  await tx.insert(finding).values(found.map((each, position) => {
    const before = old.get(says(each, each.id));
    old.delete(says(each, each.id));
    const kept = before && { id: before.id, createdAt: before.createdAt };
    const waived = before && each.severity === 'caution' ? { waivedReason: before.waivedReason, waivedBy: before.waivedBy, waivedAt: before.waivedAt } : {};
    return { ...owner, ...kept, ...waived, campaignId, checkId: each.id, severity: each.severity, path: each.path, message: each.message, evidence: each.evidence, remedy: each.remedy, position };
  }));
}

const gone = () => new PennyweightError('not-found', 'There is no such finding any more: the archive or draft was checked again. Reload the page.');

async function find(app: App, caller: Caller, id: string): Promise<FindingRow> {
  const [row] = await app.db.select().from(finding).where(eq(finding.id, id));
  if (!row) throw gone();
  mustSee(caller, 'Finding', row, 'finding');
  authorise(caller, 'waive', 'Finding', row);
  return row;
}

const labelOf = (row: FindingRow) => `${row.checkId}${row.path ? ` at ${row.path}` : ''}`;

export async function waiveFinding(app: App, caller: Caller, id: string, reason: string): Promise<StoredFinding> {
  const row = await find(app, caller, id);
  if (row.severity !== 'caution') throw new PennyweightError('wrong-state', row.severity === 'blocker' ? 'A blocker cannot be waived: it must be repaired.' : 'A note needs no waiver.');
  const [after] = await app.db.transaction(async (tx) => {
    const changed = await tx.update(finding).set({ waivedReason: reason, waivedBy: caller.user.id, waivedAt: new Date() }).where(eq(finding.id, id)).returning();
    if (changed.length === 0) throw gone();
    await recordAudit(tx, caller, { action: 'finding.waive', objectType: 'finding', objectId: id, label: labelOf(row), campaignId: row.campaignId, before: { waiver: row.waivedReason }, after: { message: row.message, archive: row.archiveId, draft: row.draftId }, reason });
    return changed;
  });
  return (await shownFindings(app.db, [after]))[0];
}

export async function revokeWaiver(app: App, caller: Caller, id: string): Promise<StoredFinding> {
  const row = await find(app, caller, id);
  if (!row.waivedAt) throw new PennyweightError('wrong-state', 'This finding is not waived.');
  const [after] = await app.db.transaction(async (tx) => {
    const changed = await tx.update(finding).set({ waivedReason: null, waivedBy: null, waivedAt: null }).where(eq(finding.id, id)).returning();
    if (changed.length === 0) throw gone();
    await recordAudit(tx, caller, { action: 'finding.revoke-waiver', objectType: 'finding', objectId: id, label: labelOf(row), campaignId: row.campaignId, before: { waiver: row.waivedReason } });
    return changed;
  });
  return (await shownFindings(app.db, [after]))[0];
}
