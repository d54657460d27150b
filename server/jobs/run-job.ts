/** Runs one job: progress, cancel, and what becomes of it when its handler fails. */
import { PennyweightError } from '#contract/error.ts';
import type { App } from '../services/context.ts';
import { beginJob, callerOfJob, failJob, finishJob, isConnectionLoss, keepProgress, mayGoOn, postponeJob, problemOf } from '../services/job-runs.ts';
import type { JobHandler, JobProgress } from './handle.ts';

/** Progress is written, and a cancel seen, this often. */
const tickMillis = 250;
const ticksBetweenLooks = 3;
/** Starts after which a job that fails by passing errors, but for a lost database, is given up. */
const mostFailures = 3;
/** Starts after which a job is given up whose worker ended each time without a word: it may be what ends it. */
const mostStarts = 10;

const passing = new Set(['unavailable', 'internal']);

/**
 * Throws when the queue is to hand the job out again. `shutdown` is aborted when the worker ends: the job then waits for the
 * next one.
 */
export async function runJob(app: App, id: string, handler: JobHandler, shutdown: AbortSignal): Promise<void> {
  const row = await beginJob(app, id);
  if (!row) return;
  if (row.attempts > mostStarts) {
    return failJob(app, id, problemOf(new PennyweightError('internal', `The worker ended ${mostStarts} times while it was at this job, which is given up: tell the administrator.`, { attempts: row.attempts - 1 })));
  }
  const controller = new AbortController();
  const watch = watchJob(app, id, controller);
  const end = () => controller.abort(new PennyweightError('unavailable', 'The worker is ending; the job goes on with the next one.'));
  if (shutdown.aborted) end();
  shutdown.addEventListener('abort', end);
  try {
    const caller = await callerOfJob(app, row.createdBy);
    await handler(app, { id, subjectId: row.subjectId, signal: controller.signal, report: watch.report, caller });
    await watch.stop();
    await finishJob(app, id);
  } catch (cause) {
    await watch.stop();
    await settle(app, id, row.attempts, cause, controller.signal);
  } finally {
    shutdown.removeEventListener('abort', end);
  }
}

async function settle(app: App, id: string, attempts: number, cause: unknown, signal: AbortSignal): Promise<void> {
  const error = cause instanceof PennyweightError ? cause : new PennyweightError('internal', `The job failed in a way that was not foreseen (${cause instanceof Error ? cause.message : String(cause)}): tell the administrator.`, {}, { cause });
  const aborted = signal.aborted ? (signal.reason as PennyweightError) : null;
  // The row says 'cancelled' already.
  if (error.code === 'job-cancelled' || aborted?.code === 'job-cancelled') return;
  const again = aborted !== null || isConnectionLoss(cause) || (passing.has(error.code) && attempts < mostFailures);
  if (!again) {
    if (passing.has(error.code)) app.log.error({ err: cause, job: id }, 'job failed');
    return failJob(app, id, problemOf(error));
  }
  await postponeJob(app, id, problemOf(aborted ?? error));
  throw error;
}

interface Watch {
  report(progress: JobProgress): void;
  stop(): Promise<void>;
}

/** Writes the newest progress at each tick, and looks for a cancel when there was none to write. */
function watchJob(app: App, id: string, controller: AbortController): Watch {
  let news: JobProgress | null = null;
  let quiet = 0;
  let writing: Promise<void> = Promise.resolve();
  let busy = false;
  async function tick(): Promise<void> {
    const progress = news;
    news = null;
    if (!progress && ++quiet < ticksBetweenLooks) return;
    quiet = 0;
    const goOn = progress ? await keepProgress(app, id, progress) : await mayGoOn(app, id);
    if (!goOn) controller.abort(new PennyweightError('job-cancelled', 'The job was cancelled.'));
  }
  const timer = setInterval(() => {
    if (busy || controller.signal.aborted) return;
    busy = true;
    // A database that is away for a moment costs a figure of progress, not the job.
    writing = tick().catch((cause: unknown) => app.log.warn({ err: cause, job: id }, 'progress could not be written')).finally(() => (busy = false));
  }, tickMillis);
  return {
    report: (progress) => (news = progress),
    async stop() {
      clearInterval(timer);
      await writing;
    },
  };
}
