/**
 * Receives tus uploads into files and hashes while receiving. The hash of an upload is kept at its offset; after a lost connection
 * or a restart it is made again from the bytes on disk before going on, since only those count.
 */
import { createHash, type Hash } from 'node:crypto';
import { createReadStream, existsSync } from 'node:fs';
import { rm, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { Transform, type Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { FileStore } from '@tus/file-store';
import type { Upload } from '@tus/server';

interface Running {
  hash: Hash;
  offset: number;
}

export class UploadStore extends FileStore {
  private readonly running = new Map<string, Running>();

  constructor(directory: string) {
    super({ directory });
    this.extensions = ['creation', 'creation-with-upload', 'termination'];
  }

  pathOf(id: string): string {
    return join(this.directory, id);
  }

  /** Announcing a second time (a lost answer, a second tab) must not drop what was received. */
  override async create(upload: Upload): Promise<Upload> {
    if (existsSync(this.pathOf(upload.id))) return upload;
    return super.create(upload);
  }

  override async write(readable: Readable, id: string, offset: number): Promise<number> {
    const state = await this.hashedTo(id, offset);
    this.running.delete(id);
    const hashing = new Transform({
      transform(chunk: Buffer, _encoding, done) {
        state.hash.update(chunk);
        state.offset += chunk.length;
        done(null, chunk);
      },
    });
    const source = readable.pipe(hashing);
    readable.once('error', (error) => hashing.destroy(error));
    const end = await super.write(source, id, offset);
    // A chunk may have been hashed and not written: then the state is dropped and made again from the disk.
    if (end === state.offset) this.running.set(id, state);
    return end;
  }

  override async remove(id: string): Promise<void> {
    this.running.delete(id);
    await super.remove(id);
  }

  /** SHA-256 and length of what is on disk. */
  async digest(id: string): Promise<{ sha256: string; bytes: number }> {
    const bytes = (await stat(this.pathOf(id))).size;
    const state = await this.hashedTo(id, bytes);
    return { sha256: state.hash.copy().digest('hex'), bytes };
  }

  /** Forgets an upload whose file was taken over or refused. */
  async forget(id: string): Promise<void> {
    this.running.delete(id);
    await rm(this.pathOf(id), { force: true });
    await this.configstore.delete(id);
  }

  private async hashedTo(id: string, offset: number): Promise<Running> {
    const known = this.running.get(id);
    if (known && known.offset === offset) return known;
    const state: Running = { hash: createHash('sha256'), offset };
    if (offset > 0) await pipeline(createReadStream(this.pathOf(id), { end: offset - 1, highWaterMark: 4 << 20 }), async (chunks: AsyncIterable<Buffer>) => { for await (const chunk of chunks) state.hash.update(chunk); });
    return state;
  }
}
