/**
 * What the server's process and the reading process say to each other: requests and answers by the channel of
 * child_process.fork, blocks of snapshots through a file that both have open (exchange-file.ts).
 */
import type { ErrorCode, ErrorDetails } from '#contract/error.ts';
import type { ArchiveContents, Reading } from '#contract/reading.ts';
import type { Survey } from '../../engine/survey.ts';
import type { ArchiveFile } from '../archive.ts';
import type { Mismatch } from '../fit.ts';
import type { Limits } from '../limits.ts';
import type { ReadingVectors } from '../reading-vectors.ts';

/** Requests by name: what they take and what they answer. */
export interface Operations {
  open: { take: { files: ArchiveFile[]; limits: Limits }; answer: ArchiveContents };
  propose: { take: object; answer: Reading };
  apply: { take: { reading: Reading }; answer: { reading: Reading; mismatches: Mismatch[] } };
  vectors: { take: { reading: Reading }; answer: ReadingVectors };
  vector: { take: { path: string }; answer: Float64Array };
  survey: { take: { reading: Reading }; answer: Survey };
  /** `position`: where the blocks of this plan are put in the exchange file */
  plan: { take: { reading: Reading; fields: string[]; indices: Uint32Array }; answer: { plan: number; nodes: number; blocks: number; position: number } };
  /** puts one block into the exchange file */
  block: { take: { plan: number; block: number }; answer: { from: number; count: number } };
  forget: { take: { plan: number }; answer: null };
}
export type OperationName = keyof Operations;

export type Request = { [Name in OperationName]: { id: number; operation: Name; take: Operations[Name]['take'] } }[OperationName];

export type Reply =
  | { id: number; kind: 'answer'; answer: unknown }
  | { id: number; kind: 'refusal'; code: ErrorCode; message: string; details: ErrorDetails }
  | { id: number; kind: 'progress'; done: number; total: number; path: string };

/** Descriptor of the exchange file in the reading process; 3 is the channel. */
export const exchangeDescriptor = 4;
