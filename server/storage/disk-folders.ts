/** Durable steps on a POSIX file system: what is renamed or linked is on the disk first, and the folder's entry after it. */
import { mkdir, open, readdir, stat } from 'node:fs/promises';
import { dirname, join } from 'node:path';

export function isCode(cause: unknown, ...codes: string[]): boolean {
  return codes.includes((cause as NodeJS.ErrnoException | null)?.code ?? '');
}

/** fsync(2) of a file or folder: a rename survives a power cut only when the folder was synced as well. */
export async function sync(path: string): Promise<void> {
  const handle = await open(path, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

/** Makes a folder and syncs its parent when it was not there. */
export async function ensureFolder(path: string): Promise<void> {
  if ((await mkdir(path, { recursive: true })) !== undefined) await sync(dirname(path));
}

/** Every file and folder below, deepest first, then the folder itself. */
export async function syncTree(folder: string): Promise<void> {
  for (const entry of await readdir(folder, { withFileTypes: true })) {
    const path = join(folder, entry.name);
    await (entry.isDirectory() ? syncTree(path) : sync(path));
  }
  await sync(folder);
}

/** Bytes of a file; null where there is none. */
export async function fileSize(path: string): Promise<number | null> {
  try {
    return (await stat(path)).size;
  } catch (cause) {
    if (isCode(cause, 'ENOENT', 'ENOTDIR')) return null;
    throw cause;
  }
}
