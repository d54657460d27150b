/** A record cut where weights must not reach across: at gaps and at the borders of runs. */
import { PennyweightError } from '#contract/error.ts';
import type { ElementType } from '#contract/reading.ts';
import { describeSpacing, effectiveStamps, type Spacing } from './spacing.ts';
import { accurateSum, assertStamps } from './stamps.ts';
import type { TimeRule } from './time-rule.ts';

export interface Segment {
  /** indices [from, to) of the record */
  from: number;
  to: number;
  spacing: Spacing;
  /** the stamps that rules work with: rounding that the stored type explains is taken out */
  stamps: Float64Array;
}

/**
 * `starts`: first index of each segment, ascending, beginning with 0. Stamps must increase within a segment only.
 * Errors: 'stamps-invalid' as assertStamps, and for starts that are not such.
 */
export function segmentsOf(
  stamps: Float64Array,
  dtype: ElementType | null,
  starts: readonly number[] = [0],
): Segment[] {
  const wrong = starts.findIndex(
    (start, s) => !Number.isInteger(start) || (s === 0 ? start !== 0 : start <= starts[s - 1]) || start > stamps.length,
  );
  if (starts.length === 0 || wrong >= 0)
    throw new PennyweightError(
      'stamps-invalid',
      `Segments must begin at index 0 and at ascending indices below ${stamps.length}; start ${Math.max(wrong, 0)} does not.`,
      { index: Math.max(wrong, 0), value: starts[wrong] ?? null },
    );
  return starts.map((from, s) => {
    const to = starts[s + 1] ?? stamps.length;
    const part = stamps.subarray(from, to);
    assertStamps(part);
    const spacing = describeSpacing(part, dtype);
    return { from, to, spacing, stamps: effectiveStamps(part, spacing) };
  });
}

/**
 * What a snapshot alone between two borders stands for: the mean interval of the other segments, since the 1 of a lone
 * record would be arbitrary beside them (our own convention). 1 where every segment is a single snapshot.
 */
export function usualInterval(segments: readonly Segment[]): number {
  const intervals = segments.reduce((count, { stamps }) => count + stamps.length - 1, 0);
  return intervals === 0 ? 1 : accurateSum(segments.map(({ spacing }) => spacing.duration)) / intervals;
}

/** Weights of a rule on each segment by itself, in the order of the record. */
export function weightsOf(rule: Pick<TimeRule, 'weights'>, segments: readonly Segment[]): Float64Array {
  const weights = new Float64Array(segments[segments.length - 1].to);
  const alone = usualInterval(segments);
  for (const { from, stamps } of segments) {
    if (stamps.length === 1) weights[from] = alone;
    else weights.set(rule.weights(stamps), from);
  }
  return weights;
}
