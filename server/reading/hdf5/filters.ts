/**
 * Filters of chunked data by their registered numbers (HDF5 documentation, "Filters": 1 to 6 belong to the library, the
 * others are registered with The HDF Group), and which of them can be undone here.
 */
import type { ArrayInfo } from '#contract/reading.ts';
import type { Hdf5Library } from './library.ts';

type FilterInfo = ArrayInfo['filters'][number];

const builtIn: Record<number, string> = { 1: 'deflate', 2: 'shuffle', 3: 'fletcher32', 4: 'szip', 5: 'nbit', 6: 'scaleoffset' };

/** Tried with h5wasm-plugins 0.2.1; its ZFP (32013) ends the process and counts as missing. */
const plugins: Record<number, string> = {
  307: 'bzip2', 32000: 'lzf', 32001: 'blosc', 32004: 'lz4', 32008: 'bitshuffle', 32015: 'zstd', 32022: 'bitgroom', 32023: 'granular bitround', 32026: 'blosc2',
};

export function filtersOf(library: Hdf5Library, path: string): FilterInfo[] {
  const found = library.attempt((module, fileId) => module.get_dataset_filters(fileId, path)) ?? [];
  return found.map(({ id, name }) => ({
    id,
    name: builtIn[id] ?? plugins[id] ?? (name.slice(0, 64) || `filter ${id}`),
    available: id in builtIn || id in plugins,
  }));
}

export function needsPlugin(filters: FilterInfo[]): boolean {
  return filters.some(({ id }) => id in plugins);
}
