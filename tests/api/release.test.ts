/** The bag of a release: against NumPy and SciPy, sha256sum and h5py; superseding, repeating, a killed worker. */
import { execFile, spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { readFile, readdir, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import { routes } from '#contract/routes.ts';
import type { Release } from '#contract/release.ts';
import { auditLog, draft as draftTable, job as jobTable, release as releaseTable } from '../../server/db/schema/index.ts';
import type { JobHandler } from '../../server/jobs/handle.ts';
import { release as makeRelease } from '../../server/jobs/release.ts';
import { callerOfJob } from '../../server/services/job-runs.ts';
import { approval, makeWakeCampaign, type WakeCampaign } from '../setup/wake-campaign.ts';

const run = promisify(execFile);
// Builds start reading processes, which a busy machine makes wait.
vi.setConfig({ testTimeout: 120_000 });

let wake: WakeCampaign;
let adaptive: string, steady: string, wide: string;

beforeAll(async () => {
  wake = await makeWakeCampaign(['adaptive', 'steady', 'wide']);
  [adaptive, steady, wide] = await Promise.all([wake.handIn('adaptive'), wake.handIn('steady'), wake.handIn('wide')]);
}, 300_000);
afterAll(() => wake.close());

const parts = () => wake.app.parts;
const shown = (version: number): Promise<Release> => wake.modeler.call(routes.getRelease, { params: { ...wake, version } });
async function bagOf(draft: string): Promise<string> {
  const [row] = await parts().db.select().from(releaseTable).where(eq(releaseTable.draftId, draft));
  return parts().storage.folder('releases', row.folder);
}

interface Comparison {
  shape: number[]; expected_shape: number[]; dtype: string; fortran: boolean; time: number; run_index: boolean; time_weights: number; space_weights: number;
  mean: number; matrix: number; cast: number; resolved: number; floor: number; singular_values: number; clear: number; orthonormal: number; reconstruction: number;
  energy_csv: number; split_counts: number[]; hdf5: Record<string, unknown>;
}
async function byNumpy(bag: string, rule: string, type: string, ...records: ('adaptive' | 'steady')[]): Promise<Comparison> {
  const { stdout } = await run('/usr/bin/python3', ['tests/api/release-by-numpy.py', bag, rule, type, ...records.map(wake.fileOf)]);
  return JSON.parse(stdout) as Comparison;
}

describe('a release of two runs, trapezoid, in double precision', () => {
  let draft: string, version: number, bag: string;
  beforeAll(async () => {
    ({ draft, version } = await wake.released(wake.recipe([adaptive, steady], { split: { by: 'blocks', shares: [0.6, 0.2, 0.2], blocks: 8, guard: 1 } })));
    bag = await bagOf(draft);
  }, 300_000);

  it('is what NumPy and SciPy make of the same files', async () => {
    const found = await byNumpy(bag, 'trapezoid', 'float64', 'adaptive', 'steady');
    expect(found).toMatchObject({ shape: found.expected_shape, dtype: 'float64', fortran: true, time: 0, run_index: true });
    const eps = 2 ** -52;
    for (const key of ['time_weights', 'space_weights', 'mean', 'matrix'] as const) expect(found[key], key).toBeLessThan(100 * eps);
    // The correlation route: relative error of sigma about eps (sigma_1 / sigma)^2, here above 1e-4 sigma_1.
    expect(found.clear).toBeGreaterThan(5);
    expect(found.singular_values).toBeLessThan(10 * eps * 1e8);
    expect(found.orthonormal).toBeLessThan(1e-6);
    // No r-dimensional space does better, and these modes do as well (Eckart-Young) to what the floor leaves.
    expect(found.reconstruction).toBeGreaterThan(1 - 1e-9);
    expect(found.reconstruction).toBeLessThan(1.01);
    expect(Math.abs(found.energy_csv)).toBeLessThan(1e-12);
  });

  it('holds the same in release.h5, read by h5py', async () => {
    const { hdf5 } = await byNumpy(bag, 'trapezoid', 'float64', 'adaptive', 'steady');
    expect(hdf5).toMatchObject({ matrix: true, grid: true, fields: { u: [0, 84], p: [84, 168] }, units: ['Pa', 's'], growable: true, caution: expect.stringMatching(/not a validated model/) });
    expect(Object.values(hdf5.arrays as object)).toEqual(new Array(7).fill(true));
  });

  it('is a bag whose manifests sha256sum finds right, complete and with nothing beside them', async () => {
    for (const manifest of ['manifest-sha256.txt', 'tagmanifest-sha256.txt']) {
      const { stdout } = await run('sha256sum', ['-c', '--strict', manifest], { cwd: bag });
      expect(stdout.trim().split('\n').every((line) => line.endsWith(': OK'))).toBe(true);
    }
    const listed = (await readFile(join(bag, 'manifest-sha256.txt'), 'utf8')).trim().split('\n').map((line) => line.split('  ')[1]);
    expect((await readdir(join(bag, 'data'))).map((name) => `data/${name}`).sort()).toEqual(listed);
    const tags = (await readFile(join(bag, 'tagmanifest-sha256.txt'), 'utf8')).trim().split('\n').map((line) => line.split('  ')[1]);
    expect((await readdir(bag)).filter((name) => name !== 'data').sort()).toEqual([...tags, 'tagmanifest-sha256.txt'].sort());
    const oxum = /^Payload-Oxum: (\d+)\.(\d+)$/m.exec(await readFile(join(bag, 'bag-info.txt'), 'utf8'))!;
    const { files } = await shown(version);
    const payload = files.filter((file) => file.path.startsWith('data/'));
    expect([Number(oxum[1]), Number(oxum[2])]).toEqual([payload.reduce((sum, file) => sum + file.bytes, 0), payload.length]);
  });

  it('opens every array with NumPy, and none of them is pickled', async () => {
    const script = 'import sys, glob, numpy as np\nfor path in glob.glob(sys.argv[1] + "/data/*.npy"): np.load(path, allow_pickle=False)\nprint(len(glob.glob(sys.argv[1] + "/data/*.npy")))';
    expect((await run('/usr/bin/python3', ['-c', script, bag])).stdout.trim()).toBe('10');
  });

  it('carries recipe, findings with what was done about them, weights, datasheet and crate', async () => {
    const json = async (name: string) => JSON.parse(await readFile(join(bag, name), 'utf8')) as unknown;
    const { recipe, datasheet } = await shown(version);
    expect(await json('data/recipe.json')).toEqual(recipe);
    expect(await json('data/findings.json')).toContainEqual(expect.objectContaining({ id: 'time/restart-overlap', settledBy: expect.stringMatching(/order/) }));
    expect(await json('data/weights.json')).toMatchObject({ time: [{ used: 'trapezoid', rules: expect.arrayContaining([expect.objectContaining({ id: 'simpson', admissible: false, why: expect.stringMatching(/negative/) })]) }, {}] });
    expect(await readFile(join(bag, 'data/datasheet.md'), 'utf8')).toBe(datasheet);
    expect(datasheet).toMatch(/Ada Modeler, approved by Grace Steward/);
    expect(JSON.stringify(await json('ro-crate-metadata.json'))).toContain('Mary Contributor');
  });

  it('is on its page with caution and citation, and in the audit log once', async () => {
    expect(await shown(version)).toMatchObject({ version, state: 'released', caution: expect.stringMatching(/verification and validation/), citation: expect.stringMatching(/^Ada Modeler \(20\d\d\): Wake, release/), licence: approval.licence, contact: approval.contact, pulls: 0, withdrawnAt: null });
    const made = (await parts().db.select().from(auditLog).where(eq(auditLog.action, 'release.make'))).filter((entry) => (entry.after as { version: number }).version === version);
    expect(made).toHaveLength(1);
    expect((await wake.modeler.call(routes.getDraft, { params: { draft } })).history.at(-1)!.what).toBe('the release was made');
  });

  it('never changes: neither its row nor, by a second run of the job, its files', async () => {
    await expect(parts().db.update(releaseTable).set({ licence: 'another' }).where(eq(releaseTable.draftId, draft))).rejects.toMatchObject({ cause: { message: expect.stringMatching(/never changes/) } });
    await expect(parts().db.delete(releaseTable).where(eq(releaseTable.draftId, draft))).rejects.toMatchObject({ cause: { message: expect.stringMatching(/never removed/) } });
    const before = await parts().storage.folders('releases');
    await byHand(draft, makeRelease);
    expect(await parts().storage.folders('releases')).toEqual(before);
  });
});

/** A job's handler, run here. */
async function byHand(draft: string, handler: JobHandler, app = parts()): Promise<void> {
  const [{ campaignId }] = await parts().db.select().from(draftTable).where(eq(draftTable.id, draft));
  const [job] = await parts().db.insert(jobTable).values({ kind: 'release', subjectType: 'draft', subjectId: draft, label: 'by hand', campaignId, state: 'running', createdBy: wake.keeper.id }).returning();
  await handler(app, { id: job.id, subjectId: draft, signal: new AbortController().signal, report: () => undefined, caller: await callerOfJob(parts(), wake.keeper.id) });
}

describe('a release by Simpson, in single precision', () => {
  it('has the weights of scipy.integrate.simpson, and supersedes the one before', async () => {
    const { draft, version } = await wake.released(wake.recipe([steady], { weigh: { time: 'simpson' }, cast: { type: 'float32' } }));
    const found = await byNumpy(await bagOf(draft), 'simpson', 'float32', 'steady');
    expect(found).toMatchObject({ shape: found.expected_shape, dtype: 'float32', fortran: true, split_counts: [41, 0, 0, 0] });
    expect(found.time_weights).toBeLessThan(1e-13);
    expect(found.matrix).toBeLessThan(2 ** -24);
    const { build } = await shown(version);
    expect(build.castError).toBeCloseTo(found.cast, 15);
    // Below the rounding of single precision nothing is called a singular value.
    expect(found.floor).toBeLessThan(2 ** -23 * 1.01);
    expect(found.hdf5).toMatchObject({ matrix: true });
    const { releases } = await wake.modeler.call(routes.getDataset, { params: wake });
    expect(releases.map((each) => [each.version, each.state])).toEqual([[version, 'released'], [version - 1, 'superseded']]);
  });
});

describe('the release job', () => {
  it('that dies between publishing the bag and its transaction is repeated, and makes one release', async () => {
    const { id } = await wake.built(wake.recipe([steady], { window: { every: 2 } }));
    await wake.modeler.call(routes.submitDraft, { params: { draft: id }, body: {} });
    await wake.stopWorker();
    await wake.warden.call(routes.approveDraft, { params: { draft: id }, body: approval });
    const { storage } = parts();
    const dying = { ...parts(), storage: { ...storage, async publish(...given: Parameters<typeof storage.publish>) {
      await storage.publish(...given);
      throw new PennyweightError('unavailable', 'The worker is gone.');
    } } };
    const before = (await wake.modeler.call(routes.getDataset, { params: wake })).releases.length;
    await expect(byHand(id, makeRelease, dying)).rejects.toMatchObject({ code: 'unavailable' });
    expect((await wake.modeler.call(routes.getDataset, { params: wake })).releases).toHaveLength(before);
    await byHand(id, makeRelease);
    expect((await wake.modeler.call(routes.getDataset, { params: wake })).releases).toHaveLength(before + 1);
    await run('sha256sum', ['-c', '--strict', 'manifest-sha256.txt'], { cwd: await bagOf(id) });
    wake.resumeWorker();
  });

  it('refuses a matrix that is not the one that was approved', async () => {
    const { id, build } = await wake.built(wake.recipe([steady], { window: { every: 3 } }));
    await wake.modeler.call(routes.submitDraft, { params: { draft: id }, body: {} });
    await wake.stopWorker();
    await wake.warden.call(routes.approveDraft, { params: { draft: id }, body: approval });
    await parts().db.update(draftTable).set({ build: { ...build!, matrixSha256: 'f'.repeat(64) } }).where(eq(draftTable.id, id));
    await expect(byHand(id, makeRelease)).rejects.toMatchObject({ code: 'checksum-mismatch' });
    expect(await parts().db.select().from(releaseTable).where(eq(releaseTable.draftId, id))).toEqual([]);
    wake.resumeWorker();
  });
});

describe('a worker that is killed in mid-build', () => {
  const workers: ChildProcess[] = [];
  afterAll(() => workers.forEach((worker) => worker.kill('SIGKILL')));
  function startProcess(): ChildProcess {
    const { databaseUrl, storage, url, secret } = parts().config;
    const env = { ...process.env, DATABASE_URL: databaseUrl, PENNYWEIGHT_STORAGE: storage, PENNYWEIGHT_URL: url, BETTER_AUTH_SECRET: secret, LOG_LEVEL: 'silent' };
    const worker = spawn(process.execPath, ['--import', 'tsx', 'server/worker.ts'], { env, stdio: 'ignore' });
    workers.push(worker);
    return worker;
  }
  const scratch = () => readdir(join(parts().config.storage, 'scratch'));

  it('leaves nothing to be seen, and the next worker makes the same matrix', async () => {
    const recipe = wake.recipe([wide], {}, ['u']);
    const whole = await wake.built(recipe);
    await wake.stopWorker();
    const { id } = await wake.draft(recipe);
    const { jobId } = await wake.modeler.call(routes.buildDraft, { params: { draft: id } });
    const first = startProcess();
    const raw = async () => {
      const [folder] = await scratch();
      return folder ? stat(join(parts().config.storage, 'scratch', folder, 'raw.npy')).then((file) => file.size, () => 0) : 0;
    };
    while ((await raw()) < 2 ** 20) {
      expect(first.exitCode).toBeNull();
      await new Promise((resolve) => setTimeout(resolve, 5));
    }
    first.kill('SIGKILL');
    await once(first, 'exit');
    const builds = await parts().storage.folders('builds');
    expect(await wake.modeler.call(routes.getDraft, { params: { draft: id } })).toMatchObject({ build: null, built: false });
    expect(builds.filter((folder) => folder.startsWith(id))).toEqual([]);
    const second = startProcess();
    expect((await wake.ended(jobId!)).state).toBe('done');
    const { build } = await wake.modeler.call(routes.getDraft, { params: { draft: id } });
    expect(build!.matrixSha256).toBe(whole.build!.matrixSha256);
    expect(await scratch()).toEqual([]);
    second.kill('SIGTERM');
    await once(second, 'exit');
    wake.resumeWorker();
  }, 240_000);
});
