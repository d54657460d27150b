/**
 * The tus store of uploads: what is on disk is the truth (offset = size of the file), what was announced comes from the
 * database, and the SHA-256 grows with the bytes. After a restart, or a write that failed, it is computed anew from the disk.
 */
import { join } from 'node:path';
import { open, type FileHandle } from 'node:fs/promises';
import type { Hash } from 'node:crypto';
import type { Readable } from 'node:stream';
import { FileStore } from '@tus/file-store';
import { Upload } from '@tus/server';
import { PennyweightError } from '#contract/error.ts';
import { isCode } from './disk-folders.ts';
import { beginReceived, hashReceived, receivedBytes, removeReceived } from './received-file.ts';
import type { ReceivingLock } from './receiving-lock.ts';

/** An announced file as the protocol sees it; `complete`: all is here and verified, the bytes may have moved into storage. */
export interface Announced {
  bytes: number;
  complete: boolean;
  metadata: Record<string, string>;
}

/** Gathered before each write: large enough for few system calls, small enough to stay flat in memory. */
const writeBlock = 2 ** 20;
/** The disk is kept busy while bytes come in, so that the last one does not wait for all before it to be synced. */
const syncBlock = 2 ** 26;
/** On a slow line what came is written at least this often, so that a crash costs little of it. */
const writeMillis = 500;
/** Hash states kept of uploads that pause. */
const mostHashes = 1000;

export class ReceivingStore extends FileStore {
  readonly #announced: (id: string) => Promise<Announced | null>;
  readonly #lock: ReceivingLock;
  readonly #hashes = new Map<string, { hash: Hash; bytes: number }>();

  constructor(directory: string, lock: ReceivingLock, announced: (id: string) => Promise<Announced | null>) {
    super({ directory });
    this.#announced = announced;
    this.#lock = lock;
    this.extensions = ['creation', 'creation-with-upload', 'termination'];
  }

  override async create(upload: Upload): Promise<Upload> {
    const there = await receivedBytes(this.directory, upload.id);
    if (there) {
      throw new PennyweightError('conflict', `${there} bytes of this file have been received already: ask for its offset and go on from there.`, { file: upload.id, received: there });
    }
    await beginReceived(this.directory, upload.id);
    return upload;
  }

  override async getUpload(id: string): Promise<Upload> {
    const announced = await this.#announced(id);
    const received = announced?.complete ? announced.bytes : await receivedBytes(this.directory, id);
    if (!announced || received === null) throw new PennyweightError('not-found', 'Nothing was received of this file yet: begin its upload first.', { file: id });
    return new Upload({ id, size: announced.bytes, offset: received, metadata: announced.metadata });
  }

  override async remove(id: string): Promise<void> {
    this.#hashes.delete(id);
    await removeReceived(this.directory, id);
  }

  /** Stores what comes until the stream ends or breaks; what came before a break stays, and the hash with it. */
  override async write(readable: Readable, id: string, offset: number): Promise<number> {
    const hash = await this.#hashTo(id, offset);
    this.#hashes.delete(id);
    const handle = await open(join(this.directory, id), 'r+');
    let at = offset;
    let gathered: Buffer[] = [], gatheredBytes = 0, flushedAt = Date.now();
    let writing: Promise<void> = Promise.resolve();
    let syncing: Promise<void> = Promise.resolve(), syncBusy = false, syncedTo = offset;
    // A failure here shows again when the whole file is synced.
    const syncBehind = (): void => {
      if (syncBusy || at - syncedTo < syncBlock) return;
      syncedTo = at;
      syncBusy = true;
      syncing = handle.datasync().catch(() => undefined).finally(() => (syncBusy = false));
    };
    const flush = async (): Promise<void> => {
      await writing;
      writing = writeAll(handle, gathered, at, id);
      // Whoever waits for it sees the failure; until then it must not end the process.
      writing.catch(() => undefined);
      at += gatheredBytes;
      gathered = [];
      gatheredBytes = 0;
      flushedAt = Date.now();
      syncBehind();
    };
    try {
      let broken: Error | null = null;
      try {
        for await (const chunk of readable as AsyncIterable<Buffer>) {
          hash.update(chunk);
          gathered.push(chunk);
          gatheredBytes += chunk.length;
          this.#lock.sign(id);
          if (gatheredBytes >= writeBlock || Date.now() - flushedAt >= writeMillis) await flush();
        }
      } catch (cause) {
        broken = cause as Error;
      }
      await flush();
      await writing;
      this.#remember(id, hash, at);
      if (broken) throw broken;
      return at;
    } finally {
      await syncing;
      await handle.close();
    }
  }

  /** SHA-256 of a file that is all here. */
  async digest(id: string, bytes: number): Promise<string> {
    const hash = await this.#hashTo(id, bytes);
    return hash.copy().digest('hex');
  }

  async #hashTo(id: string, bytes: number): Promise<Hash> {
    const known = this.#hashes.get(id);
    if (known?.bytes === bytes) return known.hash;
    const hash = await hashReceived(this.directory, id, bytes, () => this.#lock.sign(id));
    this.#remember(id, hash, bytes);
    return hash;
  }

  #remember(id: string, hash: Hash, bytes: number): void {
    this.#hashes.delete(id);
    this.#hashes.set(id, { hash, bytes });
    if (this.#hashes.size > mostHashes) this.#hashes.delete(this.#hashes.keys().next().value as string);
  }
}

async function writeAll(handle: FileHandle, chunks: Buffer[], position: number, id: string): Promise<void> {
  try {
    for (let rest = chunks, at = position; rest.length > 0; ) {
      const { bytesWritten } = await handle.writev(rest, at);
      at += bytesWritten;
      rest = after(rest, bytesWritten);
    }
  } catch (cause) {
    if (!isCode(cause, 'ENOSPC', 'EDQUOT', 'EFBIG')) throw cause;
    throw new PennyweightError('unavailable', 'The disk of the server is full: what was received is kept; tell the administrator and go on when there is room.', { file: id }, { cause });
  }
}

/** What is left of the chunks after `bytes` of them. */
function after(chunks: Buffer[], bytes: number): Buffer[] {
  let skip = bytes;
  return chunks.flatMap((chunk) => {
    const gone = Math.min(skip, chunk.length);
    skip -= gone;
    return gone === chunk.length ? [] : [chunk.subarray(gone)];
  });
}
