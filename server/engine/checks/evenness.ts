/**
 * Even, even to rounding, or uneven: quadrature/spacing.ts, and two cases more.
 *  - Stamps that a solver added up in single precision, t += dt, drift away from the even grid by many units in the last
 *    place while each interval is within one of the usual. (Bound: one rounding to nearest of t + dt is half a unit of the
 *    larger t, so two intervals differ by at most one unit.) The unit must stay below a quarter of the interval.
 *  - Stamps printed with 10 to 15 significant digits, which leave more decimals to small stamps than to large ones.
 */
import type { ElementType } from '#contract/reading.ts';
import { describeSpacing, type Spacing } from '../quadrature/spacing.ts';
import type { SurveyAxis } from '../survey.ts';

export interface Evenness {
  spacing: Spacing;
  verdict: 'even' | 'rounded' | 'uneven';
  /** what explains it when `rounded`: 'float32', '6 digits' */
  explainedBy: string | null;
}

/** `stamps` strictly increasing. O(m log m). */
export function evennessOf(stamps: Float64Array, dtype: ElementType | null): Evenness {
  const spacing = describeSpacing(stamps, dtype);
  if (spacing.uniform) return { spacing, verdict: 'even', explainedBy: null };
  if (spacing.roundedOnly) return { spacing, verdict: 'rounded', explainedBy: spacing.explainedBy };
  const largest = Math.max(Math.abs(stamps[0]), Math.abs(stamps[stamps.length - 1]));
  const unit = 2 ** (Math.floor(Math.log2(largest)) - 23);
  const single = dtype === 'float32' || stamps.every((stamp) => Math.fround(stamp) === stamp);
  const drift = Math.max(spacing.hMax - spacing.hMedian, spacing.hMedian - spacing.hMin);
  if (single && unit <= spacing.hMedian / 4 && drift <= unit)
    return { spacing, verdict: 'rounded', explainedBy: 'additions in float32' };
  const digits = manyDigits(stamps);
  if (digits !== null && spacing.deviation <= 1.01 * 10 ** (Math.floor(Math.log10(largest)) - digits + 1))
    return { spacing, verdict: 'rounded', explainedBy: `${digits} digits` };
  return { spacing, verdict: 'uneven', explainedBy: null };
}

/** Fewest significant digits, 10 to 15, that write every stamp; null when none do. 15 always survive a double (DBL_DIG). */
function manyDigits(stamps: Float64Array): number | null {
  for (let digits = 10; digits <= 15; digits++)
    if (stamps.every((stamp) => Number(stamp.toPrecision(digits)) === stamp)) return digits;
  return null;
}

/** Evenness of an axis of either direction by its coordinates, else its cell edges; null when unknown or not strictly monotone. */
export function axisEvenness(axis: SurveyAxis): Evenness | null {
  const values = axis.nodes ?? axis.edges;
  if (!values || values.length === 0) return null;
  const ascending = values[0] > values[values.length - 1] ? values.map((value) => -value) : values;
  if (!ascending.every((value, i) => Number.isFinite(value) && (i === 0 || value > ascending[i - 1]))) return null;
  return evennessOf(ascending, axis.dtype);
}
