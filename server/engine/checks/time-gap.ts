/**
 * time/gap: an interval over `ratio` x the running median of its neighbours, five on each side; it must be so on both sides,
 * so that a change of rate that lasts (three of the next five intervals) is none, nor any interval of the slow part.
 * Not a gap either:
 *  - a smoothly growing or shrinking step: each step to the interval within `growth`, followed over up to five steps;
 *  - at an end of the record the missing side is extrapolated with the growth of the last intervals;
 *  - wide intervals that are the pattern (pairs of close snapshots): more than `share` of all intervals are not exceptions.
 * With fewer than two other intervals nothing is usual.
 */
import type { Check } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { orderedRecord, stampPath } from './ordered-record.ts';
import { counted, plainNumber, snapshotText, stampText } from './quantity.ts';
import { windowRecord } from './remedy.ts';

const reach = 5;

function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const half = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
}

/** Nearest first: the intervals of one side. */
function side(intervals: Float64Array, i: number, direction: 1 | -1): number[] {
  const found: number[] = [];
  for (let k = i + direction; k >= 0 && k < intervals.length && found.length < reach; k += direction)
    found.push(intervals[k]);
  return found;
}

function growsSmoothly(interval: number, neighbours: number[], growth: number): boolean {
  if (neighbours.length < 3) return false;
  let wider = interval;
  for (const neighbour of neighbours) {
    if (wider > growth * neighbour) return false;
    wider = neighbour;
  }
  return true;
}

function extrapolated(neighbours: number[]): number {
  const [a, b, c] = neighbours;
  const growth = neighbours.length >= 3 ? Math.min(a / b, b / c) : a / b;
  return a * Math.max(1, growth);
}

/** Positions i of the intervals [t_i, t_{i+1}] that are gaps, with what is usual there. */
export function findGaps(
  stamps: Float64Array,
  ratio: number,
  growth: number,
  share: number,
): { position: number; usual: number }[] {
  const intervals = Float64Array.from({ length: Math.max(0, stamps.length - 1) }, (_, i) => stamps[i + 1] - stamps[i]);
  if (intervals.length < 3) return [];
  const gaps: { position: number; usual: number }[] = [];
  for (let i = 0; i < intervals.length; i++) {
    const interval = intervals[i];
    // Cheap first look: most intervals are no wider than both of their neighbours allow.
    const nearest = Math.min(intervals[Math.max(0, i - 1)], intervals[Math.min(intervals.length - 1, i + 1)]);
    const before = side(intervals, i, -1);
    const after = side(intervals, i, 1);
    if (before.length > 0 && after.length > 0 && interval <= nearest) continue;
    const usual =
      before.length === 0
        ? extrapolated(after)
        : after.length === 0
          ? extrapolated(before)
          : Math.max(median(before), median(after));
    if (interval <= ratio * usual || growsSmoothly(interval, before, growth) || growsSmoothly(interval, after, growth))
      continue;
    gaps.push({ position: i, usual });
  }
  return gaps.length > share * intervals.length && gaps.length > 1 ? [] : gaps;
}

/** The longest stretch between two gaps, null where it is open. */
function longestStretch(
  stamps: Float64Array,
  gaps: { position: number }[],
): { from: number | null; to: number | null; count: number } {
  const ends = [...gaps.map(({ position }) => position), stamps.length - 1];
  let begin = 0;
  let best = { from: 0, to: -1 };
  for (const end of ends) {
    if (end - begin > best.to - best.from) best = { from: begin, to: end };
    begin = end + 1;
  }
  return {
    from: best.from === 0 ? null : stamps[best.from],
    to: best.to === stamps.length - 1 ? null : stamps[best.to],
    count: best.to - best.from + 1,
  };
}

export const timeGap: Check = {
  id: 'time/gap',
  severity: 'caution',
  title: 'No interval is far wider than those around it',
  source: 'common practice, no source',
  thresholds: {
    ratio: {
      default: 3,
      unit: '1',
      meaning: 'an interval is a gap when it is wider than this many running medians of its neighbours',
    },
    growth: {
      default: 2.1,
      unit: '1',
      meaning: 'largest ratio of neighbouring intervals that counts as a smoothly growing step',
    },
    share: {
      default: 0.25,
      unit: '1',
      meaning: 'when more than this share of the intervals is wide, they are the sampling pattern and not gaps',
    },
  },
  judge(subject, { ratio, growth, share }) {
    const { survey } = subject;
    const record = orderedRecord(subject);
    if (!survey || !record) return [];
    const gaps = findGaps(record.stamps, ratio, growth, share);
    if (gaps.length === 0) return [];
    const widest = gaps.reduce((a, b) =>
      record.stamps[b.position + 1] - record.stamps[b.position] >
      record.stamps[a.position + 1] - record.stamps[a.position]
        ? b
        : a,
    );
    const width = record.stamps[widest.position + 1] - record.stamps[widest.position];
    const stretch = longestStretch(record.stamps, gaps);
    const kept = `Keep only the longest stretch without a gap, ${counted(stretch.count, 'snapshot')}.`;
    return [
      {
        path: stampPath(subject),
        message: `${gaps.length === 1 ? 'There is a gap' : `There are ${gaps.length} gaps, the widest`} of ${stampText(survey, width)} after ${snapshotText(survey, record.indices[widest.position])}, ${plainNumber(width / widest.usual, 3)} times the usual interval there of ${stampText(survey, widest.usual)}: trim the record to one side, or accept that the weights reach across.`,
        evidence: evidenceOf(
          gaps.map(({ position }) => record.indices[position]),
          survey.stamps,
          {
            widths: gaps.slice(0, 20).map(({ position }) => record.stamps[position + 1] - record.stamps[position]),
            usual: widest.usual,
            ratio: width / widest.usual,
          },
        ),
        remedy: windowRecord(stretch.from, stretch.to, kept),
      },
    ];
  },
};
