/**
 * Where every snapshot stands on the beam, from 0 (left) to 1 (right). Records stand side by side, each as wide as it lasts; inside a
 * record a snapshot stands at its stamp, also when the record steps back (positions then fall). The logarithmic scale counts elapsed
 * time in the record's smallest step h, log(1 + (t - t_first) / h), so that it needs no positive stamps.
 */
import type { BeamRecord } from './beam-record.ts';

export type AxisScale = 'linear' | 'log';

export interface BeamPart {
  label: string;
  from: number;
  count: number;
  start: number;
  end: number;
  /** smallest and largest stamp (or index) */
  low: number;
  high: number;
  /** smallest positive step */
  step: number;
}

export interface BeamLayout {
  position: Float64Array;
  parts: BeamPart[];
  scale: AxisScale;
}

function bounds(stamps: number[] | null, from: number, count: number): { low: number; high: number; step: number } {
  let low = Infinity;
  let high = -Infinity;
  let step = Infinity;
  for (let j = from; j < from + count; j += 1) {
    const t = stamps ? stamps[j] : j;
    if (t < low) low = t;
    if (t > high) high = t;
    const h = j > from ? t - (stamps ? stamps[j - 1] : j - 1) : 0;
    if (h > 0 && h < step) step = h;
  }
  return { low, high, step: Number.isFinite(step) ? step : 1 };
}

/** Length along a part of the axis value t. */
function along(part: Pick<BeamPart, 'low' | 'step'>, scale: AxisScale, t: number): number {
  return scale === 'log' ? Math.log1p((t - part.low) / part.step) : t - part.low;
}

export function layBeam({ stamps, count, records }: Pick<BeamRecord, 'stamps' | 'count' | 'records'>, scale: AxisScale): BeamLayout {
  const given = records.length > 1 ? records : [{ label: records[0]?.label ?? '', from: 0, count }];
  const raw = given.filter((record) => record.count > 0).map((record) => ({ ...record, ...bounds(stamps, record.from, record.count) }));
  const lengths = raw.map((part) => along(part, scale, part.high));
  const total = lengths.reduce((sum, length) => sum + length, 0);
  const gap = raw.length > 1 ? Math.min(0.012, 0.2 / raw.length) : 0;
  const room = 1 - gap * Math.max(0, raw.length - 1);
  const position = new Float64Array(count);
  let start = 0;
  const parts = raw.map((part, i) => {
    const share = total > 0 ? (lengths[i] / total) * room : room / raw.length;
    const laid: BeamPart = { ...part, start, end: start + share };
    for (let j = part.from; j < part.from + part.count; j += 1) {
      const t = stamps ? stamps[j] : j;
      position[j] = lengths[i] > 0 ? start + (along(part, scale, t) / lengths[i]) * share : start + share / 2;
    }
    start += share + gap;
    return laid;
  });
  return { position, parts, scale };
}

/** Position of an axis value within a part. */
export function positionOf(part: BeamPart, scale: AxisScale, value: number): number {
  const length = along(part, scale, part.high);
  return length > 0 ? part.start + (along(part, scale, value) / length) * (part.end - part.start) : (part.start + part.end) / 2;
}

/** Axis value at a position within a part: the inverse of positionOf. */
export function axisValueAt(part: BeamPart, scale: AxisScale, position: number): number {
  const length = along(part, scale, part.high);
  const u = part.end > part.start ? ((position - part.start) / (part.end - part.start)) * length : 0;
  return scale === 'log' ? part.low + part.step * Math.expm1(u) : part.low + u;
}
