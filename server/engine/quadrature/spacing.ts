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
  /** evenly spaced to double precision */
  uniform: boolean;
  /** not evenly spaced as stored, but within what the stamps' precision explains: treat as uniform */
  roundedOnly: boolean;
  /** what explains it: 'float32', 'float16', '3 decimals', '6 digits'; null unless roundedOnly */
  explainedBy: string | null;
  /** largest distance of a stamp from the even grid through the end points */
  deviation: number;
}

const eps64 = 2 ** -52, eps32 = 2 ** -23, eps16 = 2 ** -10;

/** Distance between neighbouring numbers of a type at `value`. */
const ulp = (value: number, eps: number) => (value === 0 ? 0 : eps * 2 ** Math.floor(Math.log2(Math.abs(value))));

function median(values: Float64Array): number {
  const sorted = Float64Array.from(values).sort();
  const half = sorted.length >> 1;
  return sorted.length === 0 ? 0 : sorted.length % 2 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
}

/** Smallest number of decimals d <= 12 that writes every stamp; null when none does. */
function decimalsOf(stamps: Float64Array): number | null {
  for (let d = 0; d <= 12; d++) {
    const scale = 10 ** d;
    if (stamps.every((t) => Math.abs(Math.round(t * scale) / scale - t) <= 2 * ulp(t, eps64))) return d;
  }
  return null;
}

/** Smallest number of significant digits k <= 9 that writes every stamp; null when none does. */
function digitsOf(stamps: Float64Array): number | null {
  for (let k = 2; k <= 9; k++) if (stamps.every((t) => Number(t.toPrecision(k)) === t)) return k;
  return null;
}

/**
 * Purpose: classify the spacing of strictly increasing `stamps` (length m; any unit).
 * Even means |t_j - (t_1 + j h)| <= tolerance with h = T/(m-1). The tolerance is, in turn: max(8, m) ulp of the largest stamp
 * (stamps made by adding h m times); one ulp of the stored type (float32, float16, or doubles that are all float32 values);
 * one unit of the last printed decimal or significant digit, half for the stamp and half for the grid's own end points. A
 * printed digit explains nothing when it is coarser than h/4: then the stamps do not show what lies between them.
 * Method: common practice, no source; the tolerances follow from rounding to nearest.
 * O(m) but for the median's sort. Works on 0, 1 and 2 stamps (even by definition).
 */
export function describeSpacing(stamps: Float64Array, dtype: ElementType | null): Spacing {
  const m = stamps.length;
  const intervals = Float64Array.from({ length: Math.max(0, m - 1) }, (_, j) => stamps[j + 1] - stamps[j]);
  const duration = m < 2 ? 0 : stamps[m - 1] - stamps[0];
  const h = m < 2 ? 0 : duration / (m - 1);
  let hMin = Infinity, hMax = 0, largest = 0, deviation = 0;
  for (const each of intervals) {
    if (each < hMin) hMin = each;
    if (each > hMax) hMax = each;
  }
  for (let j = 0; j < m; j++) {
    largest = Math.max(largest, Math.abs(stamps[j]));
    deviation = Math.max(deviation, Math.abs(stamps[j] - (stamps[0] + j * h)));
  }
  const spacing: Spacing = {
    count: m, duration, hMin: m < 2 ? 0 : hMin, hMax, hMedian: median(intervals), ratio: m < 3 ? 1 : hMax / hMin,
    uniform: m < 3 || deviation <= Math.max(8, m) * ulp(largest, eps64), roundedOnly: false, explainedBy: null, deviation,
  };
  if (spacing.uniform) return spacing;
  const explain = (by: string) => ({ ...spacing, roundedOnly: true, explainedBy: by });
  if (dtype === 'float16' && deviation <= ulp(largest, eps16)) return explain('float16');
  const single = dtype === 'float32' || (dtype !== 'float16' && stamps.every((t) => Math.fround(t) === t));
  if (single && deviation <= ulp(largest, eps32)) return explain('float32');
  const printed = single && dtype === 'float32' ? Float64Array.from(stamps, (t) => Number(t.toPrecision(7))) : stamps;
  const decimals = decimalsOf(printed);
  if (decimals !== null && 10 ** -decimals <= h / 4 && deviation <= 1.01 * 10 ** -decimals + ulp(largest, single ? eps32 : eps64)) return explain(`${decimals} decimals`);
  const digits = digitsOf(printed);
  if (digits !== null && largest > 0) {
    const unit = 10 ** (Math.floor(Math.log10(largest)) - digits + 1);
    if (unit <= h / 4 && deviation <= 1.01 * unit) return explain(`${digits} digits`);
  }
  return spacing;
}

/** The stamps a rule works with: the even grid through the end points when only rounding hides it, else as given. */
export function effectiveStamps(stamps: Float64Array, spacing: Spacing): Float64Array {
  if (!spacing.roundedOnly) return stamps;
  const h = spacing.duration / (spacing.count - 1);
  return Float64Array.from(stamps, (_, j) => (j === spacing.count - 1 ? stamps[j] : stamps[0] + j * h));
}
