/** What the beam says of one snapshot. Indices count from 0, as in findings and recipes. */
import { quantityText } from '../components/number-format.ts';
import type { BeamRecord, Weights } from './beam-record.ts';

/** gap after, duplicate, restart */
export function peculiarities({ marks }: BeamRecord, index: number): string[] {
  return [marks.duplicates.includes(index) && 'repeated stamp', marks.restarts.includes(index) && 'first after a restart', marks.gaps.includes(index) && 'a gap follows'].filter((word): word is string => word !== false);
}

export function recordLabel({ records }: BeamRecord, index: number): string | null {
  return records.length > 1 ? (records.find((record) => index >= record.from && index < record.from + record.count)?.label ?? null) : null;
}

export const partWords = { train: 'training', validation: 'validation', test: 'test', guard: 'left out between parts' } as const;

export function snapshotWords(record: BeamRecord, index: number, second?: Weights): string {
  const words = [`Snapshot ${index} of ${record.count}`];
  const of = recordLabel(record, index);
  if (of) words.push(of);
  if (record.stamps) words.push(`time ${quantityText(record.stamps[index], 8)}${record.unit ? ` ${record.unit}` : ''}`);
  if (record.weights) words.push(`weight ${quantityText(record.weights[index])}${record.rule ? ` (${record.rule})` : ''}`);
  if (second) words.push(`${quantityText(second.weights[index])} (${second.label})`);
  if (record.split) words.push(partWords[record.split[index]]);
  return [...words, ...peculiarities(record, index)].join(', ');
}
