import { createHash } from 'node:crypto';
import { desc, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import type { Archive } from '#contract/archive.ts';
import { routes } from '#contract/routes.ts';
import { auditLog, survey as surveyTable } from '../../server/db/schema/index.ts';
import { createTestApp, type Person, type TestApp } from '../setup/app.ts';
import { startWorker, type TestWorker } from '../setup/worker.ts';
import { openYard, type Yard } from './archive-yard.ts';

// Each hand-in waits for a reading process, and other test files run beside.
vi.setConfig({ testTimeout: 120_000, hookTimeout: 120_000 });

let app: TestApp;
let worker: TestWorker;
let campaign: string;
let contributor: Person;
let colleague: Person;
let steward: Person;
let modeler: Person;
let yard: Yard;
let sound: Archive;

const of = (archive: Pick<Archive, 'id'>) => ({ params: { archive: archive.id } });
const idsOf = async (archive: Archive) => (await yard.findings(archive.id)).map(({ id }) => id);
const lastAudit = async (objectId: string) => (await app.parts.db.select().from(auditLog).where(eq(auditLog.objectId, objectId)).orderBy(desc(auditLog.seq)))[0];
const collectedAt = async (archive: Archive) => (await app.parts.db.select().from(surveyTable).where(eq(surveyTable.archiveId, archive.id)))[0]?.collectedAt.getTime();
const reason = 'Agreed with the group that ran it.';

beforeAll(async () => {
  app = await createTestApp();
  worker = startWorker(app);
  campaign = (await app.makeCampaign({ parameters: [{ name: 'reynolds' }] })).slug;
  [contributor, colleague] = [await app.makePerson({ [campaign]: ['contributor'] }), await app.makePerson({ [campaign]: ['contributor'] })];
  [steward, modeler] = [await app.makePerson({ [campaign]: ['steward'] }), await app.makePerson({ [campaign]: ['modeler'] })];
  yard = await openYard(app, campaign, contributor);
  sound = await yard.handIn('sound.h5', { solver: 'fields' });
});
afterAll(async () => {
  await worker.stop();
  await app.close();
});

describe('a sound archive', () => {
  it('is read without help', async () => {
    expect(sound).toMatchObject({ state: 'checked', format: 'hdf5', layout: 'time-first', snapshots: 21, nodes: 63, fields: ['u'], timeFrom: 0, timeTo: 2, readingSource: 'proposed', findings: { blocker: 0, caution: 0, waived: 0 }, parameters: { reynolds: 100 } });
    const { reading, proposal, contents, savedFrom, misfits } = await contributor.call(routes.getArchiveReading, of(sound));
    expect(reading).toEqual(proposal);
    expect(reading.time).toMatchObject({ kind: 'array', path: '/time', unit: 's' });
    expect(contents.arrays.map(({ path }) => path).sort()).toEqual(['/time', '/u', '/x', '/y']);
    expect({ savedFrom, misfits }).toEqual({ savedFrom: null, misfits: [] });
    expect(await lastAudit(sound.id)).toMatchObject({ action: 'archive.check', via: 'job', actorId: contributor.id, after: { state: 'checked' } });
  });

  it('has the statistics that NumPy finds', async () => {
    const { fields: [u] } = await modeler.call(routes.getArchiveStatistics, of(sound));
    const close = (ours: (number | null)[], theirs: number[]) => ours.forEach((value, j) => expect(value).toBeCloseTo(theirs[j], 12));
    close(u.min, yard.facts.min);
    close(u.max, yard.facts.max);
    close(u.norm, yard.facts.norm);
    expect(u.nonFinite.every((count) => count === 0)).toBe(true);
  });

  it('has weights by every rule, which sum to its duration', async () => {
    const { chosen, rules } = await modeler.call(routes.getArchiveWeights, of(sound));
    expect(chosen).toBe('simpson');
    for (const rule of rules.filter(({ admissible }) => admissible)) expect(rule.sum).toBeCloseTo(2, 12);
    const beam = await modeler.call(routes.getArchiveBeam, { ...of(sound), query: { rule: 'trapezoid' } });
    expect(beam).toMatchObject({ count: 21, unit: 's', rule: 'trapezoid', marks: { gaps: [], duplicates: [], restarts: [] }, records: [{ from: 0, count: 21 }] });
    expect(beam.weights!.reduce((sum, weight) => sum + weight, 0)).toBeCloseTo(2, 12);
    expect(beam.weights![0]).toBeCloseTo(0.05, 12);
    expect(beam.weights![10]).toBeCloseTo(0.1, 12);
  });

  it('shows a snapshot as NumPy does', async () => {
    const values = await modeler.call(routes.getArchiveSnapshot, { ...of(sound), query: { field: 'u', index: 3 } });
    expect(values).toMatchObject({ field: 'u', unit: 'm/s', index: 3, count: 21, stride: [1, 1], axes: [{ name: 'y', count: 7 }, { name: 'x', count: 9, unit: 'm' }] });
    expect(values.time).toBeCloseTo(0.3, 12);
    expect(values.values).toEqual(yard.facts.snapshot.flat());
    expect((await modeler.send(routes.getArchiveSnapshot, { ...of(sound), query: { field: 'u', index: 21 } })).body).toMatchObject({ status: 416, code: 'range-invalid' });
    expect((await modeler.send(routes.getArchiveSnapshot, { ...of(sound), query: { field: 'w', index: 0 } })).body).toMatchObject({ status: 404, code: 'not-found' });
  });

  it('is downloaded byte for byte, whole and in part', async () => {
    const bytes = yard.bytesOf('sound.h5');
    const path = `/api/archives/${sound.id}/files/0`;
    const whole = await contributor.http.get(path).buffer(true).parse((res, done) => {
      const parts: Buffer[] = [];
      res.on('data', (part: Buffer) => parts.push(part));
      res.on('end', () => done(null, Buffer.concat(parts)));
    });
    expect(whole.status).toBe(200);
    expect((whole.body as Buffer).equals(bytes)).toBe(true);
    expect(whole.headers).toMatchObject({ etag: `"${createHash('sha256').update(bytes).digest('hex')}"`, 'accept-ranges': 'bytes' });
    expect(whole.headers['content-disposition']).toContain('sound.h5');
    const part = await contributor.http.get(path).set('range', 'bytes=1000-1999').buffer(true).parse((res, done) => {
      const parts: Buffer[] = [];
      res.on('data', (piece: Buffer) => parts.push(piece));
      res.on('end', () => done(null, Buffer.concat(parts)));
    });
    expect(part.status).toBe(206);
    expect(part.headers['content-range']).toBe(`bytes 1000-1999/${bytes.length}`);
    expect((part.body as Buffer).equals(bytes.subarray(1000, 2000))).toBe(true);
    expect((await contributor.http.get(path).set('if-none-match', whole.headers.etag)).status).toBe(304);
    const beyond = await contributor.http.get(path).set('range', `bytes=${bytes.length}-`);
    expect(beyond.headers['content-range']).toBe(`bytes */${bytes.length}`);
    expect(beyond.body).toMatchObject({ status: 416, code: 'range-invalid' });
    expect((await contributor.http.get(`/api/archives/${sound.id}/files/1`)).status).toBe(404);
    expect(await lastAudit(sound.id)).toMatchObject({ action: 'archive.download' });
  });
});

describe('an archive that cannot be read', () => {
  it.each([
    ['a text file with another name', 'text.h5', /text/],
    ['a truncated file', 'truncated.h5', /cut off/],
    ['pickled Python objects', 'pickled.npy', /pickled/],
    ['a shape of 10^12 elements in front of 4 KiB', 'endless.npy', /cut off/],
  ])('(%s) gets one clear sentence', async (_what, name, sentence) => {
    const archive = await yard.handIn(name);
    expect(archive).toMatchObject({ state: 'unreadable', snapshots: null, findings: { blocker: 1 } });
    const [finding, ...others] = await yard.findings(archive.id);
    expect(others).toEqual([]);
    expect(finding).toMatchObject({ id: 'file/unreadable', severity: 'blocker', state: 'open' });
    expect(finding.message).toMatch(sentence);
    expect(finding.message).toContain(name);
    expect(finding.message.match(/[.!?](\s|$)/g)).toHaveLength(1);
    const job = await contributor.call(routes.getJob, { params: { job: archive.jobId! } });
    expect(job).toMatchObject({ state: 'done', attempts: 1, problem: null });
    expect((await contributor.send(routes.getArchiveReading, of(archive))).body).toMatchObject({ status: 409, code: 'wrong-state' });
    expect((await contributor.send(routes.getArchiveBeam, of(archive))).body).toMatchObject({ status: 409, code: 'wrong-state' });
  });
});

describe('a hostile archive', () => {
  it('with a link to another file is told so, and the link is not followed', async () => {
    const archive = await yard.handIn('linked.h5');
    expect(archive.state).toBe('checked');
    const finding = (await yard.findings(archive.id)).find(({ id }) => id === 'file/outside-link');
    expect(finding).toMatchObject({ severity: 'blocker', path: '/passwords' });
  });

  it('that claims 10^12 elements in 1400 bytes is not read, and blocked', async () => {
    const archive = await yard.handIn('endless.h5');
    const [finding] = await yard.findings(archive.id);
    expect(finding).toMatchObject({ severity: 'blocker', id: 'file/unreadable', message: expect.stringMatching(/never written/) as unknown });
    expect((await fetch(`${app.url}/api/health`)).status).toBe(200);
  });
});

describe('findings', () => {
  it('name snapshot, time and place', async () => {
    const archive = await yard.handIn('nan.h5');
    const finding = (await yard.findings(archive.id)).find(({ id }) => id === 'value/non-finite');
    expect(finding).toMatchObject({ severity: 'blocker', path: '/u', evidence: { indices: [4], count: 1 } });
  });

  it('are waived by a steward with a reason, and the waiver outlives another check on the same evidence', async () => {
    const archive = await yard.handIn('gap.h5');
    const gap = (await yard.findings(archive.id)).find(({ id }) => id === 'time/gap')!;
    expect((await contributor.send(routes.waiveFinding, { params: { finding: gap.findingId }, body: { reason } })).body).toMatchObject({ status: 403 });
    expect((await steward.send(routes.waiveFinding, { params: { finding: gap.findingId }, body: { reason: 'ok' } })).body).toMatchObject({ status: 400 });
    const waived = await steward.call(routes.waiveFinding, { params: { finding: gap.findingId }, body: { reason } });
    expect(waived).toMatchObject({ state: 'waived', waiver: { reason, by: { id: steward.id } } });
    expect(await lastAudit(gap.findingId)).toMatchObject({ action: 'finding.waive', reason, actorId: steward.id });
    const counted = (await contributor.call(routes.getArchive, of(archive))).findings;
    expect(counted.waived).toBe(1);

    await contributor.call(routes.recheckArchive, of(archive));
    await yard.settled(archive.id);
    const after = (await yard.findings(archive.id)).find(({ id }) => id === 'time/gap')!;
    expect(after).toMatchObject({ findingId: gap.findingId, state: 'waived', waiver: { reason } });

    expect(await steward.call(routes.revokeWaiver, { params: { finding: gap.findingId } })).toMatchObject({ state: 'open', waiver: null });
    expect(await lastAudit(gap.findingId)).toMatchObject({ action: 'finding.revoke-waiver' });
    expect((await steward.send(routes.revokeWaiver, { params: { finding: gap.findingId } })).status).toBe(409);
  });

  it('that block cannot be waived', async () => {
    const archive = await yard.handIn('restart.h5');
    const finding = (await yard.findings(archive.id)).find(({ id }) => id === 'time/restart-overlap')!;
    expect((await steward.send(routes.waiveFinding, { params: { finding: finding.findingId }, body: { reason } })).body).toMatchObject({ status: 409, code: 'wrong-state' });
    const beam = await steward.call(routes.getArchiveBeam, of(archive));
    expect(beam.marks.restarts).toEqual([11]);
  });
});

describe('another check', () => {
  it('does not read the data again when the reading is the same', async () => {
    const before = await collectedAt(sound);
    await contributor.call(routes.recheckArchive, of(sound));
    const after = await yard.settled(sound.id);
    expect(after.state).toBe('checked');
    expect(await collectedAt(sound)).toBe(before);
  });

  it('hears what the campaign demands by now', async () => {
    const { slug } = await app.makeCampaign({ parameters: [] });
    await app.founder.call(routes.putMember, { params: { campaign: slug, account: contributor.id }, body: { roles: ['contributor'] } });
    const archive = await yard.handIn('gap.h5', { campaign: slug });
    expect(await idsOf(archive)).toContain('time/gap');
    const { version } = await app.founder.call(routes.getCampaign, { params: { campaign: slug } });
    await app.founder.call(routes.updateCampaign, { params: { campaign: slug }, body: { version, parameters: [{ name: 'mach' }], policy: { thresholds: { 'time/gap': { ratio: 100 } } } } });
    await contributor.call(routes.recheckArchive, of(archive));
    await yard.settled(archive.id);
    const ids = await idsOf(archive);
    expect(ids).not.toContain('time/gap');
    expect(ids).toContain('param/missing');

    await contributor.call(routes.putRunParameters, { ...of(archive), body: { parameters: { mach: 0.3 }, reason } });
    const given = await yard.settled(archive.id);
    expect(given.parameters).toMatchObject({ mach: 0.3 });
    expect(await idsOf(archive)).not.toContain('param/missing');
  });
});

describe('a reading', () => {
  it('is tried, corrected with a reason, and the archive is checked again', async () => {
    const archive = await yard.handIn('odd-1.h5', { solver: 'odd' });
    const { reading } = await contributor.call(routes.getArchiveReading, of(archive));
    expect(await idsOf(archive)).toContain('time/missing');
    const corrected = { ...reading, time: { kind: 'generated' as const, start: 0, step: 0.5, unit: 's' }, fields: reading.fields.map((field) => ({ ...field, unit: 'Pa' })) };
    expect(await contributor.call(routes.tryReading, { ...of(archive), body: { reading: corrected } })).toMatchObject({ misfits: [], snapshots: 12, nodes: 40, stamps: { from: 0, to: 5.5, count: 12 } });
    const wrong = { ...reading, fields: [{ ...reading.fields[0], path: '/absent' }] };
    expect((await contributor.call(routes.tryReading, { ...of(archive), body: { reading: wrong } })).misfits[0]).toMatchObject({ path: '/absent' });
    expect((await contributor.send(routes.putArchiveReading, { ...of(archive), body: { reading: wrong, reason } })).body).toMatchObject({ status: 422, code: 'reading-mismatch' });
    expect((await colleague.send(routes.putArchiveReading, { ...of(archive), body: { reading: corrected, reason } })).status).toBe(403);

    const changed = await contributor.call(routes.putArchiveReading, { ...of(archive), body: { reading: corrected, reason, saveForSolver: true } });
    expect(changed.state).toBe('checking');
    expect(await yard.settled(archive.id)).toMatchObject({ state: 'checked', readingSource: 'corrected', timeTo: 5.5 });
    const ids = await idsOf(archive);
    expect(ids).not.toContain('time/missing');
    expect(ids).not.toContain('value/unit-missing');
    const [corrections] = await app.parts.db.select().from(auditLog).where(eq(auditLog.action, 'reading.correct')).orderBy(desc(auditLog.seq));
    expect(corrections).toMatchObject({ objectId: archive.id, reason, actorId: contributor.id });

    const { readings } = await contributor.call(routes.listSavedReadings, { params: { campaign } });
    expect(readings).toMatchObject([{ solver: 'odd', version: 1, savedBy: { id: contributor.id } }]);
  });

  it('saved for a solver is used for its next archive, with that one\'s own counts', async () => {
    const next = await yard.handIn('odd-2.h5', { solver: 'odd' });
    expect(next).toMatchObject({ state: 'checked', readingSource: 'saved', snapshots: 15, timeTo: 7 });
    const shown = await contributor.call(routes.getArchiveReading, of(next));
    expect(shown).toMatchObject({ source: 'saved', savedFrom: 'odd, version 1', misfits: [], reading: { time: { kind: 'generated', step: 0.5 }, fields: [{ unit: 'Pa' }] } });
  });

  it('saved for a solver that does not fit says which array differs', async () => {
    const other = await yard.handIn('odd-3.h5', { solver: 'odd' });
    const shown = await contributor.call(routes.getArchiveReading, of(other));
    expect(shown.source).toBe('proposed');
    expect(shown.misfits[0]).toMatchObject({ path: '/Q7' });
  });
});

describe('a series of files', () => {
  it('is one archive', async () => {
    const archive = await yard.handIn(['u.npy', 't.npy']);
    expect(archive).toMatchObject({ state: 'checked', format: 'npy', snapshots: 21, timeTo: 2, files: [{ name: 'u.npy' }, { name: 't.npy' }] });
  });
});

describe('grids of a campaign', () => {
  it('are compared with what came first, to rounding', async () => {
    const { slug } = await app.makeCampaign();
    await app.founder.call(routes.putMember, { params: { campaign: slug, account: contributor.id }, body: { roles: ['contributor'] } });
    const first = await yard.handIn('sound.h5', { campaign: slug, run: 'first' });
    const same = await yard.handIn('gap.h5', { campaign: slug, run: 'same' });
    const rounded = await yard.handIn('rounded-grid.h5', { campaign: slug, run: 'rounded' });
    const stretched = await yard.handIn('stretched.h5', { campaign: slug, run: 'stretched' });
    for (const each of [first, same, rounded]) expect(await idsOf(each)).not.toContain('grid/differs');
    const finding = (await yard.findings(stretched.id)).find(({ id }) => id === 'grid/differs');
    expect(finding).toMatchObject({ severity: 'blocker', message: expect.stringContaining('first') as unknown });
    await contributor.call(routes.recheckArchive, of(first));
    await yard.settled(first.id);
    expect(await idsOf(first)).not.toContain('grid/differs');
  });

  it('are compared also when the one that came first was checked last', async () => {
    const { slug } = await app.makeCampaign();
    await app.founder.call(routes.putMember, { params: { campaign: slug, account: contributor.id }, body: { roles: ['contributor'] } });
    const both = await Promise.all([yard.handIn('sound.h5', { campaign: slug, run: 'a' }), yard.handIn('stretched.h5', { campaign: slug, run: 'b' })]);
    const later = both.sort((a, b) => a.createdAt.localeCompare(b.createdAt))[1];
    await expect.poll(async () => idsOf(await yard.settled(later.id)), { timeout: 60_000 }).toContain('grid/differs');
  });
});

describe('a list of archives', () => {
  it('is paged, searched and filtered in the database', async () => {
    const list = (query: object) => modeler.call(routes.listArchives, { params: { campaign }, query });
    const all = await list({});
    expect(all.archives).toHaveLength(all.total);
    const [second] = (await list({ offset: 1, limit: 1 })).archives;
    expect(second).toEqual(all.archives[1]);
    expect((await list({ offset: 1, limit: 1 })).total).toBe(all.total);
    expect((await list({ q: sound.run })).archives.map(({ id }) => id)).toEqual([sound.id]);
    expect((await list({ q: '%' })).total).toBe(0);
    const unreadable = await list({ state: 'unreadable' });
    expect(unreadable.total).toBe(5);
    expect(unreadable.archives.every(({ state }) => state === 'unreadable')).toBe(true);
    const blocked = await list({ severity: 'blocker', state: 'checked' });
    expect(blocked.archives.every(({ findings }) => findings.blocker > 0)).toBe(true);
    expect(blocked.archives.map(({ id }) => id)).not.toContain(sound.id);
  });

  it('is nobody else\'s business', async () => {
    const stranger = await app.makePerson();
    expect((await stranger.send(routes.listArchives, { params: { campaign } })).status).toBe(404);
    expect((await stranger.send(routes.getArchive, of(sound))).status).toBe(404);
    expect((await modeler.send(routes.recheckArchive, of(sound))).status).toBe(403);
    expect((await modeler.http.get(`/api/archives/${sound.id}/files/0`)).status).toBe(403);
  });
});

describe('a withdrawn archive', () => {
  it('keeps its bytes and says why; nothing is done with it any more', async () => {
    const archive = await yard.handIn('sound.h5');
    expect((await contributor.send(routes.withdrawArchive, { ...of(archive), body: { reason } })).status).toBe(403);
    const withdrawn = await steward.call(routes.withdrawArchive, { ...of(archive), body: { reason } });
    expect(withdrawn).toMatchObject({ state: 'withdrawn', withdrawnReason: reason });
    expect(await lastAudit(archive.id)).toMatchObject({ action: 'archive.withdraw', reason });
    expect((await steward.send(routes.recheckArchive, of(archive))).body).toMatchObject({ status: 409, code: 'wrong-state' });
    expect((await contributor.http.get(`/api/archives/${archive.id}/files/0`)).status).toBe(200);
  });
});
