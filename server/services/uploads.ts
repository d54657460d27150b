/**
 * The door for bytes: who may send which announced file, and what happens when the last byte is there. One a web server;
 * the protocol itself is http/uploads.ts.
 */
import { and, eq, sql } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import { delivery, deliveryFile } from '../db/schema/index.ts';
import { receivedBytes } from '../storage/received-file.ts';
import { ReceivingLock } from '../storage/receiving-lock.ts';
import { ReceivingStore } from '../storage/receiving-store.ts';
import { closedDelivery, findAnnounced, mustOwn, noSuchFile, type AnnouncedFile } from './announced-file.ts';
import { bytesPhrase } from './phrases.ts';
import type { App, Caller } from './context.ts';
import { untilGivenUp } from './deliveries.ts';
import { completeDelivery, verifyFile } from './hand-in.ts';

export interface UploadDoor {
  store: ReceivingStore;
  lock: ReceivingLock;
  /** Permits the creation of the upload of an announced file; its id is the upload's. */
  begin(caller: Caller, metadata: Record<string, string | null | undefined>, length: number | null): Promise<string>;
  /** Permits a request on an upload that was begun; a look at one whose last byte is there finishes it first. */
  admit(caller: Caller, id: string, request: 'HEAD' | 'PATCH' | 'DELETE'): Promise<void>;
  /** All bytes are there: verify, and make the archive when it was the last file. */
  finish(caller: Caller, id: string): Promise<void>;
}

export function openUploadDoor(app: App): UploadDoor {
  const folder = app.storage.uploads();
  const lock = new ReceivingLock();
  const store = new ReceivingStore(folder, lock, async (id) => {
    const found = await findAnnounced(app.db, id);
    if (!found) return null;
    const { file } = found;
    return { bytes: file.bytes, complete: file.state === 'verified', metadata: { delivery: file.deliveryId, file: id, filename: file.name } };
  });
  const finishing = new Map<string, Promise<void>>();

  async function own(caller: Caller, id: string): Promise<AnnouncedFile> {
    const found = await findAnnounced(app.db, id);
    if (!found) throw noSuchFile();
    mustOwn(caller, found);
    return found;
  }

  async function touch({ file, delivery: { id } }: AnnouncedFile): Promise<void> {
    await app.db.update(deliveryFile).set({ state: 'receiving' }).where(and(eq(deliveryFile.id, file.id), eq(deliveryFile.state, 'waiting')));
    await app.db.update(delivery).set({ updatedAt: sql`now()`, expiresAt: untilGivenUp() }).where(eq(delivery.id, id));
  }

  async function mustBeWhole(file: AnnouncedFile['file']): Promise<void> {
    const received = (await receivedBytes(folder, file.id)) ?? 0;
    if (received !== file.bytes) throw new PennyweightError('upload-incomplete', `${received} of ${file.bytes} bytes of ${file.name} are here: ask for the offset and go on from there.`, { received, announced: file.bytes });
  }

  async function finishOnce(caller: Caller, found: AnnouncedFile): Promise<void> {
    const { file, delivery: { id } } = found;
    if (file.state !== 'verified') {
      await mustBeWhole(file);
      await verifyFile(app, caller, found, () => store.digest(file.id, file.bytes));
    }
    await completeDelivery(app, caller, id);
  }

  const door: UploadDoor = {
    store,
    lock,
    async begin(caller, metadata, length) {
      if (!metadata.delivery || !metadata.file) throw new PennyweightError('invalid-input', 'An upload names its announced file: send delivery, file and filename as Upload-Metadata.');
      const found = await own(caller, metadata.file);
      const { file } = found;
      if (file.deliveryId !== metadata.delivery) throw noSuchFile();
      if (metadata.filename && metadata.filename !== file.name) throw new PennyweightError('invalid-input', `"${file.name}" was announced here, not "${metadata.filename}": choose the announced file.`, { announced: file.name, sent: metadata.filename });
      if (found.delivery.state !== 'open' || file.state === 'verified') throw closedDelivery({ ...found, delivery: { ...found.delivery, state: file.state === 'verified' ? 'complete' : found.delivery.state } });
      checkLength(file, length);
      if (file.state === 'waiting') {
        lock.mustBeFree(file.id);
        await store.remove(file.id);
      }
      await touch(found);
      return file.id;
    },
    async admit(caller, id, request) {
      const found = await own(caller, id);
      const { state } = found.delivery;
      if (request === 'HEAD') {
        if (state !== 'open' && state !== 'complete') throw closedDelivery(found);
        const whole = found.file.state === 'verified' || (await receivedBytes(folder, id)) === found.file.bytes;
        if (state === 'open' && whole && !lock.holds(id)) await door.finish(caller, id);
        return;
      }
      if (state !== 'open') throw closedDelivery(found);
      if (found.file.state === 'verified') throw closedDelivery({ ...found, delivery: { ...found.delivery, state: 'complete' } });
      if (request === 'DELETE') {
        lock.mustBeFree(id);
        await app.db.update(deliveryFile).set({ state: 'waiting' }).where(eq(deliveryFile.id, id));
        return;
      }
      await touch(found);
    },
    finish(caller, id) {
      const running = finishing.get(id) ?? own(caller, id).then((found) => finishOnce(caller, found)).finally(() => finishing.delete(id));
      finishing.set(id, running);
      return running;
    },
  };
  return door;
}

function checkLength(file: AnnouncedFile['file'], length: number | null): void {
  if (length === null) throw new PennyweightError('invalid-input', 'Send the length of the file with Upload-Length: a deferred length is not accepted.');
  if (length === file.bytes) return;
  const details = { announced: file.bytes, sent: length };
  if (length > file.bytes) {
    throw new PennyweightError('upload-too-long', `${file.name} has ${length} bytes, and ${file.bytes} (${bytesPhrase(file.bytes)}) were announced: announce it again with its true size.`, details);
  }
  throw new PennyweightError('invalid-input', `${file.name} has ${length} bytes, and ${file.bytes} were announced: announce it again with its true size.`, details);
}
