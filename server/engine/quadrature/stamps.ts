/** What every rule asks of time stamps, and the accurate sum. */
import { PennyweightError } from '#contract/error.ts';

/**
 * Stamps must be finite and strictly increasing. Errors: 'stamps-invalid' with { index, value } of the first that is not.
 * One stamp is a record of duration 0: every rule gives it the weight 1, so that its energy still counts.
 */
export function assertStamps(stamps: ArrayLike<number>): void {
  if (stamps.length === 0) throw new PennyweightError('stamps-invalid', 'There is no time stamp: a rule needs at least one snapshot.', { count: 0 });
  for (let j = 0; j < stamps.length; j++) {
    const value = stamps[j];
    if (!Number.isFinite(value)) throw new PennyweightError('stamps-invalid', `Time stamp ${j} is ${value}: stamps must be finite. Drop that snapshot or correct the reading.`, { index: j, value: String(value) });
    if (j > 0 && !(value > stamps[j - 1])) {
      throw new PennyweightError('stamps-invalid', `Time stamp ${j} (${value}) is not after stamp ${j - 1} (${stamps[j - 1]}): sort the record and drop repeated stamps first.`, { index: j, value, previous: stamps[j - 1] });
    }
  }
}

/** Compensated sum (A. Neumaier, Z. Angew. Math. Mech. 54 (1974) 39-51): error about eps, not eps x length. */
export function accurateSum(values: ArrayLike<number>): number {
  let sum = 0, correction = 0;
  for (let i = 0; i < values.length; i++) {
    const value = values[i], next = sum + value;
    correction += Math.abs(sum) >= Math.abs(value) ? sum - next + value : value - next + sum;
    sum = next;
  }
  return sum + correction;
}

/** t_m - t_1 */
export function durationOf(stamps: ArrayLike<number>): number {
  return stamps.length < 2 ? 0 : stamps[stamps.length - 1] - stamps[0];
}
