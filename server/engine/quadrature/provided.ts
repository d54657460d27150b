/** provided: weights that the archive brings, after their length, sign and sum were checked. */
import { PennyweightError } from '#contract/error.ts';
import { accurateSum, assertStamps, durationOf } from './stamps.ts';

/** Share by which the sum may miss the duration before it is said; common practice, no source. */
const sumTolerance = 0.01;

/** Errors: 'weights-invalid' with { index, value } for a wrong length, or a value that is not finite or negative. */
export function assertProvided(given: ArrayLike<number>, m: number): void {
  if (given.length !== m)
    throw new PennyweightError(
      'weights-invalid',
      `The archive gives ${given.length} time weights for ${m} snapshots: correct the reading.`,
      { expected: m, actual: given.length },
    );
  for (let j = 0; j < m; j++)
    if (!Number.isFinite(given[j]) || given[j] < 0)
      throw new PennyweightError(
        'weights-invalid',
        `Provided time weight ${j} is ${given[j]}: weights must be finite and not negative, since snapshots are multiplied by their square root.`,
        { index: j, value: String(given[j]) },
      );
}

/**
 * Weights scaled so that their sum is the duration, as every rule's are; `why` says when that changed them. Errors:
 * 'stamps-invalid' as assertStamps; 'weights-invalid' as assertProvided, and for a sum that is zero or beyond double precision.
 */
export function providedWeights(
  stamps: Float64Array,
  given: ArrayLike<number>,
): { weights: Float64Array; why: string } {
  assertStamps(stamps);
  assertProvided(given, stamps.length);
  const sum = accurateSum(Float64Array.from(given));
  const duration = stamps.length === 1 ? 1 : durationOf(stamps);
  const factor = duration / sum;
  if (!Number.isFinite(factor) || factor === 0)
    throw new PennyweightError(
      'weights-invalid',
      `The provided time weights sum to ${sum}: give weights that can be scaled to the duration, or choose a rule.`,
      { sum: String(sum) },
    );
  const off = Math.abs(sum - duration) / duration;
  return {
    weights: Float64Array.from(given, (weight) => weight * factor),
    why:
      off <= sumTolerance
        ? 'given by the archive; their sum is the duration.'
        : `given by the archive; their sum ${sum.toPrecision(4)} was scaled to the duration ${duration.toPrecision(4)}.`,
  };
}
