/**
 * value/non-finite: NaN or infinity in a field, with where and when first seen. Dropping is offered while more than half of
 * the snapshots would remain; when every snapshot has as many, that is a mask, and masking is the cure.
 * Snapshots at the end that were never written are file/unwritten-data's.
 */
import type { FieldSurvey } from '../survey.ts';
import type { Check, CheckSubject, Judgement } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { counted, snapshotText, theCounted } from './quantity.ts';
import { dropSnapshots } from './remedy.ts';
import { placeText } from './space-axes.ts';
import { writtenCount } from './written-part.ts';

function judgeField(subject: CheckSubject, field: FieldSurvey): Judgement[] {
  const survey = subject.survey!;
  const m = Math.min(field.snapshots, writtenCount(subject));
  const affected: number[] = [];
  let total = 0;
  for (let j = 0; j < m; j++) {
    if (field.nonFinite[j] === 0) continue;
    affected.push(j);
    total += field.nonFinite[j];
  }
  if (affected.length === 0) return [];
  const [first] = affected;
  const node = field.firstNonFinite[first];
  const place = placeText(survey, field.path, node);
  const masked = m > 1 && affected.length === m && affected.every((j) => field.nonFinite[j] === field.nonFinite[first]);
  const few = affected.length < m / 2;
  const advice = masked
    ? 'as many in every snapshot, so probably a mask: mask these nodes'
    : few
      ? 'drop these snapshots or mask the nodes'
      : 'mask the nodes or correct the run';
  return [
    {
      path: field.path,
      message: `${field.path} holds ${counted(total, 'NaN or infinite value')} in ${counted(affected.length, 'snapshot')} of ${m}, first in ${snapshotText(survey, first)} at node ${node}${place ? ` (${place})` : ''}; ${advice}.`,
      evidence: evidenceOf(affected, survey.stamps, {
        count: total,
        snapshots: affected.length,
        firstNode: node,
        ...(place ? { place } : {}),
      }),
      remedy: few
        ? dropSnapshots(
            subject,
            affected,
            `Drop ${theCounted(affected.length, 'snapshot')} with values that are not finite.`,
          )
        : null,
    },
  ];
}

export const valueNonFinite: Check = {
  id: 'value/non-finite',
  severity: 'blocker',
  title: 'All values are finite',
  source: 'common practice, no source',
  thresholds: {},
  judge(subject) {
    return subject.survey?.fields.flatMap((field) => judgeField(subject, field)) ?? [];
  },
};
