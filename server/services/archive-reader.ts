/** The isolated reading process as services and jobs see it (server/reading implements it, main.ts and worker.ts wire it). */
import type { ArchiveContents, Reading } from '#contract/reading.ts';
import type { Survey } from '../engine/survey.ts';

export interface ReadingMisfit {
  path: string;
  expected: string;
  actual: string;
  message: string;
}

export interface OpenArchive {
  contents(): Promise<ArchiveContents>;
  propose(): Promise<Reading>;
  fits(reading: Reading): Promise<ReadingMisfit[]>;
  /** the reading of another archive of the same solver, with this archive's counts, and what does not fit */
  apply(reading: Reading): Promise<{ reading: Reading; mismatches: ReadingMisfit[] }>;
  survey(reading: Reading, onProgress?: (doneBytes: number, totalBytes: number) => void): Promise<Survey>;
  /** blocks of snapshots: count x nodes values, fields stacked in the order asked; with `reuse` a block is gone when the next is asked for */
  snapshots(reading: Reading, fieldNames: string[], indices: ArrayLike<number>, options?: { reuse?: boolean }): AsyncGenerator<{ from: number; count: number; nodes: number; values: Float64Array }, void, undefined>;
  axes(reading: Reading): Promise<Pick<Survey, 'stamps' | 'stampType' | 'stampPath' | 'axes' | 'spaceWeights' | 'timeWeights'>>;
  close(): Promise<void>;
}

export interface ArchiveReader {
  open(files: { name: string; path: string }[]): Promise<OpenArchive>;
}
