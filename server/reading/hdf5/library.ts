/**
 * The HDF5 library (h5wasm) with its doors shut: it can open the file that it was given, and its own plugins; every
 * other path is "no such file", so external links, virtual sources and external raw storage lead nowhere. Runs in the
 * reading process only. A call that fails leaks stack inside WebAssembly (measured: broken after some 2,000), so the
 * process gives up after `mostFailures`.
 */
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { ready } from 'h5wasm/node';
import { PennyweightError } from '#contract/error.ts';
import type { FileBytes } from '../file-bytes.ts';
import { lookup3 } from './structure/checksum.ts';
import { isOpenForWriting, type Superblock } from './structure/superblock.ts';

export type Hdf5Module = Awaited<typeof ready>;

/** The part of Emscripten's file system that is replaced. */
interface FileSystem {
  open(path: string, flags: unknown, mode?: number): object;
  read(stream: object, buffer: Uint8Array, offset: number, length: number, position?: number): number;
  ErrnoError: new (code: number) => Error;
}

/** ENOENT in Emscripten's numbering (WASI errno noent). */
const noSuchFile = 44;
const mostFailures = 200;

export interface Hdf5Library {
  module: Hdf5Module;
  fileId: bigint;
  fileName: string;
  /** Runs one call; null when the library refuses it. */
  attempt<T>(call: (module: Hdf5Module, fileId: bigint) => T): T | null;
  /** Makes the decompression plugins known; only when a filter needs them. */
  loadPlugins(): void;
}

/**
 * Bytes of the superblock as a reader may see them: without the flag that a writer has the file open, which the library
 * would refuse, and with the checksum that then fits. The file itself is not touched.
 */
function unflagged(superblock: Superblock): Uint8Array | null {
  if (superblock.version !== 3 || !isOpenForWriting(superblock)) return null;
  const bytes = superblock.bytes.read(superblock.position, superblock.length);
  bytes[superblock.flagsAt] = 0;
  new DataView(bytes.buffer).setUint32(bytes.length - 4, lookup3(bytes.subarray(0, bytes.length - 4)), true);
  return bytes;
}

interface Doors {
  /** the files that were given, each with the superblock that readers see instead of its own */
  archives: Map<string, { position: number; patch: Uint8Array | null }>;
  pluginFolder: string | null;
}

let doors: Doors | null = null;

function shutDoors(fs: FileSystem): Doors {
  const { open, read, ErrnoError } = fs;
  const shut: Doors = { archives: new Map(), pluginFolder: null };
  const streams = new WeakMap<object, { position: number; patch: Uint8Array }>();
  fs.open = (wanted, flags, mode) => {
    const archive = shut.archives.get(wanted);
    const folder = shut.pluginFolder;
    const plugin = folder !== null && (wanted === folder || wanted.startsWith(`${folder}/`)) && !wanted.includes('..');
    if (!archive && !plugin) throw new ErrnoError(noSuchFile);
    const stream = open.call(fs, wanted, flags, mode);
    if (archive?.patch) streams.set(stream, { position: archive.position, patch: archive.patch });
    return stream;
  };
  fs.read = (stream, buffer, offset, length, position) => {
    const got = read.call(fs, stream, buffer, offset, length, position);
    const patched = streams.get(stream);
    if (!patched || position === undefined) return got;
    for (let i = 0; i < patched.patch.length; i++) {
      const at = patched.position + i - position;
      if (at >= 0 && at < got) buffer[offset + at] = patched.patch[i];
    }
    return got;
  };
  return shut;
}

function refusal(file: FileBytes, superblock: Superblock): PennyweightError {
  const { endOfFile } = superblock;
  if (endOfFile !== null && endOfFile > file.size) {
    return new PennyweightError(
      'file-unreadable',
      `${file.name} is cut off: ${endOfFile} bytes are expected and ${file.size} are there; upload it again.`,
      { file: file.name, expected: endOfFile, actual: file.size },
    );
  }
  return new PennyweightError('file-unreadable', `${file.name} has the signature of HDF5 but cannot be opened; compare it with the original and upload it again.`, {
    file: file.name,
  });
}

/** Opens `path` for reading, and lets the library open nothing else. */
export async function openHdf5(path: string, file: FileBytes, superblock: Superblock): Promise<Hdf5Library> {
  const module = await ready;
  doors ??= shutDoors(module.FS as unknown as FileSystem);
  const { archives } = doors;
  archives.set(path, { position: superblock.position, patch: unflagged(superblock) });
  let failures = 0;

  const library: Hdf5Library = {
    module,
    fileId: -1n,
    fileName: file.name,
    attempt(call) {
      try {
        return call(module, library.fileId);
      } catch (cause) {
        // A trap leaves the instance in an unknown state: nothing that it says afterwards is to be believed.
        if (cause instanceof WebAssembly.RuntimeError || cause instanceof RangeError || ++failures > mostFailures) {
          throw new PennyweightError('file-unreadable', `${file.name} is damaged in too many places to be read; compare it with the original and upload it again.`, {
            file: file.name,
            fatal: true,
          }, { cause });
        }
        return null;
      }
    },
    loadPlugins() {
      if (!doors || doors.pluginFolder !== null) return;
      doors.pluginFolder = join(dirname(createRequire(import.meta.url).resolve('h5wasm-plugins/package.json')), 'plugins');
      module.insert_plugin_search_path(doors.pluginFolder, 0);
    },
  };
  library.fileId = library.attempt(() => module.open(path, module.H5F_ACC_RDONLY, false, -1, -1)) ?? -1n;
  if (library.fileId < 0n) throw refusal(file, superblock);
  return library;
}
