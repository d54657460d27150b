/**
 * A campaign with the people of a curation and records written by h5py, all by HTTP and the real worker: a contributor hands archives in,
 * a modeler makes drafts, two stewards review. `keeper` and `warden` are stewards; neither makes anything unless a test lets them.
 */
import { execFileSync } from 'node:child_process';
import { statSync } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Draft } from '#contract/dataset.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Job } from '#contract/operation.ts';
import type { Recipe } from '#contract/recipe.ts';
import { routes } from '#contract/routes.ts';
import { HttpPerson } from '../../server/demo/http-person.ts';
import { createTestApp, unique, type Person, type TestApp } from './app.ts';
import { startWorker, type TestWorker } from './worker.ts';

export type WakeRecord = 'adaptive' | 'steady' | 'gap' | 'blemished' | 'elsewhere' | 'wide';
type Steps = Recipe['steps'];

export interface WakeCampaign {
  app: TestApp;
  /** Jobs wait until the worker goes on. */
  stopWorker(): Promise<void>;
  resumeWorker(): void;
  campaign: string;
  dataset: string;
  contributor: Person;
  modeler: Person;
  keeper: Person;
  warden: Person;
  /** where the records lie */
  records: string;
  fileOf(record: WakeRecord): string;
  handIn(record: WakeRecord, by?: Person): Promise<string>;
  ended(jobId: string): Promise<Job>;
  /** order, centre, weigh by trapezoid and tensor, then `more` */
  recipe(archives: string[], more?: Partial<Record<Steps[number]['step'], object | null>>, fields?: string[]): Recipe;
  draft(recipe: Recipe, by?: Person): Promise<Draft>;
  built(recipe: Recipe, by?: Person): Promise<Draft>;
  /** built, submitted by the modeler, approved by the keeper, released; its version */
  released(recipe: Recipe): Promise<{ draft: string; version: number }>;
  close(): Promise<void>;
}

export const approval = { licence: 'CC-BY-4.0', handlingLabel: 'internal', contact: 'wakes@example.org', note: 'As planned.' };

export async function makeWakeCampaign(records: WakeRecord[]): Promise<WakeCampaign> {
  const app = await createTestApp();
  const folder = await mkdtemp(join(tmpdir(), 'pennyweight-wake-'));
  execFileSync('/usr/bin/python3', ['tests/setup/wake-records.py', folder, ...records]);
  const { slug: campaign } = await app.makeCampaign({ parameters: [{ name: 're' }], contact: 'wakes@example.org' });
  const contributor = await app.makePerson({ [campaign]: ['contributor'] }, 'Mary Contributor');
  const modeler = await app.makePerson({ [campaign]: ['modeler'] }, 'Ada Modeler');
  const keeper = await app.makePerson({ [campaign]: ['steward'] }, 'Grace Steward');
  const warden = await app.makePerson({ [campaign]: ['steward'] }, 'Emmy Steward');
  let worker: TestWorker | null = startWorker(app);
  const dataset = unique('wake');
  await modeler.call(routes.createDataset, { params: { campaign }, body: { slug: dataset, title: 'Wake', description: 'An invented wake.' } });

  const wake: WakeCampaign = {
    app, campaign, dataset, contributor, modeler, keeper, warden, records: folder,
    async stopWorker() {
      await worker?.stop();
      worker = null;
    },
    resumeWorker() {
      worker ??= startWorker(app);
    },
    fileOf: (record) => join(folder, `${record}.h5`),
    async handIn(record, by = contributor) {
      const person = new HttpPerson(app.url), file = wake.fileOf(record);
      await person.signIn(by.email, by.password);
      const parameters: Record<string, number> = record === 'wide' ? { re: 1 } : {};
      const delivery = await person.call(routes.createDelivery, { params: { campaign }, body: { run: unique(record), solver: 'wake', parameters, files: [{ name: `${record}.h5`, bytes: statSync(file).size }] } });
      await person.sendFiles(delivery, () => file);
      const { archive } = await person.call(routes.getDelivery, { params: { delivery: delivery.id } });
      const { jobId } = await person.call(routes.getArchive, { params: { archive: archive! } });
      await person.finished(jobId!, 120);
      return archive!;
    },
    async ended(jobId) {
      for (const end = Date.now() + 120_000; Date.now() < end; ) {
        const job = await app.founder.call(routes.getJob, { params: { job: jobId } });
        if (job.state !== 'queued' && job.state !== 'running') return job;
        await new Promise((resolve) => setTimeout(resolve, 50));
      }
      throw new PennyweightError('unavailable', `Job ${jobId} did not end.`);
    },
    recipe(archives, more = {}, fields = ['u', 'p']) {
      const steps: Record<string, object | null> = { order: {}, window: null, centre: {}, weigh: {}, split: null, cast: null, ...more };
      const given = Object.entries(steps).flatMap(([step, parameters]) => (parameters === null ? [] : [{ step, ...parameters }]));
      return { pennyweight: 1, steps: [{ step: 'select', archives, fields }, ...given] as Steps };
    },
    draft: (recipe, by = modeler) => by.call(routes.createDraft, { params: { campaign, dataset }, body: { recipe } }),
    async built(recipe, by = modeler) {
      const { id } = await wake.draft(recipe, by);
      const { jobId } = await by.call(routes.buildDraft, { params: { draft: id } });
      const job = await wake.ended(jobId!);
      if (job.state !== 'done') throw new PennyweightError('internal', `The build ${job.state}: ${job.problem?.detail}`);
      return by.call(routes.getDraft, { params: { draft: id } });
    },
    async released(recipe) {
      const { id } = await wake.built(recipe);
      await modeler.call(routes.submitDraft, { params: { draft: id }, body: {} });
      const { jobId } = await keeper.call(routes.approveDraft, { params: { draft: id }, body: approval });
      const job = await wake.ended(jobId!);
      if (job.state !== 'done') throw new PennyweightError('internal', `The release ${job.state}: ${job.problem?.detail}`);
      const { releaseVersion } = await modeler.call(routes.getDraft, { params: { draft: id } });
      return { draft: id, version: releaseVersion! };
    },
    async close() {
      await wake.stopWorker();
      await app.close();
      await rm(folder, { recursive: true, force: true });
    },
  };
  return wake;
}
