/**
 * file/unreadable: the container cannot be opened, is cut off, or reading it failed or ran over its limits.
 * Also fires for each place inside an otherwise readable container that could not be described: what it held is unknown.
 * An array that was not read because its shape claims more than was ever written is file/unwritten-data's.
 */
import type { Check, CheckSubject, Judgement } from './check.ts';
import { shortArrays } from './written-part.ts';

function isUnwritten({ failure, survey }: CheckSubject): boolean {
  return survey !== null && shortArrays(survey).some(({ path }) => path === failure?.path);
}

export const fileUnreadable: Check = {
  id: 'file/unreadable',
  severity: 'blocker',
  title: 'The container can be opened and read to its end',
  source: 'common practice, no source',
  thresholds: {},
  judge(subject) {
    const { failure, survey } = subject;
    const judgements: Judgement[] = [];
    if (failure && !isUnwritten(subject)) {
      judgements.push({ path: failure.path, message: failure.message, evidence: {}, remedy: null });
    }
    for (const { path, reason } of survey?.contents.damaged ?? []) {
      judgements.push({
        path,
        message: `${path} could not be read: ${reason.replace(/[.\s]+$/, '')}; compare the file with the original and upload it again.`,
        evidence: { reason },
        remedy: null,
      });
    }
    return judgements;
  },
};
