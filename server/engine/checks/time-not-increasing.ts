/**
 * time/not-increasing: some t[j+1] < t[j], or a stamp that is no number and so has no place in any order.
 * A jump back to time already covered is a restart and time/restart-overlap's; which is which stands in record-order.ts.
 */
import type { Check, Judgement } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { orderOf, stampPath } from './ordered-record.ts';
import { counted, stampText, theCounted } from './quantity.ts';
import { dropSnapshots, orderRecord } from './remedy.ts';
import { writtenStamps } from './written-part.ts';

export const timeNotIncreasing: Check = {
  id: 'time/not-increasing',
  severity: 'blocker',
  title: 'Time runs forward',
  source: 'common practice, no source',
  thresholds: {},
  judge(subject) {
    const { survey } = subject;
    const stamps = writtenStamps(subject);
    const order = orderOf(subject);
    if (!survey || !stamps || !order) return [];
    const { backward, undefinedStamps } = order;
    const path = stampPath(subject);
    const judgements: Judgement[] = [];
    if (backward.length > 0) {
      const [first] = backward;
      judgements.push({
        path,
        message: `Time goes back in ${counted(backward.length, 'place')}, first at snapshot ${first}: t = ${stampText(survey, stamps[first])} comes after ${stampText(survey, stamps[first - 1])}, to a time that was not covered before; sort the snapshots by time.`,
        evidence: evidenceOf(backward, stamps),
        remedy: orderRecord({ sort: true }, 'Sort the snapshots by time.'),
      });
    }
    if (undefinedStamps.length > 0) {
      judgements.push({
        path,
        message: `${counted(undefinedStamps.length, 'time stamp is', 'time stamps are')} NaN or infinite, first at snapshot ${undefinedStamps[0]}: drop ${undefinedStamps.length === 1 ? 'this snapshot' : 'these snapshots'} or correct the time in the reading.`,
        evidence: evidenceOf(undefinedStamps, null),
        remedy: dropSnapshots(
          subject,
          undefinedStamps,
          `Drop ${theCounted(undefinedStamps.length, 'snapshot')} without a time.`,
        ),
      });
    }
    return judgements;
  },
};
