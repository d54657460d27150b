/**
 * Storage in a folder of this machine:
 *   objects/ab/<sha256>   bytes by content, read-only, never overwritten
 *   uploads/<id>          what is being received
 *   scratch/              folders and files in the making; the worker empties it when it starts
 *   builds/, releases/    published folders
 */
import { createHash, randomUUID } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { chmod, link, mkdir, readdir, readFile, rename, rm, stat, statfs, unlink, writeFile } from 'node:fs/promises';
import { dirname, join, resolve, sep } from 'node:path';
import { PennyweightError } from '#contract/error.ts';
import { ensureFolder, fileSize, isCode, sync, syncTree } from './disk-folders.ts';
import type { ObjectStorage } from './object-storage.ts';

const readBlock = 2 ** 20;

/** Names come from ids and slugs; a name that could lead elsewhere is a fault of ours, not of a person. */
function safeName(name: string): string {
  const sound = name.split('/').every((part) => /^[A-Za-z0-9][A-Za-z0-9._-]*$/.test(part));
  if (!sound) throw new PennyweightError('internal', `"${name}" cannot be the name of a folder in storage.`, { name });
  return name;
}

export async function diskStorage(root: string): Promise<ObjectStorage> {
  const folders = { objects: join(root, 'objects'), uploads: join(root, 'uploads'), scratch: join(root, 'scratch'), builds: join(root, 'builds'), releases: join(root, 'releases') };
  for (const folder of Object.values(folders)) await ensureFolder(folder);

  function objectPath(sha256: string): string {
    if (!/^[0-9a-f]{64}$/.test(sha256)) throw new PennyweightError('internal', `"${sha256}" is no SHA-256 in lower-case hexadecimal digits.`, { sha256 });
    return join(folders.objects, sha256.slice(0, 2), sha256);
  }
  const missing = (sha256: string, cause?: unknown) =>
    new PennyweightError('not-found', `The object ${sha256.slice(0, 12)}… is missing from storage: restore it from a backup.`, { sha256 }, { cause });
  async function sizeOf(sha256: string): Promise<number> {
    const bytes = await fileSize(objectPath(sha256));
    if (bytes === null) throw missing(sha256);
    return bytes;
  }
  function belowScratch(path: string): string {
    const whole = resolve(path);
    if (!whole.startsWith(resolve(folders.scratch) + sep)) throw new PennyweightError('internal', `${path} does not lie in the scratch folder.`, { path });
    return whole;
  }

  const storage: ObjectStorage = {
    async localPath(sha256) {
      await sizeOf(sha256);
      return objectPath(sha256);
    },
    async adopt(path, sha256) {
      const target = objectPath(sha256);
      const bytes = (await stat(path)).size;
      await sync(path);
      await ensureFolder(dirname(target));
      try {
        // link(2) fails where rename(2) would overwrite.
        await link(path, target);
        await chmod(target, 0o444);
      } catch (cause) {
        if (!isCode(cause, 'EEXIST')) throw cause;
        const held = await sizeOf(sha256);
        if (held !== bytes) throw new PennyweightError('internal', `The object ${sha256.slice(0, 12)}… in storage has ${held} bytes and should have ${bytes}: restore it from a backup.`, { sha256, held, bytes });
      }
      await sync(dirname(target));
      await unlink(path);
      await sync(dirname(path));
    },
    has: async (sha256) => (await fileSize(objectPath(sha256))) !== null,
    size: sizeOf,
    read: (sha256, range) => createReadStream(objectPath(sha256), { ...range, highWaterMark: readBlock }),
    async put(bytes) {
      const sha256 = createHash('sha256').update(bytes).digest('hex');
      if (await storage.has(sha256)) return sha256;
      const path = join(folders.scratch, `put-${randomUUID()}`);
      await writeFile(path, bytes);
      await storage.adopt(path, sha256);
      return sha256;
    },
    async get(sha256) {
      try {
        return await readFile(objectPath(sha256));
      } catch (cause) {
        throw isCode(cause, 'ENOENT') ? missing(sha256, cause) : cause;
      }
    },
    async scratchFolder(name) {
      const path = join(folders.scratch, safeName(name));
      await rm(path, { recursive: true, force: true });
      await mkdir(path, { recursive: true });
      return path;
    },
    async publish(scratch, kind, name) {
      const source = belowScratch(scratch), target = storage.folder(kind, name);
      if ((await fileSize(target)) !== null) throw new PennyweightError('conflict', `The folder ${kind}/${name} is in storage already.`, { kind, name });
      await syncTree(source);
      await ensureFolder(dirname(target));
      await rename(source, target);
      await sync(dirname(target));
      return target;
    },
    async discard(scratch) {
      await rm(belowScratch(scratch), { recursive: true, force: true });
    },
    async clearScratch() {
      for (const entry of await readdir(folders.scratch)) await rm(join(folders.scratch, entry), { recursive: true, force: true });
    },
    folder: (kind, name) => join(folders[kind], safeName(name)),
    folders: (kind) => readdir(folders[kind]),
    async removeFolder(kind, name) {
      // Out of sight in one step, then bit by bit.
      const aside = join(folders.scratch, `removed-${randomUUID()}`);
      try {
        await rename(storage.folder(kind, name), aside);
      } catch (cause) {
        if (isCode(cause, 'ENOENT')) return;
        throw cause;
      }
      await rm(aside, { recursive: true, force: true });
    },
    uploads: () => folders.uploads,
    async usage() {
      const { bavail, bsize } = await statfs(root);
      let objects = 0, bytes = 0;
      for (const prefix of await readdir(folders.objects)) {
        const names = await readdir(join(folders.objects, prefix));
        const sizes = await Promise.all(names.map((name) => fileSize(join(folders.objects, prefix, name))));
        for (const size of sizes) {
          objects += size === null ? 0 : 1;
          bytes += size ?? 0;
        }
      }
      return { objects, bytes, freeBytes: bavail * bsize };
    },
  };
  return storage;
}
