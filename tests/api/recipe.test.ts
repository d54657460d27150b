/** From archives to a built matrix: drafts, preview, builds as jobs, on records written by h5py. */
import { createHash } from 'node:crypto';
import { readFile, readdir } from 'node:fs/promises';
import { join } from 'node:path';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import { routes } from '#contract/routes.ts';
import { auditLog, draft as draftTable, job as jobTable } from '../../server/db/schema/index.ts';
import { build } from '../../server/jobs/build.ts';
import type { JobHandle } from '../../server/jobs/handle.ts';
import { callerOfJob } from '../../server/services/job-runs.ts';
import { removeOrphanedFolders } from '../../server/services/orphaned-folders.ts';
import type { App } from '../../server/services/context.ts';
import { makeWakeCampaign, type WakeCampaign } from '../setup/wake-campaign.ts';

// Builds start reading processes, which a busy machine makes wait.
vi.setConfig({ testTimeout: 120_000 });

let wake: WakeCampaign;
let adaptive: string, steady: string, elsewhere: string;

beforeAll(async () => {
  wake = await makeWakeCampaign(['adaptive', 'steady', 'elsewhere']);
  [adaptive, steady] = await Promise.all([wake.handIn('adaptive'), wake.handIn('steady')]);
  elsewhere = await wake.handIn('elsewhere');
}, 300_000);
afterAll(() => wake.close());

const preview = (recipe: unknown) => wake.modeler.call(routes.previewRecipe, { params: { campaign: wake.campaign }, body: { recipe } });

describe('a preview', () => {
  it('shows what the recipe does to the stamps, and every rule judged, before anything is computed', async () => {
    const shown = await preview(wake.recipe([adaptive, steady], { window: { every: 2 } }));
    expect(shown.problems).toEqual([]);
    // 31 + 26 snapshots of which the restart overlaps some, and 41.
    const [select, order, window] = shown.steps;
    expect(select.after).toBe(57 + 41);
    expect(order.sentence).toMatch(/overlapped snapshots of restarts dropped/);
    expect(window.after).toBe(shown.columns);
    expect(shown.rows).toBe(2 * 84);
    expect(shown.bytes).toBe(shown.rows! * shown.columns! * 8);
    expect(shown.beam!.records.map((record) => record.count).reduce((a, b) => a + b)).toBe(shown.columns);
    expect(shown.beam!.unit).toBe('s');
    expect(shown.rules.map((rule) => rule.id)).toEqual(expect.arrayContaining(['equal', 'trapezoid', 'simpson', 'simpson-guarded']));
    expect(shown.suggestion!.reason).toMatch(/\w/);
  });

  it.each([
    ['a restart that order was told to refuse', () => wake.recipe([adaptive], { order: { restart: 'refuse' } }), 1, /was restarted/],
    ['no order at all', () => wake.recipe([adaptive], { order: null }), 2, /is not after stamp/],
    ['a window without snapshots', () => wake.recipe([steady], { window: { from: 1000 } }), 2, /leaves no snapshot/],
    ['two grids', () => wake.recipe([steady, elsewhere]), 0, /on another grid/],
    ['a field that is not there', () => wake.recipe([steady], {}, ['q']), 0, /no field "q": it has/],
    ['Simpson where its weights are negative', () => wake.recipe([adaptive], { weigh: { time: 'simpson' } }), 3, /negative weight/],
    ['a newer version', () => ({ pennyweight: 99, steps: [] }), null, /version 99/],
  ])('names the step that has %s', async (_, recipe, step, sentence) => {
    const shown = await preview(recipe());
    expect(shown.valid).toBe(false);
    expect(shown.problems).toEqual([{ step, code: expect.any(String), message: expect.stringMatching(sentence) }]);
  });

  it('does not know archives of other campaigns', async () => {
    const { slug } = await wake.app.makeCampaign();
    const stranger = await wake.app.makePerson({ [slug]: ['modeler'] });
    const shown = await stranger.call(routes.previewRecipe, { params: { campaign: slug }, body: { recipe: wake.recipe([steady]) } });
    expect(shown.problems[0].message).toMatch(/is not there/);
    await expect(stranger.call(routes.createDraft, { params: wake, body: { recipe: wake.recipe([steady]) } })).rejects.toMatchObject({ code: 'not-found' });
  });
});

describe('a draft', () => {
  it('names its makers and sources, and refuses a change on an old version', async () => {
    const draft = await wake.draft(wake.recipe([steady]));
    expect(draft).toMatchObject({ state: 'draft', version: 1, stale: false, build: null, built: false });
    expect(draft.makers.map((maker) => maker.id).sort()).toEqual([wake.modeler.id, wake.contributor.id].sort());
    expect(draft.sources).toMatchObject([{ archive: steady, handedInBy: { id: wake.contributor.id }, state: 'checked', sha256: createHash('sha256').update(await readFile(wake.fileOf('steady'))).digest('hex') }]);
    const put = (version: number) => wake.modeler.call(routes.putRecipe, { params: { draft: draft.id }, body: { recipe: wake.recipe([steady], { cast: { type: 'float32' } }), version } });
    expect((await put(1)).version).toBe(2);
    await expect(put(1)).rejects.toMatchObject({ code: 'stale-version' });
  });

  it('counts whoever changed its recipe or had it built among its makers, also later', async () => {
    const draft = await wake.draft(wake.recipe([steady]));
    const put = (by: typeof wake.modeler, version: number) => by.call(routes.putRecipe, { params: { draft: draft.id }, body: { recipe: wake.recipe([steady], { window: { every: version } }), version } });
    await put(wake.keeper, 1);
    const { makers } = await put(wake.modeler, 2);
    expect(makers.map((maker) => maker.id)).toContain(wake.keeper.id);
    expect((await wake.warden.call(routes.buildDraft, { params: { draft: draft.id } })).makers.map((maker) => maker.id)).toContain(wake.warden.id);
  });

  it('refuses a recipe that is none, and archives that are not of the campaign', async () => {
    await expect(wake.draft({ pennyweight: 1, steps: [] })).rejects.toMatchObject({ code: 'invalid-input' });
    await expect(wake.draft(wake.recipe(['00000000-0000-4000-8000-000000000000']))).rejects.toMatchObject({ code: 'recipe-invalid', message: expect.stringMatching(/is not in this campaign/) });
  });

  it('shows the findings of its sources, each with what the recipe does about it', async () => {
    const findingsOf = async (recipe: ReturnType<typeof wake.recipe>) => (await wake.modeler.call(routes.listDraftFindings, { params: { draft: (await wake.draft(recipe)).id } })).findings;
    const mended = await findingsOf(wake.recipe([adaptive]));
    expect(mended.find((finding) => finding.id === 'time/restart-overlap')).toMatchObject({ severity: 'blocker', archive: adaptive, archiveName: 'adaptive.h5', settledBy: expect.stringMatching(/^order/) });
    expect(mended.find((finding) => finding.id === 'time/uneven-spacing')).toMatchObject({ settledBy: expect.stringMatching(/trapezoid/) });
    const raw = await findingsOf(wake.recipe([adaptive], { order: null, weigh: null }));
    expect(raw.find((finding) => finding.id === 'time/restart-overlap')!.settledBy).toBeNull();
    const alone = await findingsOf(wake.recipe([elsewhere]));
    expect(alone.find((finding) => finding.id === 'grid/differs')).toMatchObject({ severity: 'blocker', settledBy: expect.stringMatching(/one grid only/) });
  });
});

describe('a build', () => {
  const filesOf = async (folder: string) => Object.fromEntries(await Promise.all((await readdir(folder)).sort().map(async (name) => [name, createHash('sha256').update(await readFile(join(folder, name))).digest('hex')])));
  const rowOf = async (id: string) => (await wake.app.parts.db.select().from(draftTable).where(eq(draftTable.id, id)))[0];
  const folderOf = async (id: string) => wake.app.parts.storage.folder('builds', (await rowOf(id)).buildFolder!);

  it('says what it made', async () => {
    const { build, stale, built } = await wake.built(wake.recipe([adaptive, steady], { split: { by: 'run', shares: [0.5, 0, 0.5] }, cast: { type: 'float32' } }));
    expect([stale, built]).toEqual([false, true]);
    expect(build).toMatchObject({ rows: 168, type: 'float32', timeRule: 'trapezoid', spaceRule: { chosen: 'tensor' }, centred: 'weighted-mean' });
    expect(build!.records.map((record) => record.parameters)).toEqual([{ re: 100 }, { re: 200 }]);
    expect(build!.fields.map(({ name, unit, shape }) => [name, unit, shape])).toEqual([['u', 'm/s', [7, 12]], ['p', 'Pa', [7, 12]]]);
    expect(build!.castError).toBeGreaterThan(0);
    expect(build!.castError).toBeLessThan(2 ** -24 * 4);
    expect(build!.split.reduce((sum, part) => sum + part.columns, 0)).toBe(build!.columns);
    expect(build!.steps.map((step) => step.step)).toEqual(['select', 'order', 'centre', 'weigh', 'split', 'cast']);
  });

  it.each([
    ['weighted-mean-per-run', (mean: number[]) => expect(Math.max(...mean.map(Math.abs))).toBeLessThan(1e-13)],
    ['first-snapshot', (_: number[], first: Float64Array) => expect(first.every((value) => value === 0)).toBe(true)],
    ['nothing', (mean: number[]) => expect(Math.max(...mean.map(Math.abs))).toBeGreaterThan(0.1)],
  ] as const)('subtracts %s', async (subtract, expectation) => {
    const { id, build } = await wake.built(wake.recipe([adaptive, steady], { centre: { subtract } })), folder = await folderOf(id);
    const { rows, columns, records } = build!;
    const doubles = async (name: string) => {
      const bytes = await readFile(join(folder, name));
      return new Float64Array(bytes.buffer.slice(bytes.byteOffset + 10 + bytes.readUInt16LE(8), bytes.byteOffset + bytes.length));
    };
    const X = await doubles('matrix.npy'), a = await doubles('time_weights.npy'), subtracted = await doubles('mean.npy');
    expect(X).toHaveLength(rows * columns);
    // Weighted mean of what is left, of each run by itself.
    const left = records.flatMap(({ from, count }) => Array.from({ length: rows }, (_, i) => {
      let sum = 0, total = 0;
      for (let j = from; j < from + count; j++) {
        sum += a[j] * X[j * rows + i];
        total += a[j];
      }
      return sum / total;
    }));
    expectation(left, X.subarray(0, rows));
    expect(subtracted.length / rows).toBe(subtract === 'weighted-mean-per-run' ? 2 : 1);
    expect(build!.centred).toBe(subtract);
  });

  it('of the same sources and recipe is the same to the last byte', async () => {
    const recipe = wake.recipe([adaptive, steady], { split: { by: 'blocks', shares: [0.6, 0.2, 0.2] } });
    const [one, other] = await Promise.all([wake.built(recipe), wake.built(recipe)]);
    const files = await filesOf(await folderOf(one.id));
    expect(await filesOf(await folderOf(other.id))).toEqual(files);
    expect(Object.keys(files)).toEqual(['coefficients.npy', 'fields.json', 'matrix.npy', 'mean.npy', 'modes.npy', 'recipe.json', 'run_index.npy', 'singular_values.npy', 'space_weights.npy', 'spectrum.csv', 'split.npy', 'time.npy', 'time_weights.npy', 'weights.json']);
    expect(files['matrix.npy']).toBe(one.build!.matrixSha256);
  });

  it('goes when the next one is there, and is stale when the recipe changed', async () => {
    const draft = await wake.built(wake.recipe([steady]));
    const before = await folderOf(draft.id);
    const changed = await wake.modeler.call(routes.putRecipe, { params: { draft: draft.id }, body: { recipe: wake.recipe([steady], { window: { every: 2 } }), version: draft.version } });
    expect(changed.stale).toBe(true);
    await expect(wake.modeler.call(routes.submitDraft, { params: { draft: draft.id }, body: {} })).rejects.toMatchObject({ code: 'wrong-state', message: expect.stringMatching(/build it again/) });
    const { jobId } = await wake.modeler.call(routes.buildDraft, { params: { draft: draft.id } });
    expect((await wake.ended(jobId!)).state).toBe('done');
    expect(await folderOf(draft.id)).not.toBe(before);
    await expect(readdir(before)).rejects.toMatchObject({ code: 'ENOENT' });
    expect((await wake.modeler.call(routes.getDraft, { params: { draft: draft.id } })).stale).toBe(false);
  });

  it('is stale when a source is read anew', async () => {
    const archive = await wake.handIn('steady');
    const draft = await wake.built(wake.recipe([archive]));
    const { reading } = await wake.contributor.call(routes.getArchiveReading, { params: { archive } });
    const corrected = { ...reading, fields: reading.fields.map((field) => (field.name === 'u' ? { ...field, unit: 'cm/s' } : field)) };
    const { jobId } = await wake.contributor.call(routes.putArchiveReading, { params: { archive }, body: { reading: corrected, reason: 'The unit was wrong.' } });
    await wake.ended(jobId!);
    expect((await wake.modeler.call(routes.getDraft, { params: { draft: draft.id } })).stale).toBe(true);
  });

  it('shows beam, columns, modes and mean as they lie in its files', async () => {
    const draft = await wake.built(wake.recipe([adaptive]));
    const beam = await wake.modeler.call(routes.getDraftBeam, { params: { draft: draft.id } });
    expect(beam).toMatchObject({ count: draft.build!.columns, unit: 's', rule: 'trapezoid' });
    expect(beam.stamps!.every((t, j) => j === 0 || t > beam.stamps![j - 1])).toBe(true);
    const values = (of: 'column' | 'mode' | 'mean', index = 0, field = 'p') => wake.modeler.call(routes.getDraftValues, { params: { draft: draft.id }, query: { of, index, field } });
    const column = await values('column', 3), folder = await folderOf(draft.id);
    const bytes = await readFile(join(folder, 'matrix.npy'));
    const stored = new Float64Array(bytes.buffer.slice(bytes.byteOffset + bytes.length - 8 * draft.build!.rows * draft.build!.columns, bytes.byteOffset + bytes.length));
    expect(column.values).toEqual(Array.from(stored.subarray(3 * 168 + 84, 4 * 168)));
    expect(column.axes.map((axis) => [axis.name, axis.count])).toEqual([['y', 7], ['x', 12]]);
    expect(column.time).toBe(beam.stamps![3]);
    expect((await values('mode', 1)).values).toHaveLength(84);
    expect((await values('mean')).unit).toBe('Pa');
    await expect(values('column', 10_000)).rejects.toMatchObject({ code: 'range-invalid' });
    await expect(values('column', 0, 'q')).rejects.toMatchObject({ code: 'not-found' });
  });

  it('that cannot be made fails with the step and the reason, and leaves nothing', async () => {
    const draft = await wake.draft(wake.recipe([adaptive], { order: null }));
    const { jobId } = await wake.modeler.call(routes.buildDraft, { params: { draft: draft.id } });
    expect(await wake.ended(jobId!)).toMatchObject({ state: 'failed', problem: { code: 'recipe-invalid', detail: expect.stringMatching(/^Step 3: .*is not after stamp/) } });
    expect(await rowOf(draft.id)).toMatchObject({ build: null, buildFolder: null });
  });

  /** Runs the handler by hand on parts that a test has put its finger into. */
  async function runByHand(id: string, parts: Partial<App>, signal = new AbortController().signal, report: JobHandle['report'] = () => undefined) {
    const [job] = await wake.app.parts.db.insert(jobTable).values({ kind: 'build', subjectType: 'draft', subjectId: id, label: 'by hand', campaignId: (await rowOf(id)).campaignId, state: 'running', createdBy: wake.modeler.id }).returning();
    const caller = await callerOfJob(wake.app.parts, wake.modeler.id);
    return { job: job.id, ended: build({ ...wake.app.parts, ...parts }, { id: job.id, subjectId: id, signal, report, caller }) };
  }
  const nothingLeft = async (id: string, before: string[]) => {
    expect(await rowOf(id)).toMatchObject({ build: null, buildFolder: null });
    expect(await wake.app.parts.storage.folders('builds')).toEqual(before);
    expect(await readdir(join(wake.app.parts.config.storage, 'scratch'))).toEqual([]);
    expect(await wake.app.parts.db.select().from(auditLog).where(eq(auditLog.objectId, id))).toEqual([expect.objectContaining({ action: 'draft.begin' })]);
  };

  it.each(['reading', 'centring', 'spectrum', 'modes'])('that is cancelled while at "%s" leaves nothing', async (phase) => {
    const { id } = await wake.draft(wake.recipe([steady])), before = await wake.app.parts.storage.folders('builds');
    const cancel = new AbortController();
    const { ended } = await runByHand(id, {}, cancel.signal, (progress) => {
      if (progress.phase.startsWith(phase)) cancel.abort(new PennyweightError('job-cancelled', 'The job was cancelled.'));
    });
    await expect(ended).rejects.toMatchObject({ code: 'job-cancelled' });
    await nothingLeft(id, before);
  });

  it('that is cancelled when all but its transaction is done leaves nothing', async () => {
    const { id } = await wake.draft(wake.recipe([steady])), before = await wake.app.parts.storage.folders('builds');
    const { storage } = wake.app.parts;
    const run: { job?: string } = {};
    const interposed = {
      ...storage,
      async publish(...given: Parameters<typeof storage.publish>) {
        const folder = await storage.publish(...given);
        await wake.modeler.call(routes.cancelJob, { params: { job: run.job! } });
        return folder;
      },
    };
    const started = await runByHand(id, { storage: interposed });
    run.job = started.job;
    await expect(started.ended).rejects.toMatchObject({ code: 'job-cancelled' });
    await nothingLeft(id, before);
  });

  it('whose worker dies between publishing and the transaction is cleared by the next worker, and nothing else is', async () => {
    const kept = await wake.built(wake.recipe([steady]));
    const { id } = await wake.draft(wake.recipe([steady])), before = await wake.app.parts.storage.folders('builds');
    const { storage } = wake.app.parts;
    const lost = { ...storage, removeFolder: () => Promise.resolve(), async publish(...given: Parameters<typeof storage.publish>) {
      await storage.publish(...given);
      throw new PennyweightError('unavailable', 'The worker is gone.');
    } };
    await expect((await runByHand(id, { storage: lost })).ended).rejects.toMatchObject({ code: 'unavailable' });
    expect((await storage.folders('builds')).length).toBe(before.length + 1);
    expect(await removeOrphanedFolders(wake.app.parts)).toBe(1);
    await nothingLeft(id, before);
    expect(await filesOf(await folderOf(kept.id))).toHaveProperty('matrix.npy', kept.build!.matrixSha256);
  });
});
