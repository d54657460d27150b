/**
 * time/restart-overlap: time jumps back to a value already covered, as after a restart from a checkpoint: the overlap
 * exists twice. What counts as covered, and what is merely out of order, stands in record-order.ts.
 */
import type { Check } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { orderOf, stampPath } from './ordered-record.ts';
import { counted, stampText } from './quantity.ts';
import { orderRecord } from './remedy.ts';
import { writtenStamps } from './written-part.ts';

export const timeRestartOverlap: Check = {
  id: 'time/restart-overlap',
  severity: 'blocker',
  title: 'No part of the record is covered twice',
  source: 'common practice, no source',
  thresholds: {},
  judge(subject) {
    const { survey } = subject;
    const stamps = writtenStamps(subject);
    const order = orderOf(subject);
    if (!survey || !stamps || !order) return [];
    const { restarts } = order;
    if (restarts.length === 0) return [];
    const [first] = restarts;
    const overlapped = restarts.reduce((sum, restart) => sum + restart.overlapped, 0);
    // A later segment that ends before the earlier one would shorten the record.
    const keep = restarts.some((restart) => restart.overtakes) ? 'keep-later' : 'keep-earlier';
    const fromStart = restarts.length === 1 && first.to === stamps.find(Number.isFinite);
    return [
      {
        path: stampPath(subject),
        message: `Time jumps back to a value already covered in ${counted(restarts.length, 'place')}, first at snapshot ${first.index}: from ${stampText(survey, first.from)} to ${stampText(survey, first.to)}, so ${counted(overlapped, 'snapshot')} of the earlier segment ${overlapped === 1 ? 'is' : 'are'} covered again${fromStart ? ' (it begins where the record begins: perhaps two runs in one archive)' : ''}; keep the ${keep === 'keep-later' ? 'later (or the earlier)' : 'earlier (or the later)'} segment.`,
        evidence: evidenceOf(
          restarts.map((restart) => restart.index),
          stamps,
          { overlapped, from: restarts.slice(0, 20).map((restart) => restart.from) },
        ),
        remedy: orderRecord(
          { restart: keep },
          keep === 'keep-later'
            ? 'Keep the later segment where time was covered twice.'
            : 'Keep the earlier segment: the later one does not reach as far.',
        ),
      },
    ];
  },
};
