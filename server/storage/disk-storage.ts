/** Objects on the local disk: objects/ab/cdef…, uploads/, scratch/, builds/, releases/ below one root. */
import { createHash, randomUUID } from 'node:crypto';
import { createReadStream, existsSync } from 'node:fs';
import { mkdir, open, readdir, readFile, rename, rm, stat, statfs, writeFile } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import { PennyweightError } from '#contract/error.ts';
import type { ObjectStorage } from './object-storage.ts';

async function sync(path: string): Promise<void> {
  const handle = await open(path, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

/** After a rename the folder is synced too: only then does the name survive a power cut. */
async function moveInto(from: string, to: string): Promise<void> {
  await mkdir(dirname(to), { recursive: true });
  await rename(from, to);
  await sync(dirname(to));
}

async function syncTree(folder: string): Promise<void> {
  for (const entry of await readdir(folder, { withFileTypes: true, recursive: true })) if (entry.isFile()) await sync(join(entry.parentPath, entry.name));
}

const safeName = /^[A-Za-z0-9][A-Za-z0-9._-]*$/;

export async function diskStorage(root: string): Promise<ObjectStorage> {
  for (const folder of ['objects', 'uploads', 'scratch', 'builds', 'releases']) await mkdir(join(root, folder), { recursive: true });
  const objectPath = (sha256: string) => {
    if (!/^[0-9a-f]{64}$/.test(sha256)) throw new PennyweightError('internal', `"${sha256}" is not the SHA-256 of an object.`);
    return join(root, 'objects', sha256.slice(0, 2), sha256.slice(2));
  };
  const named = (kind: string, name: string) => {
    if (!safeName.test(name)) throw new PennyweightError('internal', `"${name}" is not the name of a folder in storage.`);
    return join(root, kind, name);
  };
  const known = async (sha256: string) => {
    const path = objectPath(sha256);
    if (!existsSync(path)) throw new PennyweightError('not-found', `The stored object ${sha256.slice(0, 12)}… is not there: restore it from the backup.`, { sha256 });
    return path;
  };
  const storage: ObjectStorage = {
    localPath: known,
    async adopt(path, sha256) {
      await sync(path);
      const target = objectPath(sha256);
      if (existsSync(target)) await rm(path);
      else await moveInto(path, target);
    },
    async has(sha256) {
      return existsSync(objectPath(sha256));
    },
    async size(sha256) {
      return (await stat(await known(sha256))).size;
    },
    read(sha256, range) {
      return createReadStream(objectPath(sha256), { ...range, highWaterMark: 1 << 20 });
    },
    async put(bytes) {
      const sha256 = createHash('sha256').update(bytes).digest('hex');
      const scratch = join(root, 'scratch', randomUUID());
      await writeFile(scratch, bytes);
      await storage.adopt(scratch, sha256);
      return sha256;
    },
    async get(sha256) {
      return readFile(await known(sha256));
    },
    async scratchFolder(name) {
      const folder = join(named('scratch', name), randomUUID());
      await mkdir(folder, { recursive: true });
      return folder;
    },
    async publish(scratch, kind, name) {
      await syncTree(scratch);
      const target = named(kind, name);
      await moveInto(scratch, target);
      return target;
    },
    async discard(scratch) {
      await rm(scratch, { recursive: true, force: true });
    },
    folder: named,
    async removeFolder(kind, name) {
      await rm(named(kind, name), { recursive: true, force: true });
    },
    uploads: () => join(root, 'uploads'),
    async usage() {
      let objects = 0, bytes = 0;
      for (const entry of await readdir(join(root, 'objects'), { withFileTypes: true, recursive: true })) {
        if (!entry.isFile()) continue;
        objects++;
        bytes += (await stat(join(entry.parentPath, entry.name))).size;
      }
      const disk = await statfs(root);
      return { objects, bytes, freeBytes: disk.bavail * disk.bsize };
    },
  };
  return storage;
}
