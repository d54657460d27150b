/** How evenly stamps are spaced, and whether what unevenness there is comes from their own precision. */
import type { ElementType } from '#contract/reading.ts';

export interface Spacing {
  count: number;
  duration: number;
  hMin: number;
  hMax: number;
  hMedian: number;
  /** hMax / hMin; 1 with fewer than three stamps */
  ratio: number;
  /** share of the neighbouring intervals that are within 2:1 of each other; 1 with fewer than three stamps */
  gentleShare: number;
  /** evenly spaced to double precision */
  uniform: boolean;
  /** not evenly spaced as stored, but within what the stamps' precision explains: treat as uniform */
  roundedOnly: boolean;
  /** what explains it: 'float32', 'float16', 'additions in float32', '3 decimals', '6 digits'; null unless roundedOnly */
  explainedBy: string | null;
  /** largest distance of a stamp from the even grid through the end points */
  deviation: number;
}

const eps64 = 2 ** -52,
  eps32 = 2 ** -23,
  eps16 = 2 ** -10;

/** Distance between neighbouring numbers of a type at `value`. */
const ulp = (value: number, eps: number) => (value === 0 ? 0 : eps * 2 ** Math.floor(Math.log2(Math.abs(value))));

function median(values: Float64Array): number {
  const sorted = Float64Array.from(values).sort();
  const half = sorted.length >> 1;
  return sorted.length === 0 ? 0 : sorted.length % 2 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
}

/** Fewest decimals d <= 12 that write every stamp; null when none do. */
function decimalsOf(stamps: Float64Array): number | null {
  let d = 0;
  for (const t of stamps)
    while (Math.abs(Math.round(t * 10 ** d) / 10 ** d - t) > 2 * ulp(t, eps64)) if (++d > 12) return null;
  return d;
}

/** Fewest significant digits k <= 15 that write every stamp; null when none do. 15 always survive a double (DBL_DIG). */
function digitsOf(stamps: Float64Array): number | null {
  let k = 2;
  for (const t of stamps) while (Number(t.toPrecision(k)) !== t) if (++k > 15) return null;
  return k;
}

function gentleShareOf(intervals: Float64Array): number {
  if (intervals.length < 2) return 1;
  let gentle = 0;
  for (let j = 1; j < intervals.length; j++)
    if (intervals[j] <= 2 * intervals[j - 1] && intervals[j - 1] <= 2 * intervals[j]) gentle++;
  return gentle / (intervals.length - 1);
}

/**
 * What explains that the stamps deviate from the even grid; null when nothing does. One ulp of a stored type is half for the
 * stamp and half for the grid's own end points. Stamps that a solver added up in single precision, t += dt, drift away by many
 * ulps while each interval is within one of the usual: one rounding to nearest of t + dt is half an ulp of the larger t,
 * so that two intervals differ by at most one. An ulp or a printed digit explains nothing when it is coarser than h/4: then
 * the stamps do not show what lies between them.
 */
function explanation(
  stamps: Float64Array,
  dtype: ElementType | null,
  spacing: Spacing,
  largest: number,
): string | null {
  const { deviation, duration, count, hMin, hMax, hMedian } = spacing;
  const quarter = duration / (count - 1) / 4;
  if (dtype === 'float16' && deviation <= ulp(largest, eps16)) return 'float16';
  const single = dtype === 'float32' || (dtype !== 'float16' && stamps.every((t) => Math.fround(t) === t));
  const unit32 = ulp(largest, eps32);
  if (single && deviation <= unit32) return 'float32';
  if (single && unit32 <= hMedian / 4 && Math.max(hMax - hMedian, hMedian - hMin) <= unit32)
    return 'additions in float32';
  if (deviation > 1.5 * quarter || largest === 0) return null;
  const printed = dtype === 'float32' ? Float64Array.from(stamps, (t) => Number(t.toPrecision(7))) : stamps;
  const decimals = decimalsOf(printed);
  const stored = single ? unit32 : ulp(largest, eps64);
  if (decimals !== null && 10 ** -decimals <= quarter && deviation <= 1.01 * 10 ** -decimals + stored)
    return `${decimals} decimals`;
  const digits = digitsOf(printed);
  const unit = digits === null ? 0 : 10 ** (Math.floor(Math.log10(largest)) - digits + 1);
  return unit <= quarter && deviation <= 1.01 * unit ? `${digits} digits` : null;
}

/**
 * Purpose: classify the spacing of strictly increasing `stamps` (length m; any unit), stored as `dtype` (null when unknown).
 * Even means |t_j - (t_1 + j h)| <= max(8, m) ulp of the largest stamp, h = T/(m-1): stamps made by adding h m times.
 * Otherwise `roundedOnly` tells whether the precision of the stored type, or the printed decimals or digits, explain the
 * difference: such stamps are to be treated as even. Method: common practice, no source; tolerances follow from rounding to
 * nearest (IEEE 754-2019). O(m) but for the median's sort. Works on 0, 1 and 2 stamps (even by definition).
 */
export function describeSpacing(stamps: Float64Array, dtype: ElementType | null): Spacing {
  const m = stamps.length;
  const intervals = new Float64Array(Math.max(0, m - 1));
  const duration = m < 2 ? 0 : stamps[m - 1] - stamps[0];
  const h = m < 2 ? 0 : duration / (m - 1);
  let hMin = m < 2 ? 0 : Infinity;
  let hMax = 0;
  let largest = 0;
  let deviation = 0;
  for (let j = 0; j < m; j++) {
    largest = Math.max(largest, Math.abs(stamps[j]));
    deviation = Math.max(deviation, Math.abs(stamps[j] - (stamps[0] + j * h)));
    if (j === 0) continue;
    const interval = (intervals[j - 1] = stamps[j] - stamps[j - 1]);
    hMin = Math.min(hMin, interval);
    hMax = Math.max(hMax, interval);
  }
  const spacing: Spacing = {
    count: m,
    duration,
    hMin,
    hMax,
    hMedian: median(intervals),
    ratio: m < 3 ? 1 : hMax / hMin,
    gentleShare: gentleShareOf(intervals),
    uniform: m < 3 || deviation <= Math.max(8, m) * ulp(largest, eps64),
    roundedOnly: false,
    explainedBy: null,
    deviation,
  };
  if (spacing.uniform) return spacing;
  const explainedBy = explanation(stamps, dtype, spacing, largest);
  return { ...spacing, roundedOnly: explainedBy !== null, explainedBy };
}

/** The stamps a rule works with: the even grid through the end points when only rounding hides it, else as given. */
export function effectiveStamps(stamps: Float64Array, spacing: Spacing): Float64Array {
  if (!spacing.roundedOnly) return stamps;
  const h = spacing.duration / (spacing.count - 1);
  return Float64Array.from(stamps, (t, j) => (j === spacing.count - 1 ? t : stamps[0] + j * h));
}
