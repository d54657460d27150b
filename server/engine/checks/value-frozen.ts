/**
 * value/frozen: a snapshot identical bit for bit to the one before, field by field. Not for
 *  - a field that never changes in time (value/constant-field, once),
 *  - a field that is updated in a fixed rhythm, every k-th snapshot over the whole record, while another field changes at
 *    every snapshot: a slowly computed quantity stored with the others,
 *  - snapshots without a finite value (value/non-finite),
 *  - snapshots at the end that were never written (file/unwritten-data).
 * A run that comes to rest bit for bit does fire: the copies carry nothing, and dropping them leaves the last one.
 */
import type { FieldSurvey } from '../survey.ts';
import type { Check, CheckSubject, Judgement } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { counted, snapshotText } from './quantity.ts';
import { orderRecord } from './remedy.ts';
import { writtenCount } from './written-part.ts';

/** Indices j with the content of j - 1, below `m`; where there is a finite value. */
export function copies(field: FieldSurvey, m: number): number[] {
  const found: number[] = [];
  for (let j = 1; j < Math.min(m, field.hash.length); j++) {
    if (field.hash[j] === field.hash[j - 1] && field.nonFinite[j] < field.nodes) found.push(j);
  }
  return found;
}

/** Changes come every k-th snapshot, k >= 2, at least three times; the first and the last hold may be shorter. */
function updatedInRhythm(field: FieldSurvey, m: number): boolean {
  const changes: number[] = [];
  for (let j = 1; j < Math.min(m, field.hash.length); j++) if (field.hash[j] !== field.hash[j - 1]) changes.push(j);
  if (changes.length < 3) return false;
  const k = changes[1] - changes[0];
  return (
    k >= 2 &&
    changes[0] <= k &&
    m - changes[changes.length - 1] <= k &&
    changes.every((j, i) => i === 0 || j - changes[i - 1] === k)
  );
}

function judgeField(subject: CheckSubject, field: FieldSurvey): Judgement[] {
  const survey = subject.survey!;
  const m = writtenCount(subject);
  const found = copies(field, m);
  if (found.length === 0 || found.length === Math.min(m, field.hash.length) - 1) return [];
  const rest = survey.fields.filter((other) => other !== field && other.snapshots === field.snapshots);
  if (updatedInRhythm(field, m) && rest.some((other) => copies(other, m).length === 0)) return [];
  const [first] = found;
  return [
    {
      path: field.path,
      message: `${counted(found.length, 'snapshot')} of ${field.path} ${found.length === 1 ? 'is' : 'are'} identical bit for bit to the one before, first ${snapshotText(survey, first)}; drop the ${found.length === 1 ? 'copy' : 'copies'}.`,
      evidence: evidenceOf(found, survey.stamps),
      remedy: orderRecord({ dropFrozen: true }, 'Drop snapshots that are identical to the one before.'),
    },
  ];
}

export const valueFrozen: Check = {
  id: 'value/frozen',
  severity: 'blocker',
  title: 'No snapshot is a copy of the one before',
  source: 'common practice, no source',
  thresholds: {},
  judge(subject) {
    return subject.survey?.fields.flatMap((field) => judgeField(subject, field)) ?? [];
  },
};
