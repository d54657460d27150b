/** The queue's locks and the one worker that may hold them. Public parts of graphile-worker's schema only. */
import { sql } from 'drizzle-orm';
import pg from 'pg';
import type { Database } from './database.ts';

/** Any number that no other advisory lock of ours has (see migrate.ts and the audit chain). */
const workerLock = 0x70_77_6a_62;
const retryMillis = 1000;

export interface WorkerLock {
  /** Settles when the connection that holds the lock is gone, and the lock with it. */
  lost: Promise<void>;
  release(): Promise<void>;
}

/**
 * Waits until no other worker lives: PostgreSQL frees a session's lock the moment its process is gone, however it went.
 * Waits for the database too. Null when `stop` was aborted meanwhile.
 */
export async function becomeOnlyWorker(databaseUrl: string, stop: AbortSignal): Promise<WorkerLock | null> {
  while (!stop.aborted) {
    const client = new pg.Client({ connectionString: databaseUrl, application_name: 'pennyweight worker', keepAlive: true });
    const lost = new Promise<void>((resolve) => {
      // Not once: a connection that breaks may say so twice, and a word that nobody hears ends the process.
      client.on('error', () => resolve());
      client.on('end', () => resolve());
    });
    const held = await hold(client, stop).catch(() => false);
    if (held) return { lost, release: () => client.end().catch(() => undefined) };
    await client.end().catch(() => undefined);
    await pause(stop);
  }
  return null;
}

async function hold(client: pg.Client, stop: AbortSignal): Promise<boolean> {
  await client.connect();
  while (!stop.aborted) {
    const { rows } = await client.query<{ held: boolean }>('select pg_try_advisory_lock($1) as held', [workerLock]);
    if (rows[0].held) return true;
    await pause(stop);
  }
  return false;
}

function pause(stop: AbortSignal): Promise<void> {
  return new Promise((resolve) => {
    const done = () => {
      clearTimeout(timer);
      stop.removeEventListener('abort', done);
      resolve();
    };
    const timer = setTimeout(done, retryMillis);
    stop.addEventListener('abort', done);
  });
}

/**
 * For the only worker, before it starts: every lock in the queue is that of a dead one. What waits to be tried again is tried now;
 * how often a job may start is counted in its own row.
 */
export async function releaseQueueLocks(db: Database): Promise<void> {
  await db.execute(sql`select graphile_worker.force_unlock_workers(array(select distinct locked_by from graphile_worker.jobs where locked_by is not null))`);
  await db.execute(sql`select count(*) from graphile_worker.reschedule_jobs(array(select id from graphile_worker.jobs), run_at => now(), attempts => 0)`);
}
