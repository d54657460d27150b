/** Contents of an archive by hand, for what looks at contents alone. */
import type { ArchiveContents, ArrayInfo, AttributeValue } from '#contract/reading.ts';
import type { Evidence } from '../../../server/reading/proposal/evidence.ts';

export function array(path: string, shape: number[], more: Partial<ArrayInfo> = {}): ArrayInfo {
  return {
    path, shape, dtype: 'float64', byteOrder: 'little', order: 'C', file: 0, chunks: null, filters: [], attributes: {}, dimensionScales: null,
    fillValue: null, allocated: null, ...more,
  };
}

export function contentsOf(arrays: ArrayInfo[], rootAttributes: Record<string, AttributeValue> = {}, groups: ArchiveContents['groups'] = []): ArchiveContents {
  return {
    format: 'hdf5', files: [{ name: 'run.h5', bytes: 1e6 }], arrays, groups: [{ path: '/', attributes: rootAttributes }, ...groups],
    outsideLinks: [], writerOpen: false, damaged: [],
  };
}

/** Vectors that increase, unless others are given. */
export function evidenceFor(contents: ArchiveContents, vectors: Record<string, number[]> = {}, unlimited: Record<string, boolean[]> = {}): Evidence {
  return {
    vector(path) {
      if (vectors[path]) return Float64Array.from(vectors[path]);
      const info = contents.arrays.find((one) => one.path === path);
      const length = info?.shape.reduce((product, size) => product * size, 1) ?? 0;
      return info && info.shape.filter((size) => size > 1).length <= 1 ? Float64Array.from({ length }, (_, i) => i + 1) : null;
    },
    unlimited: (path) => unlimited[path] ?? null,
  };
}
