/** Pulls: whole files with Range, slices against NumPy, the Python snippet as it stands, tokens, the record of pulls, withdrawal. */
import { execFile } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { pullSnippet } from '#contract/pull-snippet.ts';
import type { Release } from '#contract/release.ts';
import { pathTo, type QueryOf } from '#contract/route.ts';
import { routes } from '#contract/routes.ts';
import { auditLog, release as releaseTable } from '../../server/db/schema/index.ts';
import { makeWakeCampaign, type WakeCampaign } from '../setup/wake-campaign.ts';

const run = promisify(execFile);
// Builds start reading processes, which a busy machine makes wait.
vi.setConfig({ testTimeout: 120_000 });

let wake: WakeCampaign;
let folder: string;
let release: Release;
let address: { campaign: string; dataset: string; version: number };
let secret: string;

beforeAll(async () => {
  wake = await makeWakeCampaign(['adaptive', 'steady']);
  folder = await mkdtemp(join(tmpdir(), 'pennyweight-pull-'));
  const archives = await Promise.all([wake.handIn('adaptive'), wake.handIn('steady')]);
  const { version } = await wake.released(wake.recipe(archives, { split: { by: 'blocks', shares: [0.6, 0.2, 0.2], blocks: 8, seed: 3 }, cast: { type: 'float32' } }));
  address = { campaign: wake.campaign, dataset: wake.dataset, version };
  release = await wake.modeler.call(routes.getRelease, { params: address });
  ({ secret } = await wake.app.makeToken(wake.modeler, { scopes: ['pull'], campaign: wake.campaign }));
}, 300_000);
afterAll(async () => {
  await wake.close();
  await rm(folder, { recursive: true, force: true });
});

/** With the modeler's token, as a program would. */
const get = (path: string, headers: Record<string, string> = {}, method = 'GET') => fetch(wake.app.url + path, { method, headers: { authorization: `Bearer ${secret}`, ...headers } });
const filePath = (path: string) => pathTo(routes.getReleaseFile, { ...address, path });
const matrixPath = (query: QueryOf<typeof routes.getReleaseMatrix> = {}) => pathTo(routes.getReleaseMatrix, address, query);
const bytesOf = async (answer: Response) => Buffer.from(await answer.arrayBuffer());
const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');
const listed = async () => (await wake.keeper.call(routes.listPulls, { params: address })).pulls;
const problem = async (answer: Response) => (await answer.json()) as { code: string; detail: string };

describe('a whole file', () => {
  it.each(['data/matrix.npy', 'data/release.h5', 'data/datasheet.md', 'bagit.txt', 'manifest-sha256.txt', 'ro-crate-metadata.json'])('%s comes byte for byte, with its checksum as ETag', async (path) => {
    const answer = await get(filePath(path)), entry = release.files.find((file) => file.path === path)!;
    const bytes = await bytesOf(answer);
    expect([answer.status, bytes.length, sha256(bytes)]).toEqual([200, entry.bytes, entry.sha256]);
    expect(answer.headers.get('etag')).toBe(`"${entry.sha256}"`);
    expect(answer.headers.get('content-disposition')).toBe(`attachment; filename=${path.split('/').pop()}`);
    expect(answer.headers.get('content-length')).toBe(String(entry.bytes));
  });

  it('goes on where it was interrupted, and is one pull', async () => {
    const entry = release.files.find((file) => file.path === 'data/modes.npy')!, cut = Math.floor(entry.bytes / 3), before = (await listed()).length;
    const first = await get(filePath(entry.path), { range: `bytes=0-${cut - 1}` });
    expect([first.status, first.headers.get('content-range')]).toEqual([206, `bytes 0-${cut - 1}/${entry.bytes}`]);
    const etag = first.headers.get('etag')!;
    const rest = await get(filePath(entry.path), { range: `bytes=${cut}-`, 'if-range': etag });
    expect(rest.status).toBe(206);
    expect(sha256(Buffer.concat([await bytesOf(first), await bytesOf(rest)]))).toBe(entry.sha256);
    expect((await listed()).length).toBe(before + 1);
    const changed = await get(filePath(entry.path), { range: `bytes=${cut}-`, 'if-range': '"another"' });
    expect([changed.status, (await bytesOf(changed)).length]).toEqual([200, entry.bytes]);
  });

  it('cannot be pulled unrecorded by leaving its first byte out', async () => {
    const before = (await listed()).length;
    await bytesOf(await get(filePath('data/coefficients.npy'), { range: 'bytes=1-' }));
    await bytesOf(await get(filePath('data/spectrum.csv'), { range: 'bytes=-50' }));
    expect((await listed()).length).toBe(before + 2);
  });

  it('is asked for its size by HEAD without being pulled, and is not sent again when it is known', async () => {
    const before = (await listed()).length, entry = release.files.find((file) => file.path === 'data/matrix.npy')!;
    const head = await get(filePath(entry.path), {}, 'HEAD');
    expect([head.status, head.headers.get('content-length'), head.headers.get('accept-ranges')]).toEqual([200, String(entry.bytes), 'bytes']);
    expect((await listed()).length).toBe(before);
    // fetch adds "no-cache" of its own to a conditional request.
    const program = wake.app.visitor({ authorization: `Bearer ${secret}` });
    expect((await program.http.get(filePath(entry.path)).set('if-none-match', `"${entry.sha256}"`)).status).toBe(304);
  });

  it('beyond its end cannot be ranged', async () => {
    const answer = await get(filePath('bagit.txt'), { range: 'bytes=100000-' });
    expect(answer.status).toBe(416);
    expect(answer.headers.get('content-range')).toMatch(/^bytes \*\/\d+$/);
    expect(answer.headers.get('content-disposition')).toBeNull();
    expect(await problem(answer)).toMatchObject({ code: 'range-invalid', detail: `bagit.txt has ${release.files.find((file) => file.path === 'bagit.txt')!.bytes} bytes: ask for a range that begins before its end.` });
  });

  it.each(['data/secret', 'data/../../../../etc/passwd', 'data/%2e%2e/%2e%2e/bagit.txt', '..%2f..%2fobjects', 'data', 'DATA/matrix.npy', 'bagit.txt/'])('that is not in the manifest is not there: %s', async (path) => {
    const answer = await fetch(`${wake.app.url}/api/campaigns/${address.campaign}/datasets/${address.dataset}/releases/${address.version}/files/${path}`, { headers: { authorization: `Bearer ${secret}` } });
    expect(answer.status).toBe(404);
    expect((await problem(answer)).code).toBe('not-found');
  });
});

describe('a slice of the matrix', () => {
  const arrays = ['matrix', 'split', 'time_weights', 'space_weights'];
  beforeAll(async () => {
    for (const name of arrays) await writeFile(join(folder, `${name}.npy`), await bytesOf(await get(filePath(`data/${name}.npy`))));
  });

  async function sliced(query: QueryOf<typeof routes.getReleaseMatrix>, columns: string, part: string, rows: string) {
    const answer = await get(matrixPath(query));
    expect(answer.status).toBe(200);
    const bytes = await bytesOf(answer);
    expect(answer.headers.get('content-length')).toBe(String(bytes.length));
    await writeFile(join(folder, 'slice.npy'), bytes);
    const { stdout } = await run('/usr/bin/python3', ['tests/api/pull-by-numpy.py', ...arrays.map((name) => join(folder, `${name}.npy`)), join(folder, 'slice.npy'), columns, part, rows, String(query.weighted ?? false)]);
    return JSON.parse(stdout) as { shape: number[]; expected: number[]; dtype: string; fortran: boolean; equal: boolean; off: number };
  }
  const all = '0:168', u = '0:84', p = '84:168';

  it.each([
    ['all of it', {}, 'all', 'any', all],
    ['columns from:to', { columns: '3:17' }, '3:17', 'any', all],
    ['columns to the end', { columns: '60:' }, '60:', 'any', all],
    ['columns from the beginning', { columns: ':5' }, ':5', 'any', all],
    ['one column', { columns: '9:10' }, '9:10', 'any', all],
    ['the training part', { split: 'train' }, 'all', '0', all],
    ['the validation part', { split: 'validation' }, 'all', '1', all],
    ['the test part within columns', { split: 'test', columns: '10:80' }, '10:80', '2', all],
    ['one field', { fields: ['p'] }, 'all', 'any', p],
    ['fields in another order', { fields: ['p', 'u'] }, 'all', 'any', `${p},${u}`],
    ['one field of the training part', { fields: ['u'], split: 'train' }, 'all', '0', u],
  ] as const)('is what NumPy slices: %s', async (_, query, columns, part, rows) => {
    const found = await sliced(query as QueryOf<typeof routes.getReleaseMatrix>, columns, part, rows);
    expect(found).toMatchObject({ shape: found.expected, dtype: 'float32', fortran: true, equal: true });
  });

  it.each([
    ['all of it', {}, 'all', 'any', all],
    ['one field of the test part', { fields: ['p'], split: 'test' }, 'all', '2', p],
  ] as const)('is weighted by the square roots, in double precision: %s', async (_, query, columns, part, rows) => {
    const found = await sliced({ ...query, weighted: true } as QueryOf<typeof routes.getReleaseMatrix>, columns, part, rows);
    // Two products in another order may differ in the last bit before they are rounded to single precision.
    expect(found).toMatchObject({ shape: found.expected, dtype: 'float32', fortran: true });
    expect(found.off).toBeLessThan(2 ** -23);
  });

  it('tells its size by HEAD and is not pulled by that', async () => {
    const before = (await listed()).length;
    const head = await get(matrixPath({ columns: '0:2' }), {}, 'HEAD');
    expect([head.status, head.headers.get('content-length')]).toEqual([200, String(128 + 168 * 2 * 4)]);
    expect((await listed()).length).toBe(before);
  });

  it.each([
    [{ columns: '0:100000' }, /Columns 0:100000 are outside: there are \d+, numbered from 0, and the end is not included/],
    [{ columns: '5:5' }, /outside/],
    [{ columns: '9:3' }, /outside/],
    [{ fields: ['u', 'q'] }, /no field "q": it has u, p/],
    [{ fields: ['u', 'u'] }, /"u" was asked for twice/],
  ] as const)('outside of what there is is refused with the place: %j', async (query, sentence) => {
    const before = (await listed()).length;
    const answer = await get(matrixPath(query as unknown as QueryOf<typeof routes.getReleaseMatrix>));
    expect(answer.status).toBe(416);
    expect(await problem(answer)).toMatchObject({ code: 'range-invalid', detail: expect.stringMatching(sentence) });
    expect((await listed()).length).toBe(before);
  });

  it('of a part that has no column there is refused', async () => {
    const { split } = await wake.modeler.call(routes.getReleaseBeam, { params: address });
    const other = split![0] === 'test' ? 'train' : 'test';
    const answer = await get(matrixPath({ split: other, columns: '0:1' }));
    expect(answer.status).toBe(416);
    expect((await problem(answer)).detail).toBe(`No column of the ${other} part lies in what was asked for.`);
  });

  it.each(['columns=a:b', 'columns=-3:2', 'columns=1', 'split=all'])('in words that mean nothing is refused: %s', async (query) => {
    const answer = await get(`${matrixPath()}?${query}`);
    expect([answer.status, (await problem(answer)).code]).toEqual([400, 'invalid-input']);
  });

  it('is let go of when the receiver goes away', async () => {
    const leaving = new AbortController();
    const answer = await fetch(wake.app.url + matrixPath(), { headers: { authorization: `Bearer ${secret}` }, signal: leaving.signal });
    leaving.abort();
    await expect(answer.arrayBuffer()).rejects.toThrow();
    expect((await get(matrixPath({ columns: '0:1' }))).status).toBe(200);
  });
});

describe('the Python snippet of the page', () => {
  it('runs as it stands with NumPy and the standard library', async () => {
    const { stdout } = await run('/usr/bin/python3', ['-W', 'error', '-c', pullSnippet(wake.app.url, address)], { env: { PENNYWEIGHT_TOKEN: secret } });
    const train = release.build.split.find((part) => part.part === 'train')!.columns;
    const [, shape, weightedShape, duration, measure] = /^(\(.*?\)) (\(.*?\)) (\S+) (\S+)$/.exec(stdout.trim())!;
    expect([shape, weightedShape]).toEqual([`(168, ${train})`, `(168, ${train})`]);
    expect(Number(duration)).toBeCloseTo(release.build.duration, 10);
    // Two fields on one grid of measure 2.
    expect(Number(measure)).toBeCloseTo(2 * release.build.spaceRule.measure!, 10);
  });
});

describe('who may pull', () => {
  it.each([
    ['without a token', {}, 401, 'not-signed-in'],
    ['with a token that is none', { authorization: 'Bearer nonsense' }, 401, 'not-signed-in'],
  ])('nobody %s', async (_, headers, status, code) => {
    const answer = await fetch(wake.app.url + matrixPath(), { headers: headers as Record<string, string> });
    expect([answer.status, (await problem(answer)).code]).toEqual([status, code]);
  });

  it('nobody with a token of another scope or campaign, nor with a role that does not pull', async () => {
    const reader = await wake.app.makeToken(wake.modeler, { scopes: ['read'], campaign: wake.campaign });
    expect((await reader.send(routes.getReleaseMatrix, { params: address })).body).toMatchObject({ code: 'token-scope' });
    const { slug } = await wake.app.makeCampaign();
    await wake.app.founder.call(routes.putMember, { params: { campaign: slug, account: wake.modeler.id }, body: { roles: ['modeler'] } });
    const elsewhere = await wake.app.makeToken(wake.modeler, { scopes: ['pull'], campaign: slug });
    expect((await elsewhere.send(routes.getReleaseFile, { params: { ...address, path: 'bagit.txt' } })).status).toBeGreaterThanOrEqual(403);
    expect((await wake.contributor.send(routes.getReleaseFile, { params: { ...address, path: 'bagit.txt' } })).body).toMatchObject({ code: 'not-allowed' });
    expect((await (await wake.app.makePerson()).send(routes.getReleaseMatrix, { params: address })).body).toMatchObject({ code: 'not-found' });
  });
});

describe('the record of pulls', () => {
  it('says who, what and how many bytes, and the audit log has one entry each', async () => {
    const query = { columns: '0:4', fields: ['u'], weighted: true };
    await bytesOf(await get(matrixPath(query)));
    const pulls = await listed();
    expect(pulls[0]).toMatchObject({ by: { name: 'Ada Modeler' }, what: 'matrix.npy, all columns 0:4, u, weighted', bytes: 128 + 84 * 4 * 4 });
    const entries = await wake.app.parts.db.select().from(auditLog).where(and(eq(auditLog.action, 'release.pull'), eq(auditLog.objectId, release.id)));
    expect(entries).toHaveLength(pulls.length);
    expect(entries.at(-1)).toMatchObject({ actorName: 'Ada Modeler', via: expect.stringMatching(/token/), after: { what: pulls[0].what, bytes: pulls[0].bytes } });
    expect((await wake.modeler.call(routes.getRelease, { params: address })).pulls).toBe(pulls.length);
    await expect(wake.modeler.call(routes.listPulls, { params: address })).rejects.toMatchObject({ code: 'not-allowed' });
  });
});

describe('a withdrawn release', () => {
  const withdraw = (reason = 'The inflow was wrong from t = 2 s on.') => wake.keeper.call(routes.withdrawRelease, { params: address, body: { reason } });

  it('keeps its page, and pulls fail with the reason and whom to ask', async () => {
    await expect(wake.modeler.call(routes.withdrawRelease, { params: address, body: { reason: 'I do not like it.' } })).rejects.toMatchObject({ code: 'not-allowed' });
    await expect(withdraw('short')).rejects.toMatchObject({ code: 'invalid-input' });
    expect(await withdraw()).toMatchObject({ state: 'withdrawn', withdrawnReason: 'The inflow was wrong from t = 2 s on.', withdrawnBy: { name: 'Grace Steward' }, withdrawnAt: expect.any(String) });
    const before = (await listed()).length;
    for (const path of [filePath('data/matrix.npy'), matrixPath({ columns: '0:1' })]) {
      const answer = await get(path);
      expect(answer.status).toBe(410);
      expect(await problem(answer)).toMatchObject({ code: 'withdrawn', detail: expect.stringMatching(/was withdrawn: The inflow was wrong.*wakes@example\.org/) });
    }
    expect((await listed()).length).toBe(before);
    expect((await wake.modeler.call(routes.getDraft, { params: { draft: release.draft } })).state).toBe('withdrawn');
    const [entry] = await wake.app.parts.db.select().from(auditLog).where(eq(auditLog.action, 'release.withdraw'));
    expect(entry).toMatchObject({ actorName: 'Grace Steward', before: { state: 'released' }, after: { state: 'withdrawn' }, reason: 'The inflow was wrong from t = 2 s on.' });
  });

  it('cannot be withdrawn twice, nor come back, not even by hand', async () => {
    await expect(withdraw()).rejects.toMatchObject({ code: 'wrong-state' });
    const back = wake.app.parts.db.update(releaseTable).set({ state: 'released' }).where(eq(releaseTable.id, release.id));
    await expect(back).rejects.toMatchObject({ cause: { message: expect.stringMatching(/withdrawal is final/) } });
  });

  it('stays on the disk as it was', async () => {
    const [row] = await wake.app.parts.db.select().from(releaseTable).where(eq(releaseTable.id, release.id));
    const path = join(wake.app.parts.storage.folder('releases', row.folder), 'data/matrix.npy');
    expect(sha256(await readFile(path))).toBe(release.build.matrixSha256);
  });
});
