import { createHash } from 'node:crypto';
import { mkdtemp, readFile, rm, symlink, truncate } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { Upload } from '@tus/server';
import { PennyweightError } from '#contract/error.ts';
import { ReceivingLock } from '../../../server/storage/receiving-lock.ts';
import { ReceivingStore, type Announced } from '../../../server/storage/receiving-store.ts';

const id = '3f1c2b9e-0000-4000-8000-000000000001';
const bytes = Buffer.from(Array.from({ length: 5_000_000 }, (_, i) => (i * 7919) % 256));
const sha256 = (part: Uint8Array) => createHash('sha256').update(part).digest('hex');

/** In pieces like those of a network. */
function* pieces(part: Buffer, size = 65_536): Generator<Buffer> {
  for (let at = 0; at < part.length; at += size) yield part.subarray(at, at + size);
}

let folder: string;
let announced: Announced | null;
let store: ReceivingStore;
const open = () => new ReceivingStore(folder, new ReceivingLock(), async () => announced);

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'pennyweight-uploads-'));
  announced = { bytes: bytes.length, complete: false, metadata: { filename: 'u.npy' } };
  store = open();
});
afterEach(() => rm(folder, { recursive: true, force: true }));

const begin = () => store.create(new Upload({ id, size: bytes.length, offset: 0 }));

describe('receiving', () => {
  it('stores bytes in parts, and knows their SHA-256 at the end', async () => {
    await begin();
    expect(await store.write(Readable.from(pieces(bytes.subarray(0, 3_000_001))), id, 0)).toBe(3_000_001);
    expect((await store.getUpload(id)).offset).toBe(3_000_001);
    expect(await store.write(Readable.from(pieces(bytes.subarray(3_000_001))), id, 3_000_001)).toBe(bytes.length);
    expect(await store.digest(id, bytes.length)).toBe(sha256(bytes));
    expect((await readFile(join(folder, id))).equals(bytes)).toBe(true);
  });

  it('keeps what came before the connection broke', async () => {
    await begin();
    const broken = Readable.from((function* () {
      yield* pieces(bytes.subarray(0, 2_500_000));
      throw new PennyweightError('unavailable', 'the line is dead');
    })());
    await expect(store.write(broken, id, 0)).rejects.toThrow('the line is dead');
    expect((await store.getUpload(id)).offset).toBe(2_500_000);
    await store.write(Readable.from(pieces(bytes.subarray(2_500_000))), id, 2_500_000);
    expect(await store.digest(id, bytes.length)).toBe(sha256(bytes));
  });

  it('goes on in another process from what is on the disk', async () => {
    await begin();
    await store.write(Readable.from(pieces(bytes.subarray(0, 2_000_000))), id, 0);
    // Bytes that were acknowledged and did not reach the disk: a power cut.
    await truncate(join(folder, id), 1_500_000);
    store = open();
    expect((await store.getUpload(id)).offset).toBe(1_500_000);
    await store.write(Readable.from(pieces(bytes.subarray(1_500_000))), id, 1_500_000);
    expect(await store.digest(id, bytes.length)).toBe(sha256(bytes));
  });

  it('says that the disk is full, and goes on when there is room', async () => {
    await symlink('/dev/full', join(folder, id));
    await expect(store.write(Readable.from(pieces(bytes)), id, 0)).rejects.toMatchObject({ code: 'unavailable', message: expect.stringContaining('disk') as unknown });
    await rm(join(folder, id));
    await begin();
    await store.write(Readable.from(pieces(bytes)), id, 0);
    expect(await store.digest(id, bytes.length)).toBe(sha256(bytes));
  });

  it('never begins anew over bytes that were received', async () => {
    await begin();
    await begin();
    await store.write(Readable.from(pieces(bytes.subarray(0, 1000))), id, 0);
    await expect(begin()).rejects.toMatchObject({ code: 'conflict' });
    expect((await store.getUpload(id)).offset).toBe(1000);
  });

  it('answers for a verified file whose bytes have moved into storage', async () => {
    announced = { bytes: bytes.length, complete: true, metadata: {} };
    expect(await store.getUpload(id)).toMatchObject({ offset: bytes.length, size: bytes.length });
  });

  it('knows neither what was not announced nor what was not begun', async () => {
    await expect(store.getUpload(id)).rejects.toMatchObject({ code: 'not-found' });
    announced = null;
    await expect(store.getUpload(id)).rejects.toMatchObject({ code: 'not-found' });
  });
});
