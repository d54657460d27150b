/** The real worker's queue on a test application's database, for as long as a test needs it. */
import { build } from '../../server/jobs/build.ts';
import { check } from '../../server/jobs/check.ts';
import { runQueue } from '../../server/jobs/queue-runner.ts';
import { release } from '../../server/jobs/release.ts';
import type { TestApp } from './app.ts';

export interface TestWorker {
  stop(): Promise<void>;
}

export function startWorker(app: TestApp): TestWorker {
  const stopping = new AbortController();
  const ended = runQueue(app.parts, { check, build, release }, stopping.signal);
  return {
    async stop() {
      stopping.abort();
      await ended;
    },
  };
}
