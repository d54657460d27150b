/** provided: weights that the archive brings, after their length, sign and sum were checked. */
import { PennyweightError } from '#contract/error.ts';
import { accurateSum, durationOf } from './stamps.ts';

/** Share by which the sum may miss the duration before it is said. */
const sumTolerance = 0.01;

/**
 * Weights scaled so that their sum is the duration, as every rule's are. Errors: 'weights-invalid' with { index, value } for a
 * wrong length, a value that is not finite or negative, or a sum of zero.
 */
export function providedWeights(stamps: Float64Array, given: ArrayLike<number>): { weights: Float64Array; why: string } {
  const m = stamps.length;
  if (given.length !== m) throw new PennyweightError('weights-invalid', `The archive gives ${given.length} time weights for ${m} snapshots: correct the reading.`, { expected: m, actual: given.length });
  for (let j = 0; j < m; j++) {
    if (!Number.isFinite(given[j]) || given[j] < 0) {
      throw new PennyweightError('weights-invalid', `Provided time weight ${j} is ${given[j]}: weights must be finite and not negative, since snapshots are multiplied by their square root.`, { index: j, value: String(given[j]) });
    }
  }
  const sum = accurateSum(given), duration = m === 1 ? 1 : durationOf(stamps);
  if (sum <= 0) throw new PennyweightError('weights-invalid', 'All provided time weights are zero: give weights or choose a rule.', { sum });
  const off = Math.abs(sum - duration) / duration;
  return {
    weights: Float64Array.from({ length: m }, (_, j) => (given[j] * duration) / sum),
    why: off <= sumTolerance ? 'given by the archive; their sum is the duration.' : `given by the archive; their sum ${sum.toPrecision(4)} was scaled to the duration ${duration.toPrecision(4)}.`,
  };
}
