/** Archives kept open in their reading processes for a while, since a person looks at snapshot after snapshot. */
import { asc, eq } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import { archiveFile } from '../db/schema/index.ts';
import type { OpenArchive } from './archive-reader.ts';
import type { App } from './context.ts';

const most = 2;
const idleMillis = 60_000;

interface Slot {
  opened: Promise<OpenArchive>;
  /** requests wait for each other: one reading process reads one thing at a time */
  queue: Promise<unknown>;
  users: number;
  timer: NodeJS.Timeout | null;
}

const slots = new Map<string, Slot>();

/** Opens an archive's files by name and local path. The caller closes it. */
export async function openArchiveFiles(app: App, archiveId: string): Promise<OpenArchive> {
  const files = await app.db.select().from(archiveFile).where(eq(archiveFile.archiveId, archiveId)).orderBy(asc(archiveFile.position));
  if (files.length === 0) throw new PennyweightError('not-found', 'The archive has no files.', { archive: archiveId });
  return app.reader.open(await Promise.all(files.map(async (file) => ({ name: file.name, path: await app.storage.localPath(file.sha256) }))));
}

async function drop(id: string, slot: Slot): Promise<void> {
  if (slots.get(id) === slot) slots.delete(id);
  if (slot.timer) clearTimeout(slot.timer);
  await slot.opened.then((archive) => archive.close(), () => undefined);
}

/** Runs `work` on the open archive; an archive whose reading fails is closed and opened anew by the next caller. */
export async function withArchive<T>(app: App, archiveId: string, work: (archive: OpenArchive) => Promise<T>): Promise<T> {
  let slot = slots.get(archiveId);
  if (!slot) {
    const idle = [...slots].find(([, each]) => each.users === 0);
    if (slots.size >= most && idle) await drop(...idle);
    slot = { opened: openArchiveFiles(app, archiveId), queue: Promise.resolve(), users: 0, timer: null };
    slots.set(archiveId, slot);
  }
  const mine = slot;
  mine.users++;
  if (mine.timer) clearTimeout(mine.timer);
  const turn = mine.queue.then(async () => work(await mine.opened));
  mine.queue = turn.catch(() => undefined);
  try {
    return await turn;
  } catch (cause) {
    await drop(archiveId, mine);
    throw cause;
  } finally {
    mine.users--;
    if (mine.users === 0 && slots.get(archiveId) === mine) mine.timer = setTimeout(() => void drop(archiveId, mine), idleMillis).unref();
  }
}

/** Closes all of them, when the server stops. */
export async function closeReaders(): Promise<void> {
  await Promise.all([...slots].map(([id, slot]) => drop(id, slot)));
}
