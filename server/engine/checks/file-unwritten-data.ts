/**
 * file/unwritten-data: the shape promises more than was written, so fill values would be read as data.
 *  - Certain: the file holds fewer elements than the shape needs (chunks never allocated).
 *  - Suspected: the record ends in snapshots that hold the fill value only; when that counts and when not (a first snapshot
 *    of zeros, a field that is zero throughout, fades to zero or is switched off while others go on) stands in written-part.ts.
 */
import type { Survey } from '../survey.ts';
import type { Check, CheckSubject, Judgement } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { counted, plainNumber, theCounted } from './quantity.ts';
import { dropSnapshots } from './remedy.ts';
import { shortArrays, snapshotCount, unwrittenTail } from './written-part.ts';

function tailIndices(survey: Survey, tail: number): number[] {
  const m = snapshotCount(survey);
  return Array.from({ length: tail }, (_, k) => m - tail + k);
}

function judgeTail(subject: CheckSubject, survey: Survey, tail: number): Judgement {
  const indices = tailIndices(survey, tail);
  const m = snapshotCount(survey);
  const fields = survey.fields.filter((field) => field.snapshots === m && field.trailingFill < m);
  const last = fields[0];
  const value = last.nonFinite[m - 1] === last.nodes ? NaN : last.min[m - 1];
  const names = fields.map((field) => field.path);
  return {
    path: fields.length === 1 ? last.path : null,
    message: `The last ${counted(tail, 'snapshot')} of ${m} in ${names.slice(0, 3).join(', ')}${names.length > 3 ? ', …' : ''} ${tail === 1 ? 'holds' : 'hold'} nothing but the fill value ${plainNumber(value)}, from snapshot ${indices[0]} on: the writer stopped there; drop them or upload the complete file.`,
    evidence: evidenceOf(indices, survey.stamps, { fields: names.slice(0, 20), written: m - tail }),
    remedy: dropSnapshots(subject, indices, `Drop ${theCounted(tail, 'unwritten snapshot')} at the end.`),
  };
}

export const fileUnwrittenData: Check = {
  id: 'file/unwritten-data',
  severity: 'blocker',
  title: 'Everything that the shapes promise was written',
  source: 'HDF5 reference manual, H5Dget_storage_size and H5Pset_fill_value; tail rule: common practice, no source',
  thresholds: {
    trailingSnapshots: {
      default: 1,
      unit: 'snapshots',
      meaning: 'fewest snapshots of nothing but the fill value at the end of the record that count as unwritten',
    },
  },
  judge(subject, { trailingSnapshots }) {
    const { survey } = subject;
    if (!survey) return [];
    const tail = unwrittenTail(survey, trailingSnapshots);
    const m = snapshotCount(survey);
    const judgements = shortArrays(survey).map(({ path, held, needed }): Judgement => {
      const field = survey.fields.find((candidate) => candidate.path === path);
      const indices =
        field && field.trailingFill > 0 && field.trailingFill < m ? tailIndices(survey, field.trailingFill) : [];
      return {
        path,
        message: `${path} holds ${held} of the ${needed} values that its shape promises; the rest was never written and would be read as the fill value${indices.length > 0 ? `, from snapshot ${indices[0]} on` : ''}: trim the record to what was written or upload the complete file.`,
        evidence: { ...evidenceOf(indices, survey.stamps), count: needed - held, held, needed },
        remedy:
          indices.length > 0
            ? dropSnapshots(subject, indices, `Drop ${theCounted(indices.length, 'unwritten snapshot')} at the end.`)
            : null,
      };
    });
    const told = survey.fields.some((field) => judgements.some(({ path }) => path === field.path));
    return tail > 0 && !told ? [...judgements, judgeTail(subject, survey, tail)] : judgements;
  },
};
