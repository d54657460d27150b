/** Jobs as the worker sees them: each state of a job's row is left by one statement, so that a cancel is never overwritten. */
import { and, eq, inArray, sql } from 'drizzle-orm';
import { abilityFor } from '#contract/access.ts';
import { PennyweightError, statusOf, type Problem } from '#contract/error.ts';
import { callerOf } from '../access/caller.ts';
import type { Queryable } from '../db/database.ts';
import { job, user } from '../db/schema/index.ts';
import type { App, Caller } from './context.ts';

export type JobRow = typeof job.$inferSelect;

const running = (id: string) => and(eq(job.id, id), eq(job.state, 'running'));

/** Takes the job up; null when it was cancelled or is done. */
export async function beginJob(app: App, id: string): Promise<JobRow | null> {
  const [row] = await app.db.update(job)
    .set({ state: 'running', attempts: sql`${job.attempts} + 1`, startedAt: sql`now()`, finishedAt: null, done: 0, total: 0, phase: '', problem: null })
    .where(and(eq(job.id, id), inArray(job.state, ['queued', 'running']))).returning();
  return row ?? null;
}

/** False when the job is not to go on: it was cancelled. */
export async function keepProgress(app: App, id: string, progress: { done: number; total: number; unit: string; phase: string }): Promise<boolean> {
  const { done, total, unit, phase } = progress;
  return (await app.db.update(job).set({ done, total, unit, phase }).where(running(id)).returning({ id: job.id })).length > 0;
}

export async function mayGoOn(app: App, id: string): Promise<boolean> {
  return (await app.db.select({ id: job.id }).from(job).where(running(id))).length > 0;
}

/** In the transaction that stores what a job made: whoever cancelled it first finds nothing stored. */
export async function mustStillRun(tx: Queryable, id: string): Promise<void> {
  const [row] = await tx.select({ state: job.state }).from(job).where(eq(job.id, id)).for('update');
  if (row?.state !== 'running') throw new PennyweightError('job-cancelled', 'The job was cancelled: nothing of it is kept.', { job: id });
}

export async function finishJob(app: App, id: string): Promise<void> {
  await app.db.update(job).set({ state: 'done', done: sql`greatest(${job.done}, ${job.total})`, phase: '', finishedAt: sql`now()` }).where(running(id));
}

export async function failJob(app: App, id: string, problem: Problem): Promise<void> {
  await app.db.update(job).set({ state: 'failed', problem, finishedAt: sql`now()` }).where(running(id));
}

/** It will be tried again: shown as waiting, with what went wrong. */
export async function postponeJob(app: App, id: string, problem: Problem): Promise<void> {
  await app.db.update(job).set({ state: 'queued', problem }).where(running(id));
}

/** After the queue's locks of a dead worker were released: what it was at waits again. */
export async function requeueInterrupted(app: App): Promise<number> {
  return (await app.db.update(job).set({ state: 'queued' }).where(eq(job.state, 'running')).returning({ id: job.id })).length;
}

/** The database went away: SQLSTATE classes 08 and 57P (PostgreSQL, appendix A), or the socket broke. */
export function isConnectionLoss(cause: unknown): boolean {
  for (let each = cause; each instanceof Error; each = each.cause) {
    const code = (each as { code?: unknown }).code;
    if (typeof code === 'string' && /^(08|57P0)|^E(CONNREFUSED|CONNRESET|PIPE)$/.test(code)) return true;
    if (/^Connection terminated/.test(each.message)) return true;
  }
  return false;
}

export function problemOf(error: PennyweightError): Problem {
  return { type: `urn:pennyweight:problem:${error.code}`, title: 'The job failed', status: statusOf[error.code], detail: error.message, code: error.code, details: error.details };
}

/** Who asked for the job, with the roles held now; the program itself for what nobody asked for. */
export async function callerOfJob(app: App, createdBy: string | null): Promise<Caller> {
  const [person] = createdBy === null ? [] : await app.db.select({ id: user.id, name: user.name, email: user.email }).from(user).where(eq(user.id, createdBy));
  return person ? callerOf(app.db, person, 'job', null) : programCaller();
}

export function programCaller(): Caller {
  const principal = { userId: 'pennyweight', roles: [], token: null };
  return { user: { id: principal.userId, name: 'Pennyweight', email: '' }, principal, ability: abilityFor(principal), via: 'job', requestId: null };
}
