/** The queue as services see it: a job row and its graphile-worker task in the caller's transaction. */
import { sql } from 'drizzle-orm';
import type { Queryable } from '../db/database.ts';
import { job } from '../db/schema/index.ts';

export interface NewJob {
  kind: 'check' | 'build' | 'release';
  subjectType: string;
  subjectId: string;
  label: string;
  campaignId: string | null;
  createdBy: string | null;
}

export interface Queue {
  /** Returns the job's id. Takes effect with the transaction's commit. */
  enqueue(tx: Queryable, work: NewJob): Promise<string>;
}

/** How often the queue hands a job out, also after the worker was killed; run-job.ts gives up earlier, with a reason. */
const mostAttempts = 25;

export function databaseQueue(): Queue {
  return {
    async enqueue(tx, work) {
      const [row] = await tx.insert(job).values(work).returning({ id: job.id });
      const id = row!.id;
      // One subject is worked on by one job at a time (queue name), tried again after a killed worker.
      await tx.execute(sql`select graphile_worker.add_job(${work.kind}::text, json_build_object('jobId', ${id}::text), queue_name => ${work.subjectId}::text, max_attempts => ${mostAttempts}::int, job_key => ${id}::text)`);
      return id;
    },
  };
}
