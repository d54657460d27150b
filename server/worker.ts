/** The worker: runs checks, builds and releases, and looks after deliveries. One lives at a time. */
import { setTimeout as wait } from 'node:timers/promises';
import { readConfig } from './config.ts';
import { becomeOnlyWorker, releaseQueueLocks } from './db/queue-locks.ts';
import { build } from './jobs/build.ts';
import { check } from './jobs/check.ts';
import { runQueue } from './jobs/queue-runner.ts';
import { release } from './jobs/release.ts';
import { openParts } from './parts.ts';
import { keepDeliveries } from './services/delivery-upkeep.ts';
import { requeueInterrupted } from './services/job-runs.ts';
import { removeOrphanedFolders } from './services/orphaned-folders.ts';
import { closeReaders } from './services/reading-pool.ts';

const upkeepMillis = 60_000;
const againMillis = 1000;

const parts = await openParts(readConfig(process.env));
const stopping = new AbortController();
process.on('SIGTERM', () => stopping.abort());
process.on('SIGINT', () => stopping.abort());

/** From the lock to its loss: what a dead worker left is taken up first. */
async function workOnce(): Promise<void> {
  const lock = await becomeOnlyWorker(parts.config.databaseUrl, stopping.signal);
  if (!lock) return;
  const round = new AbortController();
  void lock.lost.then(() => round.abort());
  const stop = AbortSignal.any([stopping.signal, round.signal]);
  const keep = () => void keepDeliveries(parts).catch((cause: unknown) => parts.log.warn({ err: cause }, 'upkeep failed'));
  const upkeep = setInterval(keep, upkeepMillis);
  try {
    await releaseQueueLocks(parts.db);
    const interrupted = await requeueInterrupted(parts);
    await parts.storage.clearScratch();
    await removeOrphanedFolders(parts);
    keep();
    parts.log.info({ interrupted }, 'working');
    await runQueue(parts, { check, build, release }, stop);
  } finally {
    clearInterval(upkeep);
    await lock.release();
  }
}

while (!stopping.signal.aborted) {
  try {
    await workOnce();
  } catch (cause) {
    parts.log.warn({ err: cause }, 'the queue was lost; trying again');
    await wait(againMillis, null, { signal: stopping.signal }).catch(() => undefined);
  }
}
await closeReaders();
await parts.close();
process.exit(0);
