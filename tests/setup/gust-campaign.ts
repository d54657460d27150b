/**
 * A campaign in which the whole job was done once by its own people, over HTTP and by the real worker: an archive handed in, checked and
 * waived, a draft built and released, a second draft that waits for its review.
 */
import { execFileSync } from 'node:child_process';
import { statSync } from 'node:fs';
import { join } from 'node:path';
import type { Recipe } from '#contract/recipe.ts';
import { routes } from '#contract/routes.ts';
import { HttpPerson } from '../../server/demo/http-person.ts';
import type { TestApp, Visitor } from './app.ts';
import { unique } from './app.ts';

export const gustRecipe = (archives: string[]): Recipe => ({
  pennyweight: 1,
  steps: [
    { step: 'select', archives, fields: ['u', 'v'] },
    { step: 'order', sort: true, restart: 'keep-later', dropDuplicates: true, dropFrozen: false, drop: [] },
    { step: 'window', from: null, to: null, every: 1, first: null, last: null },
    { step: 'centre', subtract: 'weighted-mean' },
    { step: 'weigh', time: 'trapezoid', space: 'tensor', runs: 'equal' },
    { step: 'split', by: 'blocks', shares: [0.6, 0.2, 0.2], blocks: 10, guard: 1, seed: 7 },
    { step: 'cast', type: 'float64' },
  ],
});

export interface People {
  contributor: { email: string; password: string };
  steward: { email: string; password: string };
  modeler: { email: string; password: string };
}

async function signedIn(app: TestApp, account: { email: string; password: string }): Promise<HttpPerson> {
  const person = new HttpPerson(app.url);
  await person.signIn(account.email, account.password);
  return person;
}

export async function makeGustCampaign(app: TestApp, campaign: string, people: People) {
  const file = join(app.parts.config.storage, `${unique('gust')}.h5`);
  execFileSync('/usr/bin/python3', ['tests/setup/gust.py', file]);
  const [contributor, steward, modeler] = await Promise.all([people.contributor, people.steward, people.modeler].map((each) => signedIn(app, each)));

  /** Hands the file in once more, as another run; waits for its check. */
  async function handIn(run = unique('run')): Promise<{ archive: string; job: string; delivery: string }> {
    const delivery = await contributor.call(routes.createDelivery, { params: { campaign }, body: { run, solver: 'gust', files: [{ name: 'gust.h5', bytes: statSync(file).size }] } });
    await contributor.sendFiles(delivery, () => file);
    const { archive } = await contributor.call(routes.getDelivery, { params: { delivery: delivery.id } });
    const { jobId } = await contributor.call(routes.getArchive, { params: { archive: archive! } });
    await contributor.finished(jobId!, 60);
    return { archive: archive!, job: jobId!, delivery: delivery.id };
  }

  async function waiveAll(visitor: Pick<Visitor, 'call'>, archive: string): Promise<void> {
    const { findings } = await visitor.call(routes.listArchiveFindings, { params: { archive } });
    for (const finding of findings) {
      if (finding.severity === 'caution') await visitor.call(routes.waiveFinding, { params: { finding: finding.findingId }, body: { reason: 'Known and accepted for this test.' } });
    }
  }

  const dataset = unique('dataset');
  await modeler.call(routes.createDataset, { params: { campaign }, body: { slug: dataset, title: 'Gust' } });

  async function submitDraft(archive: string): Promise<string> {
    const draft = await modeler.call(routes.createDraft, { params: { campaign, dataset }, body: { recipe: gustRecipe([archive]) } });
    const building = await modeler.call(routes.buildDraft, { params: { draft: draft.id } });
    await modeler.finished(building.jobId!, 60);
    await modeler.call(routes.submitDraft, { params: { draft: draft.id }, body: {} });
    return draft.id;
  }

  const first = await handIn();
  await waiveAll(steward as Pick<Visitor, 'call'>, first.archive);
  const released = await submitDraft(first.archive);
  const approved = await steward.call(routes.approveDraft, { params: { draft: released }, body: { licence: 'CC0-1.0', handlingLabel: 'internal', contact: 'A. Person' } });
  await steward.finished(approved.jobId!, 60);
  return { campaign, dataset, ...first, released, version: 1, handIn, submitDraft, waiveAll };
}

export type GustCampaign = Awaited<ReturnType<typeof makeGustCampaign>>;
