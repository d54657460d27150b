/** Kills the web server and the worker with SIGKILL in the middle of their work: no byte lost, nothing half-made, nothing stuck. */
import { createHash, randomBytes } from 'node:crypto';
import { readdir, stat, truncate, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Delivery } from '#contract/archive.ts';
import { routes } from '#contract/routes.ts';
import { archive, delivery as deliveryTable, deliveryFile, job } from '../../server/db/schema/index.ts';
import { keepDeliveries } from '../../server/services/delivery-upkeep.ts';
import { createTestApp, unique, type Person, type TestApp } from '../setup/app.ts';
import { endProcesses, freePort, startProcess, type ServerProcess } from '../setup/server-process.ts';
import { TusSender } from './tus-sender.ts';

let app: TestApp;
let campaign: string;
let contributor: Person;
let secret: string;
let port: number;

const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');

beforeAll(async () => {
  app = await createTestApp();
  campaign = (await app.makeCampaign()).slug;
  contributor = await app.makePerson({ [campaign]: ['contributor'] });
  ({ secret } = await app.makeToken(contributor, { scopes: ['hand-in'] }));
  port = await freePort();
});
afterAll(async () => {
  await endProcesses();
  await app.close();
});

const announce = (bytes: Uint8Array, name = 'a.npy', announcedSha256: string | null = sha256(bytes)): Promise<Delivery> =>
  contributor.call(routes.createDelivery, { params: { campaign }, body: { run: unique('run'), files: [{ name, bytes: bytes.length, sha256: announcedSha256 }] } });
const look = (delivery: Delivery) => contributor.call(routes.getDelivery, { params: { delivery: delivery.id } });
const received = (id: string) => join(app.parts.storage.uploads(), id);
const senderTo = (server: { url: string }) => new TusSender(server.url, { authorization: `Bearer ${secret}` });
const start = () => startProcess('main', app.parts.config, port);
const archivesOf = (delivery: Delivery) => app.parts.db.select().from(archive).where(eq(archive.deliveryId, delivery.id));

/** A record of doubles as NPY, large enough to be at it for a while. */
function record(megabytes: number): Buffer {
  const snapshots = 64, nodes = (megabytes * 2 ** 20) / 8 / snapshots;
  const head = `{'descr': '<f8', 'fortran_order': False, 'shape': (${snapshots}, ${nodes}), }`;
  const header = Buffer.from(`\x93NUMPY\x01\x00\x00\x00${head.padEnd(117)}\n`, 'latin1');
  header.writeUInt16LE(118, 8);
  const values = new Float64Array(snapshots * nodes).map((_, i) => Math.sin(i * 0.001) + (i % 977));
  return Buffer.concat([header, Buffer.from(values.buffer)]);
}

describe('the web server, killed', () => {
  let server: ServerProcess;
  beforeAll(async () => {
    server = await start();
  }, 120_000);
  afterAll(async () => {
    expect(await server.stop()).toBe(0);
  });

  it('in the middle of a file: what is on the disk counts, and the rest follows', { timeout: 180_000 }, async () => {
    const bytes = randomBytes(8_000_000);
    const delivery = await announce(bytes);
    const { id } = delivery.files[0];
    await senderTo(server).begin(delivery);
    const { request, answered } = senderTo(server).openPatch(id, 0, bytes.length);
    request.write(bytes.subarray(0, 5_000_000));
    await expect.poll(async () => (await stat(received(id))).size, { timeout: 10_000 }).toBeGreaterThan(3_000_000);
    await server.kill();
    await answered.catch(() => undefined);
    const { size } = await stat(received(id));

    server = await start();
    expect(await senderTo(server).offset(id)).toBe(size);
    expect((await senderTo(server).patch(id, size, bytes.subarray(size))).status).toBe(204);
    expect(await look(delivery)).toMatchObject({ state: 'complete', files: [{ sha256: sha256(bytes) }] });
    expect((await app.parts.storage.get(sha256(bytes))).equals(bytes)).toBe(true);
  });

  it('at its last byte: one archive, all bytes', { timeout: 180_000 }, async () => {
    const bytes = randomBytes(3_000_000);
    const delivery = await announce(bytes);
    const { id } = delivery.files[0];
    await senderTo(server).begin(delivery);
    await senderTo(server).patch(id, 0, bytes.subarray(0, 2_999_990));
    const last = senderTo(server).patch(id, 2_999_990, bytes.subarray(2_999_990)).catch(() => null);
    await wait(10);
    await server.kill();
    await last;
    if ((await archivesOf(delivery)).length > 0) expect((await look(delivery)).state).toBe('complete');

    server = await start();
    const offset = await senderTo(server).offset(id);
    if (offset < bytes.length) await senderTo(server).patch(id, offset, bytes.subarray(offset));
    expect(await look(delivery)).toMatchObject({ state: 'complete', files: [{ state: 'verified', sha256: sha256(bytes) }] });
    expect(await archivesOf(delivery)).toHaveLength(1);
    expect((await app.parts.storage.get(sha256(bytes))).equals(bytes)).toBe(true);
    await expect(stat(received(id))).rejects.toMatchObject({ code: 'ENOENT' });
  });
});

describe('what a killed web server left at each step of a hand-in', () => {
  const sender = () => senderTo(app);

  /** All bytes on the disk, and no word of them in the database. */
  async function allThere(announcedSha256?: string): Promise<{ delivery: Delivery; id: string; bytes: Buffer }> {
    const bytes = randomBytes(20_000);
    const delivery = await announce(bytes, 'a.npy', announcedSha256 ?? sha256(bytes));
    const { id } = delivery.files[0];
    await sender().begin(delivery);
    await writeFile(received(id), bytes);
    return { delivery, id, bytes };
  }

  async function isWhole(delivery: Delivery, bytes: Buffer): Promise<void> {
    expect(await look(delivery)).toMatchObject({ state: 'complete', files: [{ state: 'verified', sha256: sha256(bytes) }] });
    expect(await archivesOf(delivery)).toHaveLength(1);
    expect((await app.parts.storage.get(sha256(bytes))).equals(bytes)).toBe(true);
    expect(await readdir(app.parts.storage.uploads())).not.toContain(delivery.files[0].id);
    const jobs = await app.parts.db.select().from(job).where(eq(job.subjectId, (await archivesOf(delivery))[0].id));
    expect(jobs).toHaveLength(1);
  }

  it('before it was verified is finished by the next look', async () => {
    const { delivery, id, bytes } = await allThere();
    expect(await sender().offset(id)).toBe(bytes.length);
    await isWhole(delivery, bytes);
  });

  it('before it was verified is finished by the worker', async () => {
    const { delivery, bytes } = await allThere();
    expect((await keepDeliveries(app.parts, 60)).completed).toBe(0);
    expect((await keepDeliveries(app.parts, 0)).completed).toBe(1);
    await isWhole(delivery, bytes);
    expect(await keepDeliveries(app.parts, 0)).toEqual({ completed: 0, givenUp: 0, removed: 0 });
  });

  it('after it was verified, before and after it moved into storage', async () => {
    for (const moved of [false, true]) {
      const { delivery, id, bytes } = await allThere();
      await app.parts.db.update(deliveryFile).set({ state: 'verified', sha256: sha256(bytes) }).where(eq(deliveryFile.id, id));
      if (moved) await app.parts.storage.adopt(received(id), sha256(bytes));
      expect((await look(delivery)).archive).toBeNull();
      if (moved) expect(await sender().offset(id)).toBe(bytes.length);
      else await keepDeliveries(app.parts, 0);
      await isWhole(delivery, bytes);
    }
  });

  it('of another content than announced is refused by whoever finds it', async () => {
    const { delivery, id } = await allThere('b'.repeat(64));
    await keepDeliveries(app.parts, 0);
    expect(await look(delivery)).toMatchObject({ state: 'refused', archive: null });
    expect(await readdir(app.parts.storage.uploads())).not.toContain(id);
  });

  it('after the archive was made, and before the upload was cleared away', async () => {
    const { delivery, id, bytes } = await allThere();
    await sender().look(id);
    await writeFile(received(id), bytes);
    expect((await keepDeliveries(app.parts, 0)).removed).toBe(1);
    await isWhole(delivery, bytes);
  });

  it('without a byte for a week is given up, and says so', async () => {
    const { delivery, id, bytes } = await allThere();
    await truncate(received(id), 5000);
    await app.parts.db.update(deliveryTable).set({ expiresAt: sql`now() - interval '1 second'` }).where(eq(deliveryTable.id, delivery.id));
    expect((await keepDeliveries(app.parts, 0)).givenUp).toBe(1);
    expect((await look(delivery)).state).toBe('expired');
    expect(await readdir(app.parts.storage.uploads())).not.toContain(id);
    const refused = await sender().patch(id, 5000, bytes.subarray(5000));
    expect(refused).toMatchObject({ status: 409, problem: { code: 'wrong-state', detail: expect.stringContaining('week') as unknown } });
  });

  it('that nobody knows is kept for a week', async () => {
    const unknown = '3f1c2b9e-0000-4000-8000-00000000000f';
    await writeFile(received(unknown), 'bytes');
    await keepDeliveries(app.parts, 0);
    expect(await readdir(app.parts.storage.uploads())).toContain(unknown);
  });
});

describe('the worker', () => {
  let worker: ServerProcess;
  /** An archive with its check in the queue. */
  async function queuedCheck(): Promise<{ archive: string; state: () => Promise<string>; job: () => Promise<typeof job.$inferSelect> }> {
    const bytes = record(32);
    const delivery = await announce(bytes, 'X.npy');
    await senderTo(app).send(delivery, bytes);
    const [row] = await archivesOf(delivery);
    const itsJob = async () => (await app.parts.db.select().from(job).where(eq(job.id, row.jobId!)))[0];
    return { archive: row.id, job: itsJob, state: async () => (await itsJob()).state };
  }
  const archiveRow = async (id: string) => (await app.parts.db.select().from(archive).where(eq(archive.id, id)))[0];

  it('works alone; killed in the middle of a check, its successor takes that up at once', { timeout: 240_000 }, async () => {
    const first = await startProcess('worker', app.parts.config);
    const waiting = startProcess('worker', app.parts.config);
    waiting.catch(() => undefined);
    const { archive: id, state, job: itsJob } = await queuedCheck();
    await expect.poll(state, { timeout: 60_000, interval: 20 }).toBe('running');
    expect(await Promise.race([waiting.then(() => 'working'), wait(10, 'waiting')])).toBe('waiting');
    await first.kill();
    expect(await state()).toBe('running');

    worker = await waiting;
    await expect.poll(state, { timeout: 60_000 }).toBe('done');
    expect((await itsJob()).attempts).toBe(2);
    expect(await archiveRow(id)).toMatchObject({ state: 'checked', snapshots: 64 });
  });

  it('notices within a second that a job was cancelled, and stores nothing of it', { timeout: 180_000 }, async () => {
    const { archive: id, state, job: itsJob } = await queuedCheck();
    await expect.poll(state, { timeout: 60_000, interval: 20 }).toBe('running');
    await app.founder.call(routes.cancelJob, { params: { job: (await itsJob()).id } });
    await wait(2000);
    expect(await state()).toBe('cancelled');
    expect(await archiveRow(id)).toMatchObject({ state: 'checking', contents: null });
    // Nothing of it stands in the way of the next check.
    const again = await contributor.call(routes.recheckArchive, { params: { archive: id } });
    await expect.poll(async () => (await contributor.call(routes.getJob, { params: { job: again.jobId! } })).state, { timeout: 60_000 }).toBe('done');
    expect(await archiveRow(id)).toMatchObject({ state: 'checked' });
  });

  it('leaves nothing stuck, and when it is asked to end its job waits for the next one', { timeout: 180_000 }, async () => {
    expect(await app.parts.db.select().from(job).where(sql`${job.state} = 'running'`)).toEqual([]);
    const { state } = await queuedCheck();
    await expect.poll(state, { timeout: 60_000, interval: 20 }).toBe('running');
    expect(await worker.stop()).toBe(0);
    expect(['queued', 'done']).toContain(await state());
  });
});
