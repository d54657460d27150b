/** Files in the uploads folder, by the id of their announced file. */
import { createHash, type Hash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { open, readdir, stat, unlink } from 'node:fs/promises';
import { join } from 'node:path';
import { fileSize, isCode } from './disk-folders.ts';

const readBlock = 2 ** 20;

/** Bytes that are really there, whatever was acknowledged before a crash; null where nothing was begun. */
export function receivedBytes(folder: string, id: string): Promise<number | null> {
  return fileSize(join(folder, id));
}

/** An empty file to receive into; one that is there stays as it is. */
export async function beginReceived(folder: string, id: string): Promise<void> {
  await (await open(join(folder, id), 'a')).close();
}

export async function removeReceived(folder: string, id: string): Promise<void> {
  try {
    await unlink(join(folder, id));
  } catch (cause) {
    if (!isCode(cause, 'ENOENT')) throw cause;
  }
}

/** Ids of all that lies there, with the time of the last byte. */
export async function listReceived(folder: string): Promise<{ id: string; bytes: number; touchedAt: Date }[]> {
  const found: { id: string; bytes: number; touchedAt: Date }[] = [];
  for (const id of await readdir(folder)) {
    const state = await stat(join(folder, id)).catch((cause: unknown) => {
      if (isCode(cause, 'ENOENT')) return null;
      throw cause;
    });
    if (state) found.push({ id, bytes: state.size, touchedAt: state.mtime });
  }
  return found;
}

/** SHA-256 state over the first `bytes` of a received file. `onBlock` is called between blocks. */
export async function hashReceived(folder: string, id: string, bytes: number, onBlock: () => void = () => undefined): Promise<Hash> {
  const hash = createHash('sha256');
  if (bytes === 0) return hash;
  for await (const block of createReadStream(join(folder, id), { end: bytes - 1, highWaterMark: readBlock })) {
    hash.update(block as Buffer);
    onBlock();
  }
  return hash;
}
