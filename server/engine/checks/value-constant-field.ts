/**
 * value/constant-field: a field that does not change in time (over two or more snapshots) or not in space (over two or
 * more nodes): it adds nothing, or one number a snapshot. A legitimately steady field is found too; hence only a caution.
 * Decision: such a field does not fire value/frozen or value/repeated as well. Fields without a finite value are not judged.
 */
import type { FieldSurvey } from '../survey.ts';
import type { Check, CheckSubject, Judgement } from './check.ts';
import { plainNumber, printedDigits } from './quantity.ts';
import { keepFields } from './remedy.ts';
import { writtenCount } from './written-part.ts';

function constancy(field: FieldSurvey, written: number): { inTime: boolean; inSpace: boolean } {
  const m = Math.min(field.snapshots, written);
  let finite = false;
  let sameContent = true;
  let spread = 0;
  for (let j = 0; j < m; j++) {
    if (Number.isFinite(field.min[j])) {
      finite = true;
      spread = Math.max(spread, field.max[j] - field.min[j]);
    }
    if (field.hash[j] !== field.hash[0]) sameContent = false;
  }
  return { inTime: finite && m > 1 && sameContent, inSpace: finite && field.nodes > 1 && spread === 0 };
}

function judgeField(subject: CheckSubject, field: FieldSurvey, varying: string[]): Judgement[] {
  const { inTime, inSpace } = constancy(field, writtenCount(subject));
  if (!inTime && !inSpace) return [];
  const value = plainNumber(field.min[0], printedDigits(field.dtype));
  const what =
    inTime && inSpace
      ? `holds the value ${value} everywhere and at all times`
      : inTime
        ? 'does not change in time'
        : 'does not change in space';
  return [
    {
      path: field.path,
      message: `${field.path} ${what}: it adds nothing that a reduced model could learn${varying.length > 0 ? '; leave it out, or keep it knowingly' : '; check that the right array was read'}.`,
      evidence: {
        snapshots: field.snapshots,
        nodes: field.nodes,
        inTime,
        inSpace,
        ...(inTime && inSpace ? { value: field.min[0] } : {}),
      },
      remedy: varying.length > 0 ? keepFields(varying, `Leave ${field.name} out of the state.`) : null,
    },
  ];
}

export const valueConstantField: Check = {
  id: 'value/constant-field',
  severity: 'caution',
  title: 'Each field changes in time and space',
  source: 'common practice, no source',
  thresholds: {},
  judge(subject) {
    const { survey } = subject;
    if (!survey) return [];
    const varying = survey.fields
      .filter((field) => !Object.values(constancy(field, writtenCount(subject))).includes(true))
      .map((field) => field.name);
    return survey.fields.flatMap((field) => judgeField(subject, field, varying));
  },
};
