/** What a proposal may look at beside the contents: the values of small arrays, and which axes may grow. */
import { readVector, unreadable, type Archive } from '../archive.ts';
import { findArray } from '../contents-index.ts';
import { sizeOf } from '../stored-array.ts';

export interface Evidence {
  /** values of a small array of numbers; null for any other */
  vector(path: string): Float64Array | null;
  /** which axes may grow without limit; null when unknown */
  unlimited(path: string): boolean[] | null;
}

const longest = 2 ** 20;

export function evidenceOf(archive: Archive): Evidence {
  const known = new Map<string, Float64Array | null>();
  function read(path: string): Float64Array | null {
    const info = findArray(archive.contents, path);
    if (!info || unreadable(archive.contents, info) || sizeOf(info.shape) > longest) return null;
    try {
      return readVector(archive, path);
    } catch {
      // Damaged small arrays prove nothing; reading them for good says what is wrong.
      return null;
    }
  }
  return {
    vector(path) {
      const vector = known.has(path) ? known.get(path)! : read(path);
      known.set(path, vector);
      return vector;
    },
    unlimited: (path) => archive.unlimited(path),
  };
}
