import { createHash, randomBytes } from 'node:crypto';
import { readdir } from 'node:fs/promises';
import { setTimeout as wait } from 'node:timers/promises';
import { desc, eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Upload } from 'tus-js-client';
import { tusPath, type Delivery } from '#contract/archive.ts';
import { routes } from '#contract/routes.ts';
import { auditLog, session } from '../../server/db/schema/index.ts';
import { createTestApp, unique, type Person, type TestApp } from '../setup/app.ts';
import { metadataOf, signedInSender, TusSender } from './tus-sender.ts';

let app: TestApp;
let campaign: string;
let contributor: Person;
let colleague: Person;
let sender: TusSender;

const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');

beforeAll(async () => {
  app = await createTestApp();
  campaign = (await app.makeCampaign()).slug;
  contributor = await app.makePerson({ [campaign]: ['contributor'] }, 'Ada Sender');
  colleague = await app.makePerson({ [campaign]: ['contributor'] });
  sender = await signedInSender(app.url, contributor);
});
afterAll(() => app.close());

interface Announced {
  name?: string;
  bytes: Uint8Array;
  sha256?: string | null;
}

function announce(files: Announced[], more: { run?: string; campaign?: string } = {}): Promise<Delivery> {
  return contributor.call(routes.createDelivery, {
    params: { campaign: more.campaign ?? campaign },
    body: { run: more.run ?? unique('run'), solver: 'solver', files: files.map((file, i) => ({ name: file.name ?? `part-${i}.h5`, bytes: file.bytes.length, sha256: file.sha256 ?? null })) },
  });
}

const look = (delivery: Delivery) => contributor.call(routes.getDelivery, { params: { delivery: delivery.id } });
const uploads = () => readdir(app.parts.storage.uploads());
const lastAudit = async (objectId: string) => (await app.parts.db.select().from(auditLog).where(eq(auditLog.objectId, objectId)).orderBy(desc(auditLog.seq)))[0];

describe('an upload', () => {
  it('becomes an archive with its last byte, and not before', async () => {
    const bytes = randomBytes(3_000_000);
    const delivery = await announce([{ bytes, sha256: sha256(bytes) }]);
    const [file] = delivery.files;
    const begun = await sender.begin(delivery);
    expect(begun.status).toBe(201);
    expect(begun.headers.get('location')).toBe(`${tusPath}/${file.id}`);

    expect((await sender.patch(file.id, 0, bytes.subarray(0, 1_000_000))).status).toBe(204);
    expect(await sender.offset(file.id)).toBe(1_000_000);
    const half = await look(delivery);
    expect(half).toMatchObject({ state: 'open', archive: null, files: [{ state: 'receiving', received: 1_000_000, sha256: null }] });

    await sender.patch(file.id, 1_000_000, bytes.subarray(1_000_000, 2_999_999));
    expect((await look(delivery)).archive).toBeNull();
    expect((await sender.patch(file.id, 2_999_999, bytes.subarray(2_999_999))).status).toBe(204);

    const whole = await look(delivery);
    expect(whole).toMatchObject({ state: 'complete', files: [{ state: 'verified', received: 3_000_000, sha256: sha256(bytes) }] });
    const archive = await contributor.call(routes.getArchive, { params: { archive: whole.archive! } });
    expect(archive).toMatchObject({ run: delivery.run, solver: 'solver', bytes: 3_000_000, state: 'checking', files: [{ name: 'part-0.h5', bytes: 3_000_000, sha256: sha256(bytes) }] });
    expect(archive.jobId).not.toBeNull();
    expect((await app.parts.storage.get(sha256(bytes))).equals(bytes)).toBe(true);
    expect(await uploads()).not.toContain(file.id);
    // A sender that did not get the last answer asks again.
    expect(await sender.offset(file.id)).toBe(3_000_000);
  });

  it('is sent by the client of the pages, in chunks', async () => {
    const bytes = randomBytes(2_500_000);
    const delivery = await announce([{ bytes }]);
    const [file] = delivery.files;
    await new Promise<void>((resolve, reject) => {
      new Upload(bytes, {
        endpoint: app.url + tusPath, chunkSize: 1_000_000, headers: sender.credentials, retryDelays: null,
        metadata: { delivery: delivery.id, file: file.id, filename: file.name }, onSuccess: () => resolve(), onError: reject,
      }).start();
    });
    expect((await look(delivery)).files[0].sha256).toBe(sha256(bytes));
  });

  it('goes on where the connection broke', async () => {
    const bytes = randomBytes(2_000_000);
    const delivery = await announce([{ bytes, sha256: sha256(bytes) }]);
    const { id } = delivery.files[0];
    await sender.begin(delivery);
    const { request, answered } = sender.openPatch(id, 0, bytes.length);
    request.write(bytes.subarray(0, 1_200_000));
    await expect.poll(async () => (await look(delivery)).files[0].received).toBeGreaterThan(900_000);
    request.destroy();
    await expect(answered).rejects.toThrow();
    await expect.poll(async () => (await sender.look(id)).status, { timeout: 5000 }).toBe(200);

    const offset = await sender.offset(id);
    expect(offset).toBeGreaterThan(900_000);
    expect(offset).toBeLessThanOrEqual(1_200_000);
    expect((await sender.patch(id, offset, bytes.subarray(offset))).status).toBe(204);
    expect(await look(delivery)).toMatchObject({ state: 'complete', files: [{ sha256: sha256(bytes) }] });
  });

  it('of several files becomes one archive with the last of them', async () => {
    const parts = [randomBytes(1000), randomBytes(2000), randomBytes(3000)];
    const delivery = await announce(parts.map((bytes, i) => ({ name: `u_${i}.npy`, bytes })));
    for (const position of [2, 0]) {
      await sender.send(delivery, parts[position], { position });
      expect((await look(delivery)).archive).toBeNull();
    }
    await sender.send(delivery, parts[1], { position: 1 });
    const { archive } = await look(delivery);
    expect(await contributor.call(routes.getArchive, { params: { archive: archive! } })).toMatchObject({
      name: 'u_0.npy and 2 more', bytes: 6000, files: parts.map((bytes, i) => ({ name: `u_${i}.npy`, bytes: bytes.length, sha256: sha256(bytes) })),
    });
  });

  it('of content that is there already is stored once, and is an archive of its own', async () => {
    const bytes = randomBytes(100_000);
    await sender.send(await announce([{ bytes }]), bytes);
    const { objects } = await app.parts.storage.usage();
    const again = await announce([{ bytes }]);
    expect((await sender.send(again, bytes)).status).toBe(204);
    expect((await app.parts.storage.usage()).objects).toBe(objects);
    expect((await look(again)).archive).not.toBeNull();
  });

  it('is in the audit log from its announcement to its archive', async () => {
    const bytes = randomBytes(1000);
    const delivery = await announce([{ bytes }]);
    await sender.send(delivery, bytes);
    const { archive } = await look(delivery);
    expect(await lastAudit(delivery.id)).toMatchObject({ action: 'delivery.announce', actorName: 'Ada Sender', via: 'session' });
    expect(await lastAudit(archive!)).toMatchObject({ action: 'archive.hand-in', actorName: 'Ada Sender', after: { run: delivery.run, files: [{ sha256: sha256(bytes) }] } });
  });

  it('that is begun twice keeps what it has', async () => {
    const bytes = randomBytes(2000);
    const delivery = await announce([{ bytes }]);
    const { id } = delivery.files[0];
    await sender.begin(delivery);
    expect((await sender.begin(delivery)).status).toBe(201);
    await sender.patch(id, 0, bytes.subarray(0, 500));
    expect(await sender.begin(delivery)).toMatchObject({ status: 409, problem: { code: 'conflict', details: { received: 500 } } });
    expect(await sender.offset(id)).toBe(500);
  });

  it('can be taken back and begun anew', async () => {
    const bytes = randomBytes(2000);
    const delivery = await announce([{ bytes }]);
    const { id } = delivery.files[0];
    await sender.begin(delivery);
    await sender.patch(id, 0, randomBytes(500));
    expect((await sender.remove(id)).status).toBe(204);
    expect((await sender.look(id)).status).toBe(404);
    expect((await look(delivery)).files[0]).toMatchObject({ state: 'waiting', received: 0 });
    expect((await sender.send(delivery, bytes)).status).toBe(204);
    expect((await look(delivery)).files[0].sha256).toBe(sha256(bytes));
  });
});

describe('a wrong checksum', () => {
  it('refuses the delivery with a finding, removes its bytes, and shows no archive', async () => {
    const bytes = randomBytes(50_000), other = randomBytes(1000);
    const { objects } = await app.parts.storage.usage();
    const delivery = await announce([{ bytes: other }, { bytes, sha256: 'a'.repeat(64) }]);
    await sender.send(delivery, other, { position: 0 });
    const refused = await sender.send(delivery, bytes, { position: 1 });
    expect(refused).toMatchObject({ status: 422, problem: { code: 'checksum-mismatch', status: 422, detail: expect.stringContaining('part-1.h5') as unknown } });

    const after = await look(delivery);
    expect(after).toMatchObject({ state: 'refused', archive: null, files: [{ state: 'verified' }, { state: 'refused', sha256: sha256(bytes) }], findings: [{ id: 'file/checksum-mismatch', severity: 'blocker' }] });
    expect(after.problem).toBe(refused.problem?.detail);
    const left = await uploads();
    for (const file of delivery.files) expect(left).not.toContain(file.id);
    expect((await app.parts.storage.usage()).objects).toBe(objects);
    expect(await lastAudit(delivery.id)).toMatchObject({ action: 'delivery.refuse', after: { received: sha256(bytes), announced: 'a'.repeat(64) } });
    const { archives } = await contributor.call(routes.listArchives, { params: { campaign }, query: { q: delivery.run } });
    expect(archives).toEqual([]);

    expect((await sender.look(delivery.files[1].id)).status).toBe(422);
    expect((await sender.begin(delivery, 1)).problem?.code).toBe('checksum-mismatch');
    expect((await contributor.call(routes.listDeliveries, { params: { campaign } })).deliveries.map(({ id }) => id)).toContain(delivery.id);
    expect((await contributor.send(routes.cancelDelivery, { params: { delivery: delivery.id } })).status).toBe(204);
    expect((await contributor.call(routes.listDeliveries, { params: { campaign } })).deliveries.map(({ id }) => id)).not.toContain(delivery.id);
  });
});

describe('bytes beyond those announced', () => {
  const bytes = randomBytes(10_000), more = randomBytes(12_000);

  it('are refused with the length of the upload', async () => {
    const delivery = await announce([{ bytes }]);
    expect(await sender.begin(delivery, 0, { 'upload-length': '12000' })).toMatchObject({ status: 413, problem: { code: 'upload-too-long', details: { announced: 10_000, sent: 12_000 } } });
    expect(await sender.begin(delivery, 0, { 'upload-length': '9000' })).toMatchObject({ status: 400, problem: { code: 'invalid-input' } });
    expect(await uploads()).not.toContain(delivery.files[0].id);
  });

  it('are refused when a request says that it brings them, and the upload goes on', async () => {
    const delivery = await announce([{ bytes, sha256: sha256(bytes) }]);
    const { id } = delivery.files[0];
    await sender.begin(delivery);
    expect(await sender.patch(id, 0, more)).toMatchObject({ status: 413, problem: { code: 'upload-too-long' } });
    expect(await sender.offset(id)).toBe(0);
    expect((await sender.patch(id, 0, bytes)).status).toBe(204);
    expect((await look(delivery)).state).toBe('complete');
  });

  it('are refused when they come without being counted first', async () => {
    const delivery = await announce([{ bytes, sha256: sha256(bytes) }]);
    const { id } = delivery.files[0];
    await sender.begin(delivery);
    const { request, answered } = sender.openPatch(id, 0);
    request.write(more.subarray(0, 8000));
    await wait(50);
    request.end(more.subarray(8000));
    expect(await answered).toMatchObject({ status: 413, problem: { code: 'upload-too-long' } });
    expect(await look(delivery)).toMatchObject({ state: 'open', archive: null });
    expect(await sender.offset(id)).toBeLessThanOrEqual(bytes.length);
  });

  it('are refused as a length that is to be told later', async () => {
    const delivery = await announce([{ bytes }]);
    const { id, name } = delivery.files[0];
    const refused = await sender.call('POST', tusPath, { 'upload-defer-length': '1', 'upload-metadata': metadataOf({ delivery: delivery.id, file: id, filename: name }) });
    expect(refused).toMatchObject({ status: 400, problem: { code: 'invalid-input' } });
  });
});

describe('who may send', () => {
  const bytes = randomBytes(4000);

  it('is told when the session has ended in mid-upload; what was received stays', async () => {
    const person = await app.makePerson({ [campaign]: ['contributor'] });
    const theirs = await signedInSender(app.url, person);
    const delivery = await person.call(routes.createDelivery, { params: { campaign }, body: { run: unique('run'), files: [{ name: 'a.h5', bytes: bytes.length }] } });
    const { id } = delivery.files[0];
    await theirs.begin(delivery);
    await theirs.patch(id, 0, bytes.subarray(0, 1500));
    await app.parts.db.update(session).set({ expiresAt: sql`now() - interval '1 minute'` }).where(eq(session.userId, person.id));
    const refused = await theirs.patch(id, 1500, bytes.subarray(1500));
    expect(refused).toMatchObject({ status: 401, problem: { code: 'session-expired', status: 401 } });
    expect((await theirs.look(id)).status).toBe(401);

    const again = await signedInSender(app.url, person);
    expect(await again.offset(id)).toBe(1500);
    expect((await again.patch(id, 1500, bytes.subarray(1500))).status).toBe(204);
    const visitor = await app.signIn(person);
    expect((await visitor.call(routes.getDelivery, { params: { delivery: delivery.id } })).files[0].sha256).toBe(sha256(bytes));
  });

  it('is only who announced the delivery', async () => {
    const delivery = await announce([{ bytes }]);
    const { id } = delivery.files[0];
    await sender.begin(delivery);
    const other = await signedInSender(app.url, colleague);
    for (const refused of [await other.begin(delivery), await other.patch(id, 0, bytes), await other.remove(id)]) {
      expect(refused).toMatchObject({ status: 403, problem: { code: 'not-allowed', detail: expect.stringContaining('Ada Sender') as unknown } });
    }
    expect((await other.look(id)).status).toBe(403);
    const stranger = await signedInSender(app.url, await app.makeAccountFor());
    expect(await stranger.patch(id, 0, bytes)).toMatchObject({ status: 404, problem: { code: 'not-found' } });
    const nobody = new TusSender(app.url, {});
    expect(await nobody.patch(id, 0, bytes)).toMatchObject({ status: 401, problem: { code: 'not-signed-in' } });
    expect(await sender.offset(id)).toBe(0);
  });

  it('may hold a token that was made for it, and no other', async () => {
    const reading = await app.makeToken(contributor, { scopes: ['read'] });
    const handing = await app.makeToken(contributor, { scopes: ['hand-in'] });
    const delivery = await handing.call(routes.createDelivery, { params: { campaign }, body: { run: unique('run'), files: [{ name: 'a.h5', bytes: bytes.length }] } });
    const refused = await new TusSender(app.url, { authorization: `Bearer ${reading.secret}` }).begin(delivery);
    expect(refused).toMatchObject({ status: 403, problem: { code: 'token-scope' } });
    expect((await new TusSender(app.url, { authorization: `Bearer ${handing.secret}` }).send(delivery, bytes)).status).toBe(204);
  });

  it('is no other site that has the cookie', async () => {
    const delivery = await announce([{ bytes }]);
    const elsewhere = new TusSender(app.url, { ...sender.credentials, origin: 'https://elsewhere.example' });
    expect((await elsewhere.begin(delivery)).status).toBe(403);
    const asked = await elsewhere.call('OPTIONS', tusPath, {});
    expect(asked.headers.get('access-control-allow-origin')).not.toBe('*');
    expect(asked.headers.get('access-control-allow-origin')).not.toBe('https://elsewhere.example');
  });

  it('is no more who left the campaign', async () => {
    const person = await app.makePerson({ [campaign]: ['contributor'] });
    const theirs = await signedInSender(app.url, person);
    const delivery = await person.call(routes.createDelivery, { params: { campaign }, body: { run: unique('run'), files: [{ name: 'a.h5', bytes: bytes.length }] } });
    await theirs.begin(delivery);
    await app.founder.call(routes.removeMember, { params: { campaign, account: person.id } });
    expect((await theirs.patch(delivery.files[0].id, 0, bytes)).status).toBeGreaterThanOrEqual(403);
    const { deliveries } = await app.founder.call(routes.listDeliveries, { params: { campaign } });
    expect(deliveries.find(({ id }) => id === delivery.id)).toMatchObject({ state: 'open', archive: null, files: [{ received: 0 }] });
  });
});

describe('two windows that send the same file', () => {
  it('do not drive each other out: the second waits, the first goes on', async () => {
    const bytes = randomBytes(600_000);
    const delivery = await announce([{ bytes, sha256: sha256(bytes) }]);
    const { id } = delivery.files[0];
    await sender.begin(delivery);
    const first = sender.openPatch(id, 0, bytes.length);
    first.request.write(bytes.subarray(0, 300_000));
    await wait(600);
    first.request.write(bytes.subarray(300_000, 310_000));
    await expect.poll(async () => (await look(delivery)).files[0].received).toBe(310_000);
    expect(await sender.patch(id, 0, bytes)).toMatchObject({ status: 423, problem: { code: 'upload-locked' } });
    expect((await sender.look(id)).status).toBe(423);
    expect((await sender.remove(id)).status).toBe(423);
    first.request.end(bytes.subarray(310_000));
    expect((await first.answered).status).toBe(204);
    expect(await look(delivery)).toMatchObject({ state: 'complete', files: [{ sha256: sha256(bytes) }] });
  });

  it('one that thinks it is elsewhere is told to ask for the offset', async () => {
    const bytes = randomBytes(1000);
    const delivery = await announce([{ bytes }]);
    const { id } = delivery.files[0];
    await sender.begin(delivery);
    await sender.patch(id, 0, bytes.subarray(0, 400));
    expect(await sender.patch(id, 0, bytes)).toMatchObject({ status: 409, problem: { code: 'conflict' } });
    expect(await sender.offset(id)).toBe(400);
  });
});
