/** The files of one archive, opened in the reading process: their contents, and every array by its path. */
import { PennyweightError } from '#contract/error.ts';
import type { ArchiveContents, ArrayInfo } from '#contract/reading.ts';
import { arrayInfo } from './contents-index.ts';
import { isReal, numbersOf } from './element.ts';
import { sizeOf, type StoredArray } from './stored-array.ts';

export interface ArchiveFile {
  name: string;
  path: string;
}

export interface Archive {
  contents: ArchiveContents;
  /** The array behind a path of the contents, readable box by box. */
  array(path: string): StoredArray;
  /** Which axes may grow without limit; null when unknown. */
  unlimited(path: string): boolean[] | null;
  close(): void;
}

/** Why an array cannot be read as numbers, or null when it can. */
export function unreadable(contents: ArchiveContents, info: ArrayInfo): string | null {
  const outside = contents.outsideLinks.find(({ path, kind }) => path === info.path && kind !== 'external-link');
  if (outside) return `its data lie outside of the archive, in ${outside.target}`;
  const damage = contents.damaged.find(({ path }) => path === info.path);
  if (damage) return damage.reason;
  const filter = info.filters.find(({ available }) => !available);
  if (filter) return `its filter ${filter.name} (${filter.id}) is not available`;
  if (info.dtype === 'complex64' || info.dtype === 'complex128') {
    return 'complex values are not read as a field yet: store real and imaginary parts as two arrays';
  }
  if (info.dtype === 'string') return 'it holds text';
  if (!isReal(info.dtype)) return 'its elements are no plain numbers';
  return null;
}

/** Elements that a vector may have to be read whole. */
const longestVector = 2 ** 22;

/** A whole small array as doubles, in C order of its logical shape where it has one axis of more than one element. */
export function readVector(archive: Archive, path: string): Float64Array {
  const info = arrayInfo(archive.contents, path);
  const reason = unreadable(archive.contents, info);
  if (reason) throw new PennyweightError('reading-mismatch', `${path} cannot be read as numbers: ${reason}.`, { path });
  const count = sizeOf(info.shape);
  if (count > longestVector) {
    throw new PennyweightError('limit-exceeded', `${path} has ${count} elements, and a vector is read up to ${longestVector}; choose another array.`, { path, count });
  }
  if (count === 0) return new Float64Array(0);
  const stored = archive.array(path);
  const bytes = stored.readBox(stored.shape.map(() => 0), stored.shape);
  return Float64Array.from(numbersOf(bytes, info.dtype, count));
}
