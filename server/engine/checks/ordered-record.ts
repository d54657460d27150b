/**
 * The record as it stands once its order is mended: the stamps that the checks of spacing look at. Without this, one
 * restart or one repeated stamp would also be reported as uneven spacing. `indices` leads back to the storage order.
 */
import type { CheckSubject } from './check.ts';
import { describeOrder, type RecordOrder } from './record-order.ts';
import { roundOff } from './space-axes.ts';
import { writtenStamps } from './written-part.ts';

export interface OrderedRecord {
  /** strictly increasing */
  stamps: Float64Array;
  indices: number[];
}

/** How the written part of the stamps runs; null without time. */
export function orderOf(subject: CheckSubject): RecordOrder | null {
  const stamps = writtenStamps(subject);
  return stamps && describeOrder(stamps, roundOff(subject.survey!.stampType));
}

export function orderedRecord(subject: CheckSubject): OrderedRecord | null {
  const stamps = writtenStamps(subject);
  if (!stamps) return null;
  const indices = orderOf(subject)!.kept;
  return { stamps: Float64Array.from(indices, (j) => stamps[j]), indices };
}

/** Path that findings on the stamps name. */
export function stampPath(subject: CheckSubject): string | null {
  const time = subject.survey?.reading.time;
  return subject.survey?.stampPath ?? (time?.kind === 'array' ? time.path : null);
}
