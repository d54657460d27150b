/**
 * Plays the demo's story through the HTTP API as its people: three archives handed in, findings, a waiver, a draft that is returned,
 * amended and released, a pull, and a second draft that waits for its review. Every audit entry is made by the real services.
 */
import { statSync } from 'node:fs';
import { join } from 'node:path';
import type { Recipe } from '#contract/recipe.ts';
import { routes } from '#contract/routes.ts';
import { HttpPerson } from './http-person.ts';
import { demoPeople, type DemoPerson } from './people.ts';
import type { DemoRun } from './scenario.ts';

const campaign = 'saltmere-basin';
const dataset = 'plume-temperature';

type Cast = Record<DemoPerson['key'], HttpPerson>;

async function signInAll(base: string, password: string): Promise<Cast> {
  const cast = {} as Cast;
  for (const person of demoPeople) {
    cast[person.key] = new HttpPerson(base);
    await cast[person.key].signIn(person.email, password);
  }
  return cast;
}

async function openCampaign(cast: Cast): Promise<void> {
  await cast.administrator.call(routes.createCampaign, {
    body: {
      slug: campaign, title: 'Saltmere basin outfall',
      description: 'Invented demo data: a warm outfall in a shallow tidal basin, solved by a small finite-volume code. No real place, group or person.',
      fields: [
        { name: 'temperature', unit: 'K', min: -0.5, max: 15, required: true },
        { name: 'u', unit: 'm/s', min: -1, max: 1, required: true },
        { name: 'v', unit: 'm/s', min: -1, max: 1, required: true },
      ],
      parameters: [
        { name: 'outfall_excess', unit: 'K', min: 6, max: 12 },
        { name: 'tide_amplitude', unit: 'm/s', min: 0.04, max: 0.25 },
      ],
      handlingLabel: 'demo, freely shown', contact: 'Marit Halvorsen', licence: 'CC0-1.0',
    },
  });
  const { accounts } = await cast.administrator.call(routes.listAccounts);
  for (const person of demoPeople) {
    const account = accounts.find((each) => each.email === person.email)!;
    await cast.administrator.call(routes.putMember, { params: { campaign, account: account.id }, body: { roles: person.roles } });
  }
}

/** Hands the runs in; returns the archive of each run. */
async function handIn(person: HttpPerson, runs: DemoRun[], folder: string): Promise<Record<string, string>> {
  const archives: Record<string, string> = {};
  for (const run of runs) {
    const pathOf = (name: string) => join(folder, name);
    const delivery = await person.call(routes.createDelivery, {
      params: { campaign },
      body: { run: run.run, solver: run.solver, parameters: run.parameters, note: run.note, files: [{ name: run.fileName, bytes: statSync(pathOf(run.fileName)).size }] },
    });
    await person.sendFiles(delivery, pathOf);
    const complete = await person.call(routes.getDelivery, { params: { delivery: delivery.id } });
    archives[run.run] = complete.archive!;
    const archive = await person.call(routes.getArchive, { params: { archive: complete.archive! } });
    if (archive.jobId) await person.finished(archive.jobId);
  }
  return archives;
}

function recipeOf(archives: string[], from: number | null, rule: 'trapezoid' | 'simpson-guarded'): Recipe {
  return {
    pennyweight: 1,
    steps: [
      { step: 'select', archives, fields: ['temperature'] },
      { step: 'order', sort: true, restart: 'keep-later', dropDuplicates: true, dropFrozen: true, drop: [] },
      { step: 'window', from, to: null, every: 1, first: null, last: null },
      { step: 'centre', subtract: 'weighted-mean' },
      { step: 'weigh', time: rule, space: 'tensor', runs: 'equal' },
      { step: 'split', by: 'blocks', shares: [0.7, 0.15, 0.15], blocks: 12, guard: 1, seed: 12 },
      { step: 'cast', type: 'float32' },
    ],
  };
}

async function waiveCautions(steward: HttpPerson, archive: string, reasons: Partial<Record<string, string>>): Promise<void> {
  const { findings } = await steward.call(routes.listArchiveFindings, { params: { archive } });
  for (const finding of findings) {
    const reason = reasons[finding.id];
    if (reason && finding.severity === 'caution') await steward.call(routes.waiveFinding, { params: { finding: finding.findingId }, body: { reason } });
  }
}

async function buildAndSubmit(modeler: HttpPerson, draft: string, note: string): Promise<void> {
  const building = await modeler.call(routes.buildDraft, { params: { draft } });
  await modeler.finished(building.jobId!);
  await modeler.call(routes.submitDraft, { params: { draft }, body: { note } });
}

export async function playStory(base: string, password: string, runs: DemoRun[], folder: string): Promise<void> {
  const cast = await signInAll(base, password);
  await openCampaign(cast);
  const archives = await handIn(cast.contributor, runs, folder);
  const { gentle, spring, neap } = archives as { gentle: string; spring: string; neap: string };
  await waiveCautions(cast.steward, neap, { 'time/gap': 'The scratch disk was full for five outputs near slack water, when the plume hardly moves; the trapezoid bridges it well enough.' });

  await cast.modeler.call(routes.createDataset, {
    params: { campaign },
    body: { slug: dataset, title: 'Plume temperature', description: 'Temperature excess of the outfall plume under gentle and neap tide, for reduced-order models of the plume.' },
  });
  const first = await cast.modeler.call(routes.createDraft, { params: { campaign, dataset }, body: { recipe: recipeOf([gentle, neap], null, 'trapezoid') } });
  await buildAndSubmit(cast.modeler, first.id, 'Gentle and neap tide, trapezoid weights.');
  await cast.steward.call(routes.returnDraft, { params: { draft: first.id }, body: { reason: 'The first two hours fill an empty basin: start the window at 7200 s, and compare Simpson where the steps allow it.' } });
  const returned = await cast.modeler.call(routes.getDraft, { params: { draft: first.id } });
  await cast.modeler.call(routes.putRecipe, { params: { draft: first.id }, body: { recipe: recipeOf([gentle, neap], 7200, 'simpson-guarded'), version: returned.version } });
  await buildAndSubmit(cast.modeler, first.id, 'Window from 7200 s, Simpson where neighbouring steps are within 2:1.');
  const approved = await cast.steward.call(routes.approveDraft, {
    params: { draft: first.id },
    body: { note: 'Weights and window as asked.', licence: 'CC0-1.0', handlingLabel: 'demo, freely shown', contact: 'Marit Halvorsen' },
  });
  await cast.steward.finished(approved.jobId!);
  await cast.modeler.call(routes.getReleaseMatrix, { params: { campaign, dataset, version: 1 }, query: { split: 'train', weighted: true } });

  const second = await cast.modeler.call(routes.createDraft, { params: { campaign, dataset }, body: { recipe: recipeOf([gentle, spring, neap], 7200, 'simpson-guarded') } });
  await buildAndSubmit(cast.modeler, second.id, 'Adds the spring tide. Its run was restarted once; the later segment is kept.');
}
