/**
 * value/repeated: a snapshot identical bit for bit to an earlier one that is not its neighbour. Only a caution: a truly
 * periodic or symmetric record repeats itself. Not counted are copies of the snapshot before (value/frozen), repeats at the
 * same time (time/duplicate, time/restart-overlap), snapshots without a finite value, fields constant in time, and the
 * unwritten end.
 */
import type { FieldSurvey, Survey } from '../survey.ts';
import type { Check, CheckSubject, Judgement } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { counted, snapshotText, theCounted } from './quantity.ts';
import { dropSnapshots } from './remedy.ts';
import { sameTime, writtenCount } from './written-part.ts';

/** Pairs [earlier, later]. O(m) by a map from content to where it was first met. */
function repeats(field: FieldSurvey, m: number, survey: Survey): [number, number][] {
  const first = new Map<string, number>();
  const found: [number, number][] = [];
  for (let j = 0; j < Math.min(m, field.hash.length); j++) {
    if (field.nonFinite[j] === field.nodes) continue;
    const earlier = first.get(field.hash[j]);
    if (earlier === undefined) first.set(field.hash[j], j);
    else if (field.hash[j] !== field.hash[j - 1] && !sameTime(survey, j, earlier)) found.push([earlier, j]);
  }
  return first.size > 1 ? found : [];
}

function judgeField(subject: CheckSubject, field: FieldSurvey): Judgement[] {
  const survey = subject.survey!;
  const found = repeats(field, writtenCount(subject), survey);
  if (found.length === 0) return [];
  const [[earlier, later]] = found;
  const indices = found.map(([, j]) => j);
  return [
    {
      path: field.path,
      message: `${counted(found.length, 'snapshot')} of ${field.path} ${found.length === 1 ? 'repeats' : 'repeat'} an earlier one bit for bit, first ${snapshotText(survey, later)} that of ${snapshotText(survey, earlier)}; drop ${found.length === 1 ? 'it' : 'them'}, or waive this if the record is truly periodic.`,
      evidence: evidenceOf(indices, survey.stamps, { repeats: found.slice(0, 20).map(([i]) => i) }),
      remedy: dropSnapshots(subject, indices, `Drop ${theCounted(found.length, 'repeated snapshot')}.`),
    },
  ];
}

export const valueRepeated: Check = {
  id: 'value/repeated',
  severity: 'caution',
  title: 'No snapshot repeats an earlier one',
  source: 'common practice, no source',
  thresholds: {},
  judge(subject) {
    return subject.survey?.fields.flatMap((field) => judgeField(subject, field)) ?? [];
  },
};
