/** Files with given bytes in a folder that goes away after the tests of the file that asked for it. */
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';
import { openFile, type FileBytes } from '../../../server/reading/file-bytes.ts';

export interface Folder {
  write(name: string, bytes: Uint8Array | string): { name: string; path: string };
  open(name: string, bytes: Uint8Array | string): FileBytes;
}

export function folderForTests(): Folder {
  const folder = mkdtempSync(join(tmpdir(), 'pennyweight-reading-'));
  const opened: FileBytes[] = [];
  afterAll(() => {
    opened.forEach((file) => file.close());
    rmSync(folder, { recursive: true, force: true });
  });
  const write = (name: string, bytes: Uint8Array | string) => {
    const path = join(folder, name);
    writeFileSync(path, bytes);
    return { name, path };
  };
  return {
    write,
    open(name, bytes) {
      const file = openFile(write(name, bytes).path, name);
      opened.push(file);
      return file;
    },
  };
}

/** An NPY file as NEP 1 describes it; `header` may be anything. */
export function npy(header: string, data: Uint8Array = new Uint8Array(0), version: 1 | 2 | 3 = 1): Uint8Array {
  const text = new TextEncoder().encode(`${header}\n`);
  const head = new Uint8Array(version === 1 ? 10 : 12);
  head.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, version, 0]);
  const view = new DataView(head.buffer);
  if (version === 1) view.setUint16(8, text.length, true);
  else view.setUint32(8, text.length, true);
  return Buffer.concat([head, text, data]);
}
