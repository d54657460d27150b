/**
 * Which of the given files belong together. Each HDF5 file is an archive of its own. NPY files of one folder form one
 * archive when one of them is a time vector by name (t, time, times, stamps); that it runs forward is for the checks to say.
 * Else each is an archive of its own. The first bytes decide what is NPY, not the file's name.
 */
import { closeSync, openSync, readSync, statSync } from 'node:fs';
import { basename, dirname, parse, resolve } from 'node:path';
import { wrongUsage } from './usage.ts';

export interface ArchiveFile {
  /** as given on the command line */
  given: string;
  name: string;
  path: string;
  bytes: number;
}

const timeNames = new Set(['t', 'time', 'times', 'stamps']);
/** numpy/lib/format.py, MAGIC_PREFIX */
const npyMagic = Buffer.from('\x93NUMPY', 'latin1');

function isNpy(path: string): boolean {
  const descriptor = openSync(path, 'r');
  try {
    const head = Buffer.alloc(npyMagic.length);
    return readSync(descriptor, head, 0, head.length, 0) === head.length && head.equals(npyMagic);
  } finally {
    closeSync(descriptor);
  }
}

function locate(given: string): ArchiveFile {
  const stat = statSync(given, { throwIfNoEntry: false });
  if (!stat) throw wrongUsage(`There is no file ${given}.`);
  if (!stat.isFile())
    throw wrongUsage(`${given} is ${stat.isDirectory() ? 'a folder' : 'no ordinary file'}; name the files themselves.`);
  return { given, name: basename(given), path: resolve(given), bytes: stat.size };
}

/** Archives in the order in which their first file was given. */
export function groupArchives(given: string[]): ArchiveFile[][] {
  if (given.length === 0) throw wrongUsage('Name at least one file.');
  const files = given.map(locate);
  const twice = files.find((file, i) => files.findIndex((other) => other.path === file.path) !== i);
  if (twice) throw wrongUsage(`${twice.given} is named twice.`);
  const series = new Map<string, ArchiveFile[]>();
  const archives: ArchiveFile[][] = [];
  for (const file of files) {
    const folder = dirname(file.path);
    const npy = isNpy(file.path);
    const group = npy ? series.get(folder) : undefined;
    if (group) group.push(file);
    else {
      const fresh = [file];
      archives.push(fresh);
      if (npy) series.set(folder, fresh);
    }
  }
  return archives.flatMap((group) =>
    group.some(({ name }) => timeNames.has(parse(name).name.toLowerCase())) ? [group] : group.map((file) => [file]),
  );
}
