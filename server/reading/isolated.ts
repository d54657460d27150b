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
   * Blocks of at most about 32 MiB, or of one snapshot; the next is read while one is used, and no further ahead. With
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
  const { plan, windows, blocks } = await reader.request('plan', { reading, fields, indices }, requestMillis);
  /** blocks that are asked for and have not come yet */
  let due = 0;
  let refused: PennyweightError | null = null;
  function ask(window: number): void {
    due += blocks[window];
    reader.request('window', { plan, window }, requestMillis).catch((cause: PennyweightError) => {
      // A window is read whole before its first block is sent: none of this one will come.
      due -= blocks[window];
      refused = cause;
      reader.frames.fail(cause, plan);
    });
  }
  try {
    if (windows > 0) ask(0);
    for (let window = 0; window < windows; window++) {
      for (let block = 0; block < blocks[window]; block++) {
        if (refused) throw refused;
        const { from, count, nodes, values } = await reader.frames.next(plan);
        due--;
        if (block === blocks[window] - 1 && window + 1 < windows) ask(window + 1);
        yield { from, count, nodes, values };
        if (reuse) reader.frames.giveBack(values);
      }
    }
  } finally {
    // Who stops early leaves blocks in the pipe; they are taken out so that the next request finds it empty.
    try {
      while (due > 0 && !refused) {
        await reader.frames.next(plan);
        due--;
      }
      await reader.request('forget', { plan }, requestMillis);
    } catch {
      // The reader is gone, and whoever asks next is told why.
    }
  }
}
