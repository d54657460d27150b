/**
 * file/unreadable: the container cannot be opened, is cut off, or reading it failed or ran over its limits.
 * Also fires for each place inside an otherwise readable container that could not be described: what it held is unknown.
 */
import type { Check, Judgement } from './check.ts';

export const fileUnreadable: Check = {
  id: 'file/unreadable',
  severity: 'blocker',
  title: 'The container can be opened and read to its end',
  source: 'common practice, no source',
  thresholds: {},
  judge({ failure, survey }) {
    const judgements: Judgement[] = [];
    if (failure) {
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
