/** Error estimate of the mean energy (1/T) sum a_j ||u_j||_W^2. */
import { PennyweightError } from '#contract/error.ts';
import type { Segment } from './segment.ts';
import type { TimeRule } from './time-rule.ts';

/**
 * Relative change of the mean energy when the same rule sees every other snapshot: a cautious estimate, since the finer value is
 * better than the coarser one (the comparison behind Richardson extrapolation; common practice, no source). Segments with an
 * even number of snapshots leave their last one out of both. null when no segment has five snapshots, or there is no energy.
 * `energies`: ||u_j||_W^2, length m. Errors: 'invalid-input' for another length.
 */
export function energyError(
  rule: Pick<TimeRule, 'weights'>,
  segments: readonly Segment[],
  energies: ArrayLike<number>,
): number | null {
  const m = segments[segments.length - 1].to;
  if (energies.length !== m)
    throw new PennyweightError('invalid-input', `There are ${energies.length} energies for ${m} snapshots.`, {
      expected: m,
      actual: energies.length,
    });
  let fine = 0;
  let coarse = 0;
  for (const { from, stamps } of segments) {
    const odd = stamps.length - 1 + (stamps.length % 2);
    if (odd < 5) continue;
    const part = stamps.subarray(0, odd);
    const all = rule.weights(part);
    const halved = rule.weights(part.filter((_, j) => j % 2 === 0));
    for (let j = 0; j < odd; j++) {
      fine += all[j] * energies[from + j];
      if (j % 2 === 0) coarse += halved[j / 2] * energies[from + j];
    }
  }
  const change = Math.abs(fine - coarse) / fine;
  return fine > 0 && Number.isFinite(change) ? change : null;
}
