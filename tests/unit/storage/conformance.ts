/** What every ObjectStorage promises. Each implementation runs it on an empty store of its own. */
import { createHash } from 'node:crypto';
import { access, mkdir, readFile, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { buffer } from 'node:stream/consumers';
import { beforeEach, afterEach, describe, expect, it } from 'vitest';
import type { ObjectStorage } from '../../../server/storage/object-storage.ts';

export interface StorageUnderTest {
  storage: ObjectStorage;
  remove(): Promise<void>;
}

const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');
const isThere = (path: string) => access(path).then(() => true, () => false);
const absent = 'f'.repeat(64);

export function storageConformance(name: string, make: () => Promise<StorageUnderTest>): void {
  describe(name, () => {
    let storage: ObjectStorage;
    let remove: () => Promise<void>;
    beforeEach(async () => ({ storage, remove } = await make()));
    afterEach(() => remove());

    async function received(name: string, bytes: Uint8Array): Promise<string> {
      const path = join(storage.uploads(), name);
      await writeFile(path, bytes);
      return path;
    }

    it('keeps what is put, under its SHA-256', async () => {
      const bytes = Buffer.from('snapshots');
      const key = await storage.put(bytes);
      expect(key).toBe(sha256(bytes));
      expect(await storage.has(key)).toBe(true);
      expect(await storage.size(key)).toBe(bytes.length);
      expect(await storage.get(key)).toEqual(bytes);
      expect(await readFile(await storage.localPath(key))).toEqual(bytes);
    });

    it('keeps an object of no bytes', async () => {
      const key = await storage.put(new Uint8Array(0));
      expect(await storage.size(key)).toBe(0);
      expect(await buffer(storage.read(key))).toHaveLength(0);
    });

    it('reads a range with both ends, and all without one', async () => {
      const bytes = Buffer.from(Array.from({ length: 1000 }, (_, i) => i % 251));
      const key = await storage.put(bytes);
      expect(await buffer(storage.read(key, { start: 10, end: 19 }))).toEqual(bytes.subarray(10, 20));
      expect(await buffer(storage.read(key, { start: 999, end: 999 }))).toEqual(bytes.subarray(999));
      expect(await buffer(storage.read(key))).toEqual(bytes);
    });

    it('says that an object is missing', async () => {
      expect(await storage.has(absent)).toBe(false);
      await expect(storage.size(absent)).rejects.toMatchObject({ code: 'not-found' });
      await expect(storage.get(absent)).rejects.toMatchObject({ code: 'not-found' });
      await expect(storage.localPath(absent)).rejects.toMatchObject({ code: 'not-found' });
      await expect(buffer(storage.read(absent))).rejects.toThrow();
    });

    it('refuses a key that is no SHA-256', async () => {
      await expect(storage.size('../../etc/passwd')).rejects.toMatchObject({ code: 'internal' });
    });

    it('takes a received file over, out of the uploads', async () => {
      const bytes = Buffer.from('an archive');
      const path = await received('one', bytes);
      await storage.adopt(path, sha256(bytes));
      expect(await storage.get(sha256(bytes))).toEqual(bytes);
      expect(await isThere(path)).toBe(false);
    });

    it('keeps the same content once, and never writes over an object', async () => {
      const bytes = Buffer.from('the same content');
      await storage.adopt(await received('one', bytes), sha256(bytes));
      const second = await received('two', bytes);
      await storage.adopt(second, sha256(bytes));
      expect(await isThere(second)).toBe(false);
      expect((await storage.usage()).objects).toBe(1);

      const shorter = await received('three', Buffer.from('not the same'));
      await expect(storage.adopt(shorter, sha256(bytes))).rejects.toMatchObject({ code: 'internal' });
      expect(await storage.get(sha256(bytes))).toEqual(bytes);
      expect(await isThere(shorter)).toBe(true);
    });

    it('takes the same file over twice at once without harm', async () => {
      const bytes = Buffer.from('raced for');
      const path = await received('one', bytes);
      const results = await Promise.allSettled([storage.adopt(path, sha256(bytes)), storage.adopt(path, sha256(bytes))]);
      expect(results.some(({ status }) => status === 'fulfilled')).toBe(true);
      expect(await storage.get(sha256(bytes))).toEqual(bytes);
    });

    it('publishes a folder whole, once, under its name', async () => {
      const scratch = await storage.scratchFolder('draft-1');
      await mkdir(join(scratch, 'data'));
      await writeFile(join(scratch, 'data', 'matrix.npy'), 'columns');
      const published = await storage.publish(scratch, 'builds', 'draft-1');
      expect(published).toBe(storage.folder('builds', 'draft-1'));
      expect(await readFile(join(published, 'data', 'matrix.npy'), 'utf8')).toBe('columns');
      expect(await isThere(scratch)).toBe(false);

      const again = await storage.scratchFolder('draft-1');
      await expect(storage.publish(again, 'builds', 'draft-1')).rejects.toMatchObject({ code: 'conflict' });
      expect(await readFile(join(published, 'data', 'matrix.npy'), 'utf8')).toBe('columns');
    });

    it('gives an empty scratch folder, whatever a killed process left in it', async () => {
      await writeFile(join(await storage.scratchFolder('build'), 'half'), 'made');
      expect(await isThere(join(await storage.scratchFolder('build'), 'half'))).toBe(false);
    });

    it('drops what is given up, and clears all that was in the making', async () => {
      const one = await storage.scratchFolder('one');
      await storage.discard(one);
      expect(await isThere(one)).toBe(false);
      await storage.discard(one);
      const two = await storage.scratchFolder('two');
      await storage.clearScratch();
      expect(await isThere(two)).toBe(false);
    });

    it('discards nothing outside of the scratch folder', async () => {
      const published = await storage.publish(await storage.scratchFolder('kept'), 'releases', 'kept');
      await expect(storage.discard(published)).rejects.toMatchObject({ code: 'internal' });
      expect(await isThere(published)).toBe(true);
    });

    it('removes a build, and does not mind when it is gone', async () => {
      const published = await storage.publish(await storage.scratchFolder('old'), 'builds', 'old');
      await storage.removeFolder('builds', 'old');
      expect(await isThere(published)).toBe(false);
      await storage.removeFolder('builds', 'old');
    });

    it.each(['..', '../objects', 'a/../../b', '/etc', '', '.hidden', 'a//b'])('refuses the folder name "%s"', async (bad) => {
      await expect(storage.scratchFolder(bad)).rejects.toMatchObject({ code: 'internal' });
      expect(() => storage.folder('releases', bad)).toThrow(/folder/);
    });

    it('counts objects and bytes, and knows the free space', async () => {
      const before = await storage.usage();
      expect(before).toMatchObject({ objects: 0, bytes: 0 });
      await storage.put(Buffer.alloc(100, 1));
      await storage.put(Buffer.alloc(200, 2));
      const after = await storage.usage();
      expect(after).toMatchObject({ objects: 2, bytes: 300 });
      expect(after.freeBytes).toBeGreaterThan(0);
    });
  });
}
