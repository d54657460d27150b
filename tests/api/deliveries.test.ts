import { randomBytes } from 'node:crypto';
import { readdir } from 'node:fs/promises';
import { and, desc, eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { tusPath, type Delivery } from '#contract/archive.ts';
import { routes } from '#contract/routes.ts';
import { auditLog } from '../../server/db/schema/index.ts';
import { createTestApp, unique, type Person, type TestApp } from '../setup/app.ts';
import { metadataOf, signedInSender, TusSender } from './tus-sender.ts';

let app: TestApp;
let campaign: string;
let contributor: Person;
let colleague: Person;
let sender: TusSender;

beforeAll(async () => {
  app = await createTestApp();
  campaign = (await app.makeCampaign()).slug;
  contributor = await app.makePerson({ [campaign]: ['contributor'] });
  colleague = await app.makePerson({ [campaign]: ['contributor'] });
  sender = await signedInSender(app.url, contributor);
});
afterAll(() => app.close());

function announce(files: { bytes: Uint8Array }[], more: { campaign?: string } = {}): Promise<Delivery> {
  return contributor.call(routes.createDelivery, {
    params: { campaign: more.campaign ?? campaign }, body: { run: unique('run'), files: files.map((file, i) => ({ name: `part-${i}.h5`, bytes: file.bytes.length })) },
  });
}

const uploads = () => readdir(app.parts.storage.uploads());
const lastAudit = async (objectId: string) => (await app.parts.db.select().from(auditLog).where(eq(auditLog.objectId, objectId)).orderBy(desc(auditLog.seq)))[0];

describe('an announcement', () => {
  it('counts against the quota while it is open, and says what is left', async () => {
    const { slug } = await app.makeCampaign({ quotaBytes: 10_000 });
    await app.founder.call(routes.putMember, { params: { campaign: slug, account: contributor.id }, body: { roles: ['contributor'] } });
    const first = await announce([{ bytes: randomBytes(6000) }], { campaign: slug });
    const refused = await contributor.send(routes.createDelivery, { params: { campaign: slug }, body: { run: 'b', files: [{ name: 'b.h5', bytes: 4001 }] } });
    expect(refused.status).toBe(413);
    expect(refused.body).toMatchObject({ code: 'quota-exceeded', details: { quotaBytes: 10_000, archivedBytes: 0, announcedBytes: 6000, wantedBytes: 4001 } });
    await announce([{ bytes: randomBytes(4000) }], { campaign: slug });
    await contributor.send(routes.cancelDelivery, { params: { delivery: first.id } });
    await announce([{ bytes: randomBytes(6000) }], { campaign: slug });
  });

  it('of two at once takes the last room only once', async () => {
    const { slug } = await app.makeCampaign({ quotaBytes: 10_000 });
    await app.founder.call(routes.putMember, { params: { campaign: slug, account: contributor.id }, body: { roles: ['contributor'] } });
    const both = await Promise.allSettled([1, 2].map(() => announce([{ bytes: randomBytes(6000) }], { campaign: slug })));
    expect(both.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  });

  it.each([['the same twice', ['a.h5', 'a.h5']], ['a folder', ['runs/a.h5']], ['a way out', ['..']], ['a line break', ['a\n.h5']]])('refuses names with %s', async (_what, names) => {
    const refused = await contributor.send(routes.createDelivery, { params: { campaign }, body: { run: 'r', files: names.map((name) => ({ name, bytes: 1 })) } });
    expect(refused.body).toMatchObject({ status: 400, code: 'invalid-input' });
  });

  it('is refused where a text holds the character NUL, and not where it speaks of one', async () => {
    const announced = (run: string) => contributor.send(routes.createDelivery, { params: { campaign }, body: { run, files: [{ name: 'a.h5', bytes: 1 }] } });
    expect((await announced('a\u0000b')).body).toMatchObject({ status: 400, code: 'invalid-input' });
    expect((await announced('a\\u0000b')).status).toBe(201);
    expect((await contributor.http.get(`/api/campaigns/${campaign}/archives?q=%00`)).status).toBe(400);
  });

  it('that is cancelled loses its bytes and takes no more', async () => {
    const bytes = randomBytes(3000);
    const delivery = await announce([{ bytes }]);
    const { id } = delivery.files[0];
    await sender.begin(delivery);
    await sender.patch(id, 0, bytes.subarray(0, 1000));
    expect((await colleague.send(routes.cancelDelivery, { params: { delivery: delivery.id } })).status).toBe(403);
    expect((await contributor.send(routes.cancelDelivery, { params: { delivery: delivery.id } })).status).toBe(204);
    expect(await uploads()).not.toContain(id);
    expect(await sender.patch(id, 1000, bytes.subarray(1000))).toMatchObject({ status: 409, problem: { code: 'wrong-state' } });
    expect(await lastAudit(delivery.id)).toMatchObject({ action: 'delivery.cancel' });
  });

  it('names what an upload must say', async () => {
    const delivery = await announce([{ bytes: randomBytes(10) }]), [file] = delivery.files;
    const asked = (metadata: Record<string, string>) => sender.begin(delivery, 0, { 'upload-metadata': metadataOf(metadata) });
    expect((await sender.call('POST', tusPath, { 'upload-length': '10' })).problem?.code).toBe('invalid-input');
    expect((await asked({ delivery: delivery.id, file: file.id, filename: 'other.h5' })).problem?.code).toBe('invalid-input');
    expect((await asked({ delivery: delivery.id, file: 'no-such-file' })).problem?.code).toBe('not-found');
    expect((await asked({ delivery: file.id, file: file.id })).problem?.code).toBe('not-found');
  });
});

describe('the upload address', () => {
  it('says what it can do, to everybody', async () => {
    const asked = await new TusSender(app.url, {}).call('OPTIONS', tusPath, {});
    expect(asked.status).toBe(204);
    expect(asked.headers.get('tus-version')).toBe('1.0.0');
    expect(asked.headers.get('tus-extension')?.split(',')).toEqual(expect.arrayContaining(['creation', 'termination']));
  });

  it('gives no received bytes away', async () => {
    const bytes = randomBytes(1000);
    const delivery = await announce([{ bytes }]);
    await sender.begin(delivery);
    await sender.patch(delivery.files[0].id, 0, bytes.subarray(0, 500));
    const response = await fetch(`${app.url}${tusPath}/${delivery.files[0].id}`, { headers: sender.credentials });
    expect(response.status).toBe(404);
    expect(response.headers.get('content-type')).toContain('application/problem+json');
  });

  it('refuses another protocol version with a problem document', async () => {
    const response = await fetch(app.url + tusPath, { method: 'POST', headers: { ...sender.credentials, 'tus-resumable': '0.2.2' } });
    expect(response.status).toBeGreaterThanOrEqual(400);
    expect(response.headers.get('content-type')).toContain('application/problem+json');
    expect(await response.json()).toMatchObject({ code: 'invalid-input', status: response.status });
    const without = await fetch(app.url + tusPath, { method: 'POST', headers: sender.credentials });
    expect(without.status).toBe(412);
    expect(without.headers.get('tus-version')).toBe('1.0.0');
  });

  it('leaves no audit entry of requests that change nothing', async () => {
    const [before] = await app.parts.db.select({ count: sql<number>`count(*)::int` }).from(auditLog).where(and(eq(auditLog.objectType, 'delivery')));
    await sender.look('3f1c2b9e-0000-4000-8000-000000000001');
    const [after] = await app.parts.db.select({ count: sql<number>`count(*)::int` }).from(auditLog).where(and(eq(auditLog.objectType, 'delivery')));
    expect(after.count).toBe(before.count);
  });
});
