/**
 * time/duplicate: two snapshots at the same time (neighbours: to rounding), side by side or, after sorting, from different
 * places. Equal stamps of a restart's overlap are not counted (record-order.ts): keeping one segment removes them.
 * Where the fields differ at equal stamps, the stamps may be rounded too coarsely to tell the snapshots apart; said so.
 */
import type { Check } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { orderOf, stampPath } from './ordered-record.ts';
import { counted, snapshotText } from './quantity.ts';
import { dropSnapshots, orderRecord } from './remedy.ts';
import { sameTime, writtenStamps } from './written-part.ts';

export const timeDuplicate: Check = {
  id: 'time/duplicate',
  severity: 'blocker',
  title: 'No two snapshots have the same time',
  source: 'common practice, no source',
  thresholds: {},
  judge(subject) {
    const { survey } = subject;
    const stamps = writtenStamps(subject);
    const order = orderOf(subject);
    if (!survey || !stamps || !order) return [];
    const { duplicates, nearlyEqual } = order;
    if (duplicates.length === 0) return [];
    const fields = survey.fields.filter((field) => field.hash.length >= stamps.length);
    const differing = duplicates.filter(
      (j) => j > 0 && sameTime(survey, j, j - 1) && fields.some((field) => field.hash[j] !== field.hash[j - 1]),
    ).length;
    const [first] = duplicates;
    const advice =
      differing === 0
        ? 'drop the repeated snapshots.'
        : `in ${differing} of them the fields differ from the snapshot before, so the stamps may be rounded too coarsely: give start and step in the reading, or drop the repeated snapshots.`;
    return [
      {
        path: stampPath(subject),
        message: `${counted(duplicates.length, 'time stamp repeats', 'time stamps repeat')} an earlier one, first at ${snapshotText(survey, first)}; ${advice}`,
        evidence: evidenceOf(duplicates, stamps, { fieldsDiffer: differing }),
        remedy:
          nearlyEqual.length > 0
            ? dropSnapshots(subject, duplicates, 'Keep the first snapshot of each time and drop the repeated ones.')
            : orderRecord({ dropDuplicates: true }, 'Keep the first snapshot of each time and drop the repeated ones.'),
      },
    ];
  },
};
