/** Jobs as people see them: progress, rate, time left, cancel. */
import { and, desc, eq, inArray } from 'drizzle-orm';
import { about } from '#contract/access.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Job } from '#contract/operation.ts';
import { campaign, job, user } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { authorise, mustSee, type App, type Caller } from './context.ts';

type Row = typeof job.$inferSelect;

function shown(row: Row, slug: string | null, by: string | null): Job {
  const running = row.state === 'running' && row.startedAt;
  const seconds = running ? (Date.now() - row.startedAt!.getTime()) / 1000 : 0;
  const rate = running && row.done > 0 && seconds > 0.5 ? row.done / seconds : null;
  return {
    id: row.id, kind: row.kind, subjectType: row.subjectType, subjectId: row.subjectId, label: row.label, campaign: slug, state: row.state, done: row.done, total: row.total,
    unit: row.unit, phase: row.phase, rate, secondsLeft: rate && row.total > row.done ? (row.total - row.done) / rate : null, attempts: row.attempts, problem: row.problem,
    createdBy: row.createdBy ? { id: row.createdBy, name: by ?? '' } : null, createdAt: row.createdAt.toISOString(), startedAt: row.startedAt?.toISOString() ?? null, finishedAt: row.finishedAt?.toISOString() ?? null,
  };
}

const joined = (app: App) => app.db.select({ job, slug: campaign.slug, by: user.name }).from(job).leftJoin(campaign, eq(campaign.id, job.campaignId)).leftJoin(user, eq(user.id, job.createdBy));

export async function listJobs(app: App, caller: Caller, filter: { campaign?: string; state?: string }): Promise<Job[]> {
  const states = filter.state?.split(',') as Row['state'][] | undefined;
  const places = (await app.db.select({ id: campaign.id }).from(campaign)).map((row) => row.id).filter((id) => caller.ability.can('read', about('Job', { campaignId: id })));
  const rows = await joined(app)
    .where(and(inArray(job.campaignId, places), filter.campaign ? eq(campaign.slug, filter.campaign) : undefined, states ? inArray(job.state, states) : undefined)).orderBy(desc(job.createdAt)).limit(200);
  return rows.map((row) => shown(row.job, row.slug, row.by));
}

async function find(app: App, caller: Caller, id: string) {
  const [row] = await joined(app).where(eq(job.id, id));
  if (!row) throw new PennyweightError('not-found', 'There is no such job.');
  mustSee(caller, 'Job', { campaignId: row.job.campaignId }, 'job');
  return row;
}

export async function getJob(app: App, caller: Caller, id: string): Promise<Job> {
  const row = await find(app, caller, id);
  return shown(row.job, row.slug, row.by);
}

/** Queued or running becomes cancelled; the worker notices within a second and removes what it made so far. */
export async function cancelJob(app: App, caller: Caller, id: string): Promise<Job> {
  const row = await find(app, caller, id);
  authorise(caller, 'cancel', 'Job', { campaignId: row.job.campaignId, createdBy: row.job.createdBy });
  await app.db.transaction(async (tx) => {
    const changed = await tx.update(job).set({ state: 'cancelled', finishedAt: new Date() }).where(and(eq(job.id, id), inArray(job.state, ['queued', 'running']))).returning({ id: job.id });
    if (changed.length === 0) throw new PennyweightError('wrong-state', `This job is ${row.job.state} already.`);
    await recordAudit(tx, caller, { action: 'job.cancel', objectType: 'job', objectId: id, label: row.job.label, campaignId: row.job.campaignId, before: { state: row.job.state }, after: { state: 'cancelled' } });
  });
  return getJob(app, caller, id);
}
