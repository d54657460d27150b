/** Where snapshots stand on the beam: pure, so that it can be tested without a canvas. */

export interface BeamScale {
  /** abscissa of every snapshot, in axis units: its stamp, its place in the concatenated records, or its index */
  x: Float64Array;
  min: number;
  max: number;
  /** stamps can be drawn on a logarithmic axis */
  logPossible: boolean;
}

export interface BeamRecord {
  label: string;
  from: number;
  count: number;
}

/** Records one after the other with a small space between; within one record the stamps themselves. Not-increasing stamps stay as they are. */
export function beamScale(stamps: number[] | null, count: number, records: BeamRecord[]): BeamScale {
  const x = new Float64Array(count);
  if (!stamps) {
    for (let j = 0; j < count; j++) x[j] = j;
  } else if (records.length <= 1) x.set(stamps.slice(0, count));
  else {
    let offset = 0;
    for (const { from, count: m } of records) {
      let first = Infinity, last = -Infinity;
      for (let j = from; j < from + m; j++) {
        first = Math.min(first, stamps[j]!);
        last = Math.max(last, stamps[j]!);
      }
      for (let j = from; j < from + m; j++) x[j] = offset + stamps[j]! - first;
      offset += (last - first) * 1.03 || 1;
    }
  }
  let min = Infinity, max = -Infinity;
  for (const value of x) {
    if (value < min) min = value;
    if (value > max) max = value;
  }
  if (count === 0) { min = 0; max = 1; }
  return { x, min, max, logPossible: stamps !== null && records.length <= 1 && min >= 0 && max > 0 && count > 2 };
}

/** Fraction 0..1 along the strip. On a log axis zero stands at the left edge, a tenth of the smallest positive stamp away. */
export function positionOf(value: number, scale: BeamScale, log: boolean, smallestPositive: number): number {
  if (scale.max === scale.min) return 0.5;
  if (!log) return (value - scale.min) / (scale.max - scale.min);
  const low = Math.log(smallestPositive / 10), high = Math.log(scale.max);
  return value <= 0 ? 0 : Math.max(0, (Math.log(value) - low) / (high - low));
}

export interface Bin {
  /** pixel column */
  pixel: number;
  /** largest weight of the snapshots there, and how many stand there */
  weight: number;
  count: number;
  /** index of the first of them */
  index: number;
}

/** One bin a pixel column: 100,000 snapshots become at most `width` strokes. O(m). */
export function binByPixel(positions: Float64Array, weights: ArrayLike<number> | null, width: number): Bin[] {
  const bins: (Bin | undefined)[] = new Array(width);
  for (let j = 0; j < positions.length; j++) {
    const pixel = Math.min(width - 1, Math.max(0, Math.round(positions[j]! * (width - 1))));
    const weight = weights ? weights[j]! : 1;
    const bin = bins[pixel];
    if (!bin) bins[pixel] = { pixel, weight, count: 1, index: j };
    else {
      bin.count++;
      if (weight > bin.weight) bin.weight = weight;
    }
  }
  return bins.filter((bin): bin is Bin => bin !== undefined);
}

/** Index of the snapshot nearest to a fraction of the strip. */
export function nearest(positions: Float64Array, fraction: number): number {
  let best = 0;
  for (let j = 1; j < positions.length; j++) if (Math.abs(positions[j]! - fraction) < Math.abs(positions[best]! - fraction)) best = j;
  return best;
}

/** Runs of equal parts, for the bands under the strip. */
export function splitRuns(split: string[]): { part: string; from: number; to: number }[] {
  const runs: { part: string; from: number; to: number }[] = [];
  split.forEach((part, j) => {
    const last = runs[runs.length - 1];
    if (last && last.part === part && last.to === j) last.to = j + 1;
    else runs.push({ part, from: j, to: j + 1 });
  });
  return runs;
}

/** Round numbers for an axis: at most about `most` of them. */
export function ticksOf(min: number, max: number, most: number): number[] {
  if (!(max > min)) return [min];
  const raw = (max - min) / most, power = 10 ** Math.floor(Math.log10(raw));
  const step = power * ([1, 2, 5, 10].find((each) => each * power >= raw) ?? 10);
  const ticks: number[] = [];
  for (let value = Math.ceil(min / step) * step; value <= max + step * 1e-9; value += step) ticks.push(Math.abs(value) < step * 1e-9 ? 0 : value);
  return ticks;
}
