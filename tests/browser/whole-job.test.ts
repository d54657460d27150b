/**
 * The whole job in Chromium, by four people: an HDF5 file written by h5py is handed in, checked, built into a matrix, approved by a steward
 * who had no part in it, pulled with the lines that the page shows, and compared with NumPy and SciPy; the audit log says who did what.
 */
import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startApplication, type RunningApplication } from '../setup/application.ts';
import { complaintsOf, openChromium, shows, signIn } from './chromium.ts';

const script = join(import.meta.dirname ?? 'tests/browser', 'whole_job.py');
const python = (...args: string[]) => execFileSync('/usr/bin/python3', [script, ...args], { encoding: 'utf8' });

let application: RunningApplication;
let browser: Browser;
let folder: string;
const complaints: string[][] = [];

async function person(key: Parameters<typeof signIn>[2]): Promise<Page> {
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, permissions: ['clipboard-read', 'clipboard-write'] });
  const page = await signIn(application, context, key);
  complaints.push(complaintsOf(page));
  return page;
}

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'pennyweight-whole-job-'));
  python('write', join(folder, 'pulse.h5'));
  application = await startApplication({ demo: true });
  browser = await openChromium();
});

afterAll(async () => {
  await browser?.close();
  await application?.stop();
  rmSync(folder, { recursive: true, force: true });
});

describe('the whole job', { sequential: true }, () => {
  it('a contributor hands in the archive and sees its findings', async () => {
    const page = await person('contributor');
    await page.goto(`${application.url}/campaigns/saltmere-basin/hand-in`);
    await page.locator('input[type=file]').first().setInputFiles(join(folder, 'pulse.h5'));
    await page.getByLabel('Run', { exact: true }).fill('pulse');
    await page.getByLabel(/^outfall_excess/).fill('9');
    await page.getByLabel(/^tide_amplitude/).fill('0.12');
    await page.getByRole('button', { name: 'Hand in' }).click();
    await shows(page, 'received and verified');
    await page.getByRole('link', { name: 'See the archive' }).click();
    await shows(page, 'time/uneven-spacing');
    await page.getByRole('radio', { name: /^All/ }).check({ force: true });
    await shows(page, 'grid/uneven');
    // The campaign asks for u and v, and this archive has only the temperature.
    await shows(page, 'reading/incomplete');
    await page.getByRole('link', { name: 'Record and weights' }).click();
    await shows(page, 'Time rules on these stamps');
    await page.getByRole('link', { name: 'Snapshots' }).click();
    await shows(page, /temperature, snapshot 0/);
  });

  it('an administrator asks the campaign for the temperature only, and the archive is checked again', async () => {
    const page = await person('administrator');
    await page.goto(`${application.url}/campaigns/saltmere-basin/settings`);
    for (const name of ['v', 'u']) await page.getByRole('button', { name: `Remove field ${name}` }).click();
    await page.getByLabel('Why (kept in the audit log)').fill('New runs store the temperature only.');
    await page.getByRole('button', { name: 'Save', exact: true }).click();
    await page.getByRole('button', { name: 'Save', exact: true }).waitFor({ state: 'detached' });
    const steward = await person('steward');
    await steward.goto(`${application.url}/campaigns/saltmere-basin`);
    await steward.getByRole('link', { name: 'pulse.h5' }).click();
    await steward.getByRole('button', { name: 'Check again' }).click();
    // Another grid than the demo's runs: a blocker for a set of both, which the select step of a draft settles.
    await steward.getByText('reading/incomplete').waitFor({ state: 'detached' });
    await shows(steward, 'grid/differs');
  });

  it('a modeler builds a matrix from it and submits it', async () => {
    const page = await person('modeler');
    await page.goto(`${application.url}/campaigns/saltmere-basin/datasets`);
    await page.getByRole('button', { name: 'Begin a dataset' }).click();
    await page.getByLabel('Title').fill('Pulse');
    await page.getByRole('button', { name: 'Begin', exact: true }).click();
    await page.getByRole('button', { name: 'Begin a draft' }).click();
    await page.getByRole('checkbox', { name: /^pulse/ }).check({ force: true });
    await page.getByRole('button', { name: 'Begin the draft' }).click();
    await shows(page, 'Time rules on this record');
    await page.getByRole('button', { name: 'Use simpson', exact: true }).click();
    await page.getByRole('button', { name: 'Save the recipe' }).click();
    await page.getByRole('button', { name: 'Save the recipe' }).waitFor({ state: 'detached' });
    await page.getByRole('button', { name: 'Build the matrix' }).click();
    await page.getByRole('button', { name: 'Submit for review' }).click({ timeout: 90_000 });
    await page.getByLabel('Note to the steward').fill('Simpson holds on these stamps.');
    await page.getByRole('button', { name: 'Submit', exact: true }).click();
    await shows(page, 'waits for a steward');
    await page.getByRole('link', { name: 'Findings' }).click();
    await shows(page, /Settled by the recipe: select takes runs of one grid only/);
    await page.getByRole('link', { name: 'Matrix and spectrum' }).click();
    await shows(page, '960 x 61');
    await page.getByRole('button', { name: 'Approve' }).waitFor({ state: 'detached' });
  });

  it('a steward who had no part in it approves it', async () => {
    const page = await person('steward');
    await page.getByRole('link', { name: 'Review' }).click();
    await page.getByRole('link', { name: /Pulse, draft 1/ }).click();
    await page.getByRole('button', { name: 'Approve' }).click();
    await page.getByRole('button', { name: 'Approve and release' }).click();
    await shows(page, 'Release 1 was made from this draft.', 90_000);
  });

  it('the modeler pulls it with the lines of the page, and NumPy and SciPy agree', async () => {
    const page = await person('modeler');
    await page.goto(`${application.url}/tokens`);
    await page.getByLabel('Name').fill('whole job');
    await page.getByRole('button', { name: 'Make the token' }).click();
    const secret = (await page.getByLabel('Token', { exact: true }).innerText()).trim();
    expect(secret).toMatch(/^pw_/);
    await page.goto(`${application.url}/campaigns/saltmere-basin/datasets/pulse/releases/1`);
    await shows(page, 'Training data, not a validated model.');
    const snippet = await page.getByLabel('Python', { exact: true }).innerText();
    const save = `
for name, what in [("matrix", "files/data/matrix.npy"), ("weighted", "matrix.npy?weighted=1"), ("time", "files/data/time.npy"), ("time_weights", "files/data/time_weights.npy"), ("space_weights", "files/data/space_weights.npy"), ("mean", "files/data/mean.npy"), ("singular_values", "files/data/singular_values.npy")]:
    np.save(${JSON.stringify(folder)} + "/" + name, pull(what))
`;
    const printed = execFileSync('/usr/bin/python3', ['-c', snippet + save], { env: { ...process.env, PENNYWEIGHT_TOKEN: secret }, encoding: 'utf8' });
    expect(printed).toMatch(/^\(960, \d+\)/);
    const differences = JSON.parse(python('compare', join(folder, 'pulse.h5'), folder)) as Record<string, number> & { shape: number[]; fortran: boolean };
    expect(differences.shape).toEqual([960, 61]);
    expect(differences.fortran).toBe(true);
    for (const name of ['time', 'time_weights', 'space_weights', 'mean', 'matrix', 'weighted']) expect(differences[name], name).toBeLessThan(1e-12);
    expect(differences.compared).toBeGreaterThan(5);
    expect(differences.singular_values).toBeLessThan(1e-9);
  });

  it('the audit log says who did what, and the chain holds', async () => {
    const page = await person('auditor');
    await page.getByRole('link', { name: 'Audit log' }).click();
    await page.getByRole('searchbox', { name: 'Search' }).fill('Pulse');
    await shows(page, 'release.make');
    const text = await page.locator('main').innerText();
    for (const [who, what] of [['Teo Brandt', 'draft.submit'], ['Marit Halvorsen', 'draft.approve'], ['Teo Brandt', 'release.pull']]) expect(text).toMatch(new RegExp(`${who}[\\s\\S]*?${what.replace('.', '\\.')}`));
    await page.getByRole('button', { name: 'Walk the chain' }).click();
    await shows(page, /entries are in order/);
  });

  it('no page complained', () => expect(complaints.flat()).toEqual([]));
});
