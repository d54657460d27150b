import { mkdtemp, rm, stat, writeFile } from 'node:fs/promises';
import { createHash } from 'node:crypto';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { diskStorage } from '../../../server/storage/disk-storage.ts';
import { storageConformance } from './conformance.ts';

async function onDisk() {
  const root = await mkdtemp(join(tmpdir(), 'pennyweight-storage-'));
  return { root, storage: await diskStorage(root), remove: () => rm(root, { recursive: true, force: true }) };
}

storageConformance('storage on disk', onDisk);

describe('storage on disk', () => {
  it('makes objects read-only', async () => {
    const { storage, remove } = await onDisk();
    const path = await storage.localPath(await storage.put(Buffer.from('fixed')));
    expect((await stat(path)).mode & 0o222).toBe(0);
    await remove();
  });

  it('finishes an adoption that a crash cut off between link and unlink', async () => {
    const { root, storage, remove } = await onDisk();
    const bytes = Buffer.from('linked, not yet unlinked'), key = createHash('sha256').update(bytes).digest('hex');
    await storage.put(bytes);
    const left = join(root, 'uploads', 'left');
    await writeFile(left, bytes);
    await storage.adopt(left, key);
    await expect(stat(left)).rejects.toMatchObject({ code: 'ENOENT' });
    expect(await storage.get(key)).toEqual(bytes);
    await remove();
  });

  it('finds what an earlier process stored', async () => {
    const { root, storage, remove } = await onDisk();
    const key = await storage.put(Buffer.from('kept'));
    expect(await (await diskStorage(root)).get(key)).toEqual(Buffer.from('kept'));
    await remove();
  });
});
