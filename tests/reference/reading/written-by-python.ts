/** Archives written by NumPy and h5py into a folder of their own, with what those libraries say of them. */
import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

export interface Written<Facts> {
  folder: string;
  facts: Facts;
  file(name: string): { name: string; path: string };
  remove(): void;
}

/** Runs one of the scripts beside this file with the folder as its argument; what it prints is JSON. */
export function writtenBy<Facts>(script: string): Written<Facts> {
  const folder = mkdtempSync(join(tmpdir(), 'pennyweight-reading-'));
  const program = fileURLToPath(new URL(`./${script}`, import.meta.url));
  const printed = execFileSync('/usr/bin/python3', [program, folder], { encoding: 'utf8', maxBuffer: 2 ** 28 });
  return {
    folder,
    facts: JSON.parse(printed) as Facts,
    file: (name) => ({ name, path: join(folder, name) }),
    remove: () => rmSync(folder, { recursive: true, force: true }),
  };
}
