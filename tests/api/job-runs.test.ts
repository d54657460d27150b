/** One job at a time, by the worker's own function, on a real queue and database; only what the job does is the test's. */
import { randomUUID } from 'node:crypto';
import { setTimeout as wait } from 'node:timers/promises';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import { routes } from '#contract/routes.ts';
import { job as jobTable } from '../../server/db/schema/index.ts';
import { releaseQueueLocks } from '../../server/db/queue-locks.ts';
import type { JobHandler } from '../../server/jobs/handle.ts';
import { runQueue } from '../../server/jobs/queue-runner.ts';
import { runJob } from '../../server/jobs/run-job.ts';
import { isConnectionLoss, mustStillRun, requeueInterrupted } from '../../server/services/job-runs.ts';
import { createTestApp, type TestApp } from '../setup/app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await createTestApp();
});
afterAll(() => app.close());

const never = new AbortController().signal;
const enqueue = () =>
  app.parts.db.transaction((tx) => app.parts.queue.enqueue(tx, { kind: 'check', subjectType: 'archive', subjectId: randomUUID(), label: 'A job', campaignId: null, createdBy: app.founder.id }));
const row = async (id: string) => (await app.parts.db.select().from(jobTable).where(eq(jobTable.id, id)))[0];
const run = (id: string, handler: JobHandler, shutdown = never) => runJob(app.parts, id, handler, shutdown);
const refuse = (code: 'recipe-invalid' | 'internal' | 'unavailable') => async () => {
  throw new PennyweightError(code, 'This cannot be done.', { step: 2 });
};

describe('a job', () => {
  it('is given its row, its subject and who asked for it, and ends as done', async () => {
    const id = await enqueue();
    const subject = (await row(id)).subjectId;
    let seen: unknown;
    await run(id, async (_app, job) => {
      seen = { id: job.id, subjectId: job.subjectId, user: job.caller.user.id, via: job.caller.via, state: (await row(id)).state };
      job.report({ done: 3, total: 8, unit: 'snapshots', phase: 'reading u' });
      await wait(600);
      expect(await row(id)).toMatchObject({ done: 3, total: 8, unit: 'snapshots', phase: 'reading u' });
    });
    expect(seen).toEqual({ id, subjectId: subject, user: app.founder.id, via: 'job', state: 'running' });
    expect(await row(id)).toMatchObject({ state: 'done', done: 8, attempts: 1, problem: null });
    expect((await row(id)).finishedAt).not.toBeNull();
  });

  it('that is refused for a reason is not tried again', async () => {
    const id = await enqueue();
    await run(id, refuse('recipe-invalid'));
    expect(await row(id)).toMatchObject({ state: 'failed', attempts: 1, problem: { code: 'recipe-invalid', status: 422, detail: 'This cannot be done.', details: { step: 2 } } });
    expect(await app.founder.call(routes.getJob, { params: { job: id } })).toMatchObject({ state: 'failed', problem: { code: 'recipe-invalid' } });
  });

  it('that fails in passing is handed back to the queue, and given up the third time', async () => {
    const id = await enqueue();
    for (const attempt of [1, 2]) {
      await expect(run(id, refuse('unavailable'))).rejects.toMatchObject({ code: 'unavailable' });
      expect(await row(id)).toMatchObject({ state: 'queued', attempts: attempt, problem: { code: 'unavailable' } });
    }
    await run(id, refuse('unavailable'));
    expect(await row(id)).toMatchObject({ state: 'failed', attempts: 3 });
  });

  it('that fails in a way nobody foresaw says so, without the inner words on its status', async () => {
    const id = await enqueue();
    await expect(run(id, async () => void (null as unknown as { x: number }).x)).rejects.toMatchObject({ code: 'internal' });
    expect((await row(id)).problem).toMatchObject({ status: 500, code: 'internal' });
  });

  it('is told within a second that it was cancelled, and stores nothing', async () => {
    const id = await enqueue();
    let after = Infinity;
    const running = run(id, async (_app, job) => {
      await app.founder.call(routes.cancelJob, { params: { job: id } });
      const begun = performance.now();
      await new Promise((resolve) => job.signal.addEventListener('abort', resolve));
      after = performance.now() - begun;
      await expect(app.parts.db.transaction((tx) => mustStillRun(tx, id))).rejects.toMatchObject({ code: 'job-cancelled' });
      job.signal.throwIfAborted();
    });
    await running;
    expect(after).toBeLessThan(2000);
    expect(await row(id)).toMatchObject({ state: 'cancelled', problem: null });
  });

  it('that was cancelled before it began does not begin', async () => {
    const id = await enqueue();
    await app.founder.call(routes.cancelJob, { params: { job: id } });
    let begun = false;
    await run(id, async () => void (begun = true));
    expect(begun).toBe(false);
    expect((await row(id)).state).toBe('cancelled');
  });

  it('waits for the next worker when this one ends', async () => {
    const id = await enqueue();
    const ending = new AbortController();
    const running = run(id, async (_app, job) => {
      ending.abort();
      await wait(10);
      job.signal.throwIfAborted();
    }, ending.signal);
    await expect(running).rejects.toMatchObject({ code: 'unavailable' });
    expect(await row(id)).toMatchObject({ state: 'queued' });
  });

  it('that ends its worker again and again is given up', async () => {
    const id = await enqueue();
    await app.parts.db.update(jobTable).set({ attempts: 10, state: 'running' }).where(eq(jobTable.id, id));
    let begun = false;
    await run(id, async () => void (begun = true));
    expect(begun).toBe(false);
    expect(await row(id)).toMatchObject({ state: 'failed', problem: { code: 'internal' } });
  });

  it('survives the loss of the database more often than other failures', async () => {
    const id = await enqueue();
    await app.parts.db.update(jobTable).set({ attempts: 5 }).where(eq(jobTable.id, id));
    const lost = Object.assign(new PennyweightError('internal', 'terminating connection'), { cause: Object.assign(new TypeError('gone'), { code: '57P01' }) });
    await expect(run(id, () => Promise.reject(lost))).rejects.toThrow();
    expect((await row(id)).state).toBe('queued');
    expect(isConnectionLoss(new PennyweightError('internal', 'a failure of another kind'))).toBe(false);
  });
});

describe('the queue', () => {
  it('runs what a dead worker held, as soon as its locks are released', async () => {
    const id = await enqueue();
    await app.parts.db.update(jobTable).set({ state: 'running', attempts: 1 }).where(eq(jobTable.id, id));
    await app.parts.db.execute(sql`update graphile_worker._private_jobs set locked_at = now(), locked_by = 'dead', attempts = 1 where key = ${id}`);
    await app.parts.db.execute(sql`update graphile_worker._private_job_queues set locked_at = now(), locked_by = 'dead' where id = (select job_queue_id from graphile_worker._private_jobs where key = ${id})`);
    await releaseQueueLocks(app.parts.db);
    expect(await requeueInterrupted(app.parts)).toBeGreaterThan(0);
    const stop = new AbortController();
    const done: string[] = [];
    const handler: JobHandler = async (_app, job) => void done.push(job.id);
    const ended = runQueue(app.parts, { check: handler, build: handler, release: handler }, stop.signal);
    await expect.poll(async () => (await row(id)).state, { timeout: 10_000 }).toBe('done');
    stop.abort();
    await ended;
    expect(done).toContain(id);
    expect((await row(id)).attempts).toBe(2);
  });
});
