/** What a job's handler is given. A handler does its work with services, engine, reading and linear algebra, and stores through services. */
import type { App, Caller } from '../services/context.ts';

export interface JobProgress {
  done: number;
  total: number;
  /** what is counted: 'bytes', 'snapshots', 'files' */
  unit: string;
  /** what is being done, for a person: 'reading u' */
  phase: string;
}

export interface JobHandle {
  /** id of the job's row */
  id: string;
  /** id of what it works on: the archive of a check, the draft of a build or release */
  subjectId: string;
  /** Aborted with a PennyweightError: 'job-cancelled' when a person cancelled it, 'unavailable' when the worker ends. */
  signal: AbortSignal;
  /** As often as you like: what is shown changes four times a second. Cheap, and never fails. */
  report(progress: JobProgress): void;
  /** who asked for the job, for audit rows (`via` is 'job') */
  caller: Caller;
}

/**
 * Ends when all is stored. A PennyweightError ends the job as failed, with its sentence, and is not tried again, but for
 * 'unavailable' and 'internal'; any other error is taken for a passing one and tried again.
 */
export type JobHandler = (app: App, job: JobHandle) => Promise<void>;
