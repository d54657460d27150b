/**
 * value/fill-value: placeholders for "no value" stored as numbers: the declared fill value, or constants like 1e20,
 * 9.96921e36 or -9999 that the pass met.
 *  - Declared: one value is enough. A declared 0 is no evidence: a true zero (a wall, a fluid at rest) looks the same.
 *  - Not declared: it must lie outside all other values and far from their mean: `outlier` standard deviations with at
 *    least `minimumCount` values, `loneOutlier` for fewer. So a pressure that really passes through -9999, among values as
 *    large, is none; a single 1e20 among velocities, or -9999 among temperatures, is one.
 * Snapshots at the end that were never written are file/unwritten-data's.
 */
import type { FieldSurvey } from '../survey.ts';
import type { Check, CheckSubject, Judgement } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { counted, plainNumber, snapshotText, theCounted } from './quantity.ts';
import { dropSnapshots } from './remedy.ts';
import { placeText } from './space-axes.ts';
import { writtenCount } from './written-part.ts';

type Candidate = FieldSurvey['fill'][number];

/**
 * Distance of the constant from the mean of all other finite values, in their standard deviations; 0 when it lies among
 * them, Infinity when they do not vary or there are none. Other candidates' values are left out as well.
 */
function outlierRatio(field: FieldSurvey, { value }: Candidate, m: number): number {
  let sum = 0;
  let squares = 0;
  let values = 0;
  for (let j = 0; j < m; j++) {
    const finite = field.nodes - field.nonFinite[j];
    if (finite === 0) continue;
    if (value > 0 ? field.max[j] > value : field.min[j] < value) return 0;
    const square = field.norm[j] ** 2;
    let fillSum = 0;
    let fillSquare = 0;
    for (const fill of field.fill) {
      fillSum += fill.counts[j] * fill.value;
      fillSquare += fill.counts[j] * fill.value ** 2;
      values -= fill.counts[j];
    }
    values += finite;
    sum += field.mean[j] * finite - fillSum;
    // Beside 1e20 the rest is lost to rounding; 4 eps ||u||^2 bounds what was lost.
    squares += fillSquare > 0 ? Math.max(square - fillSquare, 4 * Number.EPSILON * square) : square;
  }
  if (values <= 0) return Infinity;
  const centre = fillIsFar(value, squares / values) ? 0 : sum / values;
  const deviation = Math.sqrt(Math.max(0, squares / values - centre ** 2));
  return Math.abs(value - centre) / deviation;
}

/** Whether the constant is so large that sums beside it say nothing of the mean of the rest. */
function fillIsFar(value: number, meanSquare: number): boolean {
  return value ** 2 * Number.EPSILON > meanSquare * 1e-6;
}

function judgeCandidate(
  subject: CheckSubject,
  field: FieldSurvey,
  candidate: Candidate,
  limits: Record<string, number>,
): Judgement[] {
  const survey = subject.survey!;
  const m = Math.min(field.snapshots, writtenCount(subject));
  const affected: number[] = [];
  let total = 0;
  for (let j = 0; j < m; j++) {
    if (candidate.counts[j] === 0) continue;
    affected.push(j);
    total += candidate.counts[j];
  }
  if (total === 0) return [];
  if (candidate.declared && candidate.value === 0) return [];
  if (!candidate.declared) {
    const ratio = outlierRatio(field, candidate, m);
    if (ratio < (total >= limits.minimumCount ? limits.outlier : limits.loneOutlier)) return [];
  }
  const node = affected[0] === candidate.firstSnapshot ? candidate.firstNode : -1;
  const place = placeText(survey, field.path, node);
  const few = affected.length < m / 2;
  return [
    {
      path: field.path,
      message: `${field.path} holds the ${candidate.declared ? 'declared fill value' : 'likely fill value'} ${plainNumber(candidate.value)} ${counted(total, 'time')} in ${counted(affected.length, 'snapshot')} of ${m}, first in ${snapshotText(survey, affected[0])}${node >= 0 ? ` at node ${node}` : ''}${place ? ` (${place})` : ''}; ${few ? 'mask these nodes or drop these snapshots' : 'mask these nodes'}.`,
      evidence: evidenceOf(affected, survey.stamps, {
        count: total,
        snapshots: affected.length,
        value: candidate.value,
        declared: candidate.declared,
      }),
      remedy: few
        ? dropSnapshots(
            subject,
            affected,
            `Drop ${theCounted(affected.length, 'snapshot')} that ${affected.length === 1 ? 'holds' : 'hold'} fill values.`,
          )
        : null,
    },
  ];
}

export const valueFillValue: Check = {
  id: 'value/fill-value',
  severity: 'blocker',
  title: 'No placeholder stands for a value',
  source:
    'CF Conventions, section 2.5.1 (missing data); netcdf.h, NC_FILL_*; 1e20 and -9999: common practice, no source',
  thresholds: {
    minimumCount: {
      default: 3,
      unit: 'values',
      meaning: 'from this many equal values on, the lower limit `outlier` applies to a constant that is not declared',
    },
    outlier: {
      default: 3,
      unit: 'standard deviations',
      meaning: 'how far from the mean of all other values a repeated constant must be',
    },
    loneOutlier: {
      default: 100,
      unit: 'standard deviations',
      meaning: 'how far from the mean of all other values a constant must be that is met fewer times',
    },
  },
  judge(subject, limits) {
    return (
      subject.survey?.fields.flatMap((field) =>
        field.fill.flatMap((candidate) => judgeCandidate(subject, field, candidate, limits)),
      ) ?? []
    );
  },
};
