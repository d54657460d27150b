/** Bytes by content, and the folders of builds and releases. Nothing else in the server touches archive files. */
import type { Readable } from 'node:stream';

export interface ObjectStorage {
  /** A local path at which the reading process can open the object (a store without local files fetches it first). */
  localPath(sha256: string): Promise<string>;
  /** Takes a finished, verified file over: fsync, then an atomic rename; the same content twice is one object. */
  adopt(path: string, sha256: string): Promise<void>;
  has(sha256: string): Promise<boolean>;
  size(sha256: string): Promise<number>;
  /** Bytes [start, end] of an object. */
  read(sha256: string, range?: { start: number; end: number }): Readable;
  /** Stores a small derived object (surveys); returns its SHA-256. */
  put(bytes: Uint8Array): Promise<string>;
  get(sha256: string): Promise<Buffer>;
  /** Folder for a build or a bag in the making; published by `publish` (fsync + rename), dropped by `discard`. */
  scratchFolder(name: string): Promise<string>;
  publish(scratch: string, kind: 'builds' | 'releases', name: string): Promise<string>;
  discard(scratch: string): Promise<void>;
  /** Removes all that is in the making; only where nothing is (the worker when it starts). */
  clearScratch(): Promise<void>;
  /** Absolute path of a published folder. */
  folder(kind: 'builds' | 'releases', name: string): string;
  /** Names of the published folders. */
  folders(kind: 'builds' | 'releases'): Promise<string[]>;
  removeFolder(kind: 'builds' | 'releases', name: string): Promise<void>;
  /** folder where uploads are received */
  uploads(): string;
  usage(): Promise<{ objects: number; bytes: number; freeBytes: number }>;
}
