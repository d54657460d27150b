/** Takes jobs from the queue and runs them, until it is told to stop or loses its database. */
import { Logger, run } from 'graphile-worker';
import type { App } from '../services/context.ts';
import type { NewJob } from './queue.ts';
import type { JobHandler } from './handle.ts';
import { runJob } from './run-job.ts';

export type Handlers = Record<NewJob['kind'], JobHandler>;

const concurrency = 2;
/** Short jobs end by themselves when the worker stops; longer ones are interrupted and go on with the next worker. */
const graceMillis = 2000;

/** graphile-worker's words, in our log; what it reports of each job stands in the job's row. */
function loggerOf(app: App): Logger {
  return new Logger((scope) => (level, message) => {
    const more = { from: 'queue', ...scope };
    if (level === 'error') app.log.warn(more, message);
    else app.log.debug(more, message);
  });
}

/** Ends when `stop` is aborted and every job has let go; throws when the queue cannot go on. */
export async function runQueue(app: App, handlers: Handlers, stop: AbortSignal): Promise<void> {
  const under = new Set<Promise<void>>();
  const lost = new AbortController();
  const task = (handler: JobHandler) => async (payload: unknown, { abortSignal }: { abortSignal?: AbortSignal }) => {
    const shutdown = AbortSignal.any([lost.signal, ...(abortSignal ? [abortSignal] : [])]);
    const work = runJob(app, (payload as { jobId: string }).jobId, handler, shutdown);
    under.add(work);
    return work.finally(() => under.delete(work));
  };
  const runner = await run({
    noHandleSignals: true,
    logger: loggerOf(app),
    taskList: Object.fromEntries(Object.entries(handlers).map(([kind, handler]) => [kind, task(handler)])),
    parsedCronItems: [],
    preset: {
      worker: {
        connectionString: app.config.databaseUrl, concurrentJobs: concurrency, maxPoolSize: concurrency + 2, pollInterval: 1000, gracefulShutdownAbortTimeout: graceMillis,
        // Without a batch the library does not wait for these, and a lost database would end the process.
        completeJobBatchDelay: 0, failJobBatchDelay: 0,
      },
    },
  });
  const halt = () => void runner.stop().catch(() => undefined);
  if (stop.aborted) halt();
  stop.addEventListener('abort', halt);
  try {
    await runner.promise;
  } finally {
    stop.removeEventListener('abort', halt);
    lost.abort();
    await Promise.allSettled(under);
  }
}
