/** One file of a build or bag: written front to back or at places, read at places or whole. What its bytes mean is for others to say. */
import { open, readFile, type FileHandle } from 'node:fs/promises';
import { PennyweightError } from '#contract/error.ts';

export class ArrayFile {
  private readonly handle: FileHandle;
  private end = 0;

  private constructor(handle: FileHandle) {
    this.handle = handle;
  }

  /** A new file; one that is there already is an error. */
  static async create(path: string): Promise<ArrayFile> {
    return new ArrayFile(await open(path, 'wx'));
  }

  static async open(path: string): Promise<ArrayFile> {
    return new ArrayFile(await open(path, 'r'));
  }

  /** Bytes appended so far. */
  get length(): number {
    return this.end;
  }

  async append(bytes: Uint8Array): Promise<void> {
    await this.write(bytes, this.end);
    this.end += bytes.length;
  }

  async write(bytes: Uint8Array, position: number): Promise<void> {
    for (let done = 0; done < bytes.length; ) done += (await this.handle.write(bytes, done, bytes.length - done, position + done)).bytesWritten;
  }

  /** Fills `into` from `position` on. Errors: 'internal' when the file ends before. */
  async read(into: Uint8Array, position: number): Promise<void> {
    for (let done = 0; done < into.length; ) {
      const { bytesRead } = await this.handle.read(into, done, into.length - done, position + done);
      if (bytesRead === 0) throw new PennyweightError('internal', 'A stored array is shorter than its header says: restore it from the backup.', { position: position + done });
      done += bytesRead;
    }
  }

  /** Waits until the bytes are on the disk. */
  sync(): Promise<void> {
    return this.handle.sync();
  }

  close(): Promise<void> {
    return this.handle.close();
  }
}

export function readWhole(path: string): Promise<Buffer> {
  return readFile(path);
}
