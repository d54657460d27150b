/** The catalogue of checks, in the order of the specification, and the judgement of a subject by all of them. */
import { severities, type CheckPolicy, type Finding } from '#contract/finding.ts';
import type { Check, CheckSubject } from './check.ts';
import { fileChecksumMismatch } from './file-checksum-mismatch.ts';
import { fileOutsideLink } from './file-outside-link.ts';
import { fileUnreadable } from './file-unreadable.ts';
import { fileUnwrittenData } from './file-unwritten-data.ts';
import { gridDiffers } from './grid-differs.ts';
import { gridDuplicateNodes } from './grid-duplicate-nodes.ts';
import { gridMissing } from './grid-missing.ts';
import { gridNotMonotone } from './grid-not-monotone.ts';
import { gridUneven } from './grid-uneven.ts';
import { paramMissing } from './param-missing.ts';
import { thresholdsOf } from './policy.ts';
import { readingIncomplete } from './reading-incomplete.ts';
import { readingShapeMismatch } from './reading-shape-mismatch.ts';
import { timeDuplicate } from './time-duplicate.ts';
import { timeEvenPointCount } from './time-even-point-count.ts';
import { timeGap } from './time-gap.ts';
import { timeMissing } from './time-missing.ts';
import { timeNegativeWeights } from './time-negative-weights.ts';
import { timeNotIncreasing } from './time-not-increasing.ts';
import { timeRestartOverlap } from './time-restart-overlap.ts';
import { timeRoundedStamps } from './time-rounded-stamps.ts';
import { timeUnevenSpacing } from './time-uneven-spacing.ts';
import { valueConstantField } from './value-constant-field.ts';
import { valueFillValue } from './value-fill-value.ts';
import { valueFrozen } from './value-frozen.ts';
import { valueNonFinite } from './value-non-finite.ts';
import { valueRepeated } from './value-repeated.ts';
import { valueUnitMissing } from './value-unit-missing.ts';
import { unwrittenTail } from './written-part.ts';

export const catalogue: Check[] = [
  fileUnreadable,
  fileChecksumMismatch,
  fileUnwrittenData,
  fileOutsideLink,
  readingIncomplete,
  readingShapeMismatch,
  timeMissing,
  timeNotIncreasing,
  timeDuplicate,
  timeRestartOverlap,
  timeGap,
  timeUnevenSpacing,
  timeRoundedStamps,
  timeEvenPointCount,
  timeNegativeWeights,
  gridMissing,
  gridNotMonotone,
  gridDuplicateNodes,
  gridUneven,
  gridDiffers,
  valueNonFinite,
  valueFillValue,
  valueFrozen,
  valueRepeated,
  valueConstantField,
  valueUnitMissing,
  paramMissing,
];

/**
 * Findings of all checks: blockers, cautions, notes, each in the catalogue's order and then in that of the check.
 * The end of the record that was never written is found once, at the policy's threshold, and left out of all other checks.
 */
export function judgeAll(subject: CheckSubject, policy: CheckPolicy): Finding[] {
  const { trailingSnapshots } = thresholdsOf(fileUnwrittenData, policy);
  const written: CheckSubject = {
    ...subject,
    unwritten: subject.survey ? unwrittenTail(subject.survey, trailingSnapshots) : 0,
  };
  const findings = catalogue.flatMap((check) =>
    check
      .judge(written, thresholdsOf(check, policy))
      .map((judgement): Finding => ({ id: check.id, severity: check.severity, ...judgement })),
  );
  return findings.sort((a, b) => severities.indexOf(a.severity) - severities.indexOf(b.severity));
}
