/** What every rule asks of time stamps, and the accurate sum. */
import { PennyweightError } from '#contract/error.ts';

/**
 * Stamps must be finite and strictly increasing, and neither their span nor the ratio of their intervals beyond double
 * precision. Errors: 'stamps-invalid' with { index, value } of the first that is not.
 *
 * One stamp is a record of duration 0: every rule gives it the weight 1, so that its energy still counts, and the sum of its
 * weights is 1. Two stamps: every rule gives half the duration to each, and rules that need more are not admissible.
 */
export function assertStamps(stamps: ArrayLike<number>): void {
  const m = stamps.length;
  if (m === 0)
    throw new PennyweightError('stamps-invalid', 'There is no time stamp: a rule needs at least one snapshot.', {
      count: 0,
    });
  let shortest = Infinity;
  let longest = 0;
  let at = 1;
  for (let j = 0; j < m; j++) {
    const value = stamps[j];
    if (!Number.isFinite(value))
      throw new PennyweightError(
        'stamps-invalid',
        `Time stamp ${j} is ${value}: stamps must be finite. Drop that snapshot or correct the reading.`,
        { index: j, value: String(value) },
      );
    if (j === 0) continue;
    const interval = value - stamps[j - 1];
    if (!(interval > 0))
      throw new PennyweightError(
        'stamps-invalid',
        `Time stamp ${j} (${value}) is not after stamp ${j - 1} (${stamps[j - 1]}): sort the record and drop repeated stamps first.`,
        { index: j, value, previous: stamps[j - 1] },
      );
    if (interval < shortest) [shortest, at] = [interval, j];
    longest = Math.max(longest, interval);
  }
  if (m > 1 && !(Number.isFinite(stamps[m - 1] - stamps[0]) && Number.isFinite(longest / shortest)))
    throw new PennyweightError(
      'stamps-invalid',
      `Time stamp ${at} (${stamps[at]}) is ${shortest} after the one before, and others are up to ${longest} apart, which no rule can weigh: correct the reading.`,
      { index: at, value: stamps[at], shortest, longest: String(longest) },
    );
}

/** Compensated sum (A. Neumaier, Z. Angew. Math. Mech. 54 (1974) 39-51): error about eps, not eps x length. Infinite where it overflows. */
export function accurateSum(values: Float64Array | readonly number[]): number {
  let sum = 0;
  let correction = 0;
  for (const value of values) {
    const next = sum + value;
    correction += Math.abs(sum) >= Math.abs(value) ? sum - next + value : value - next + sum;
    sum = next;
  }
  return Number.isFinite(sum) ? sum + correction : sum;
}

/** t_m - t_1 */
export function durationOf(stamps: ArrayLike<number>): number {
  return stamps.length < 2 ? 0 : stamps[stamps.length - 1] - stamps[0];
}
