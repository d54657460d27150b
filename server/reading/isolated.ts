/**
 * Archives from outside, read in a process of their own. This is the only door to server/reading for the rest of the
 * server: nothing here parses a byte, everything is bounded in memory and time, and a death of the reader is a typed
 * error 'file-unreadable'.
 */
import { PennyweightError } from '#contract/error.ts';
import { archiveContents, type ArchiveContents, type Reading } from '#contract/reading.ts';
import type { Survey } from '../engine/survey.ts';
import type { ArchiveFile } from './archive.ts';
import { mismatchesOf, type Mismatch } from './fit.ts';
import { ReadingProcess } from './isolation/reading-process.ts';
import { defaultLimits, type Limits } from './limits.ts';
import type { ReadingVectors } from './reading-vectors.ts';

export type { ArchiveFile, Limits, Mismatch, ReadingVectors };

export interface SnapshotBlock {
  /** position in the asked indices of the first snapshot of this block */
  from: number;
  count: number;
  /** values of one snapshot: the nodes of all asked fields */
  nodes: number;
  /** count x nodes, one snapshot after the other, fields stacked in the order asked; nodes in C order of the reading's axes */
  values: Float64Array;
}

export interface IsolatedArchive {
  contents(): Promise<ArchiveContents>;
  propose(): Promise<Reading>;
  /** What of a reading does not fit this archive; empty when all does. */
  fits(reading: Reading): Promise<Mismatch[]>;
  /** A reading of another archive of the same solver, with this archive's counts and parameter values, and what does not fit. */
  apply(reading: Reading): Promise<{ reading: Reading; mismatches: Mismatch[] }>;
  survey(reading: Reading, onProgress?: (doneBytes: number, totalBytes: number) => void): Promise<Survey>;
  /**
   * Blocks of at most 16 MiB, or of one snapshot; the next is read while one is used, and no further ahead. With
   * `reuse` the values of a block are overwritten once the next is asked for: faster for whoever does not keep them.
   */
  snapshots(reading: Reading, fieldNames: string[], indices: ArrayLike<number>, options?: { reuse?: boolean }): AsyncGenerator<SnapshotBlock, void, undefined>;
  /** Time stamps, coordinates, cell edges and weights of a reading. */
  axes(reading: Reading): Promise<ReadingVectors>;
  /** A small array as doubles. */
  vector(path: string): Promise<Float64Array>;
  /** Largest resident memory of the reading process that was seen so far, bytes. */
  peakBytes(): number;
  close(): Promise<void>;
}

export async function openIsolated(files: ArchiveFile[], limits: Partial<Limits> = {}): Promise<IsolatedArchive> {
  const bounds: Limits = { ...defaultLimits, ...limits };
  const name = files.length === 1 ? files[0].name : `the archive of ${files.length} files`;
  const reader = new ReadingProcess(name, bounds);
  let contents: ArchiveContents;
  try {
    const parsed = archiveContents.safeParse(await reader.request('open', { files, limits: bounds }, bounds.contentsMillis));
    if (!parsed.success) throw new PennyweightError('file-unreadable', `${name} describes its contents in a way that cannot be; compare it with the original and upload it again.`, {}, { cause: parsed.error });
    contents = parsed.data;
  } catch (cause) {
    await reader.close();
    throw cause;
  }
  return {
    contents: () => Promise.resolve(contents),
    propose: () => reader.request('propose', {}, bounds.contentsMillis),
    fits: (reading) => Promise.resolve(mismatchesOf(contents, reading)),
    apply: (reading) => reader.request('apply', { reading }, bounds.contentsMillis),
    survey: (reading, onProgress) => reader.request('survey', { reading }, bounds.surveyMillis, onProgress),
    snapshots: (reading, fieldNames, indices, options) => snapshotBlocks(reader, bounds, reading, fieldNames, Uint32Array.from(indices), options?.reuse ?? false),
    axes: (reading) => reader.request('vectors', { reading }, bounds.requestMillis),
    vector: (path) => reader.request('vector', { path }, bounds.requestMillis),
    peakBytes: () => reader.peakBytes,
    close: () => reader.close(),
  };
}

async function* snapshotBlocks(
  reader: ReadingProcess,
  { requestMillis }: Limits,
  reading: Reading,
  fields: string[],
  indices: Uint32Array,
  reuse: boolean,
): AsyncGenerator<SnapshotBlock, void, undefined> {
  const { plan, nodes, blocks, position } = await reader.request('plan', { reading, fields, indices }, requestMillis);
  const ask = (block: number) => {
    const asked = block < blocks ? reader.request('block', { plan, block }, requestMillis) : null;
    // Whoever stops early never looks at it.
    asked?.catch(() => undefined);
    return asked;
  };
  try {
    let spare: Float64Array | null = null;
    let asked = ask(0);
    for (let block = 0; asked; block++) {
      const { from, count } = await asked;
      const values: Float64Array = spare?.length === count * nodes ? spare : new Float64Array(count * nodes);
      reader.exchange.read(values, position);
      asked = ask(block + 1);
      yield { from, count, nodes, values };
      if (reuse) spare = values;
    }
  } finally {
    // A reader that is gone has forgotten it already.
    await reader.request('forget', { plan }, requestMillis).catch(() => undefined);
  }
}
