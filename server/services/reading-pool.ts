/** Archives kept open in their reading processes for a while, since a person looks at snapshot after snapshot. */
import { asc, eq } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import { archiveFile } from '../db/schema/index.ts';
import type { OpenArchive } from './archive-reader.ts';
import type { App } from './context.ts';

const most = 3;
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

/** The archive's slot, taken for one user more. Where all are busy, waits until one is free: each is a process of its own. */
async function take(app: App, archiveId: string): Promise<Slot> {
  for (;;) {
    const idle = [...slots].find(([, { users }]) => users === 0);
    const known = slots.get(archiveId);
    if (!known && slots.size >= most) {
      await (idle ? drop(...idle) : Promise.race([...slots.values()].map(({ queue }) => queue)));
      continue;
    }
    const slot = known ?? { opened: openArchiveFiles(app, archiveId), queue: Promise.resolve(), users: 0, timer: null };
    slots.set(archiveId, slot);
    slot.users++;
    if (slot.timer) clearTimeout(slot.timer);
    return slot;
  }
}

/** After one of these the reading process is gone, or never was; any other refusal leaves it as it is. */
const isDeath = (cause: unknown) => !(cause instanceof PennyweightError) || ['file-unreadable', 'unsupported-format', 'limit-exceeded', 'wrong-state', 'not-found'].includes(cause.code);

/** Runs `work` on the open archive; one whose reading process died is opened anew by the next caller. */
export async function withArchive<T>(app: App, archiveId: string, work: (archive: OpenArchive) => Promise<T>): Promise<T> {
  const slot = await take(app, archiveId);
  const turn = slot.queue.then(async () => work(await slot.opened));
  slot.queue = turn.catch(() => undefined);
  try {
    return await turn;
  } catch (cause) {
    if (isDeath(cause)) await drop(archiveId, slot);
    throw cause;
  } finally {
    slot.users--;
    if (slot.users === 0 && slots.get(archiveId) === slot) slot.timer = setTimeout(() => void drop(archiveId, slot), idleMillis).unref();
  }
}

/** Closes all of them, when the server stops. */
export async function closeReaders(): Promise<void> {
  await Promise.all([...slots].map(([id, slot]) => drop(id, slot)));
}
