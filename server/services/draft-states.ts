/** Where a draft stands, and what may be done with it there. */
import { eq } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import type { Queryable } from '../db/database.ts';
import { job, type draft } from '../db/schema/index.ts';

export type DraftRow = typeof draft.$inferSelect;

/** What was submitted is decided on as it is: nothing changes under a steward's eyes. */
export function mustBeEditable(row: DraftRow): void {
  if (row.state !== 'draft' && row.state !== 'returned') throw new PennyweightError('wrong-state', `This draft is ${row.state}: only a draft, or one that was returned, can be changed or built.`, { state: row.state });
}

/** Submitted, or approved and its release could not be made: then it is decided on again. */
export async function waitsForDecision(tx: Queryable, row: DraftRow): Promise<boolean> {
  if (row.state !== 'approved' || !row.jobId) return row.state === 'submitted';
  const [making] = await tx.select({ state: job.state }).from(job).where(eq(job.id, row.jobId));
  return making?.state === 'failed' || making?.state === 'cancelled';
}
