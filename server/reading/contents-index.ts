/** Arrays and groups of an archive by path: an archive of one group per step may have a hundred thousand of them. */
import { PennyweightError } from '#contract/error.ts';
import type { ArchiveContents, ArrayInfo } from '#contract/reading.ts';

interface Index {
  arrays: Map<string, ArrayInfo>;
  groups: Map<string, ArchiveContents['groups'][number]>;
}

const indices = new WeakMap<ArchiveContents, Index>();

function indexOf(contents: ArchiveContents): Index {
  let index = indices.get(contents);
  if (!index) {
    index = {
      arrays: new Map(contents.arrays.map((array) => [array.path, array])),
      groups: new Map(contents.groups.map((group) => [group.path, group])),
    };
    indices.set(contents, index);
  }
  return index;
}

export function findArray(contents: ArchiveContents, path: string): ArrayInfo | undefined {
  return indexOf(contents).arrays.get(path);
}

export function findGroup(contents: ArchiveContents, path: string): ArchiveContents['groups'][number] | undefined {
  return indexOf(contents).groups.get(path);
}

export function arrayInfo(contents: ArchiveContents, path: string): ArrayInfo {
  const info = findArray(contents, path);
  if (!info) throw new PennyweightError('not-found', `the archive has no array ${path}; choose one of its contents.`, { path });
  return info;
}
