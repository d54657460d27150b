import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { windowStep } from '#contract/recipe.ts';
import { timeGap } from '../../../../server/engine/checks/time-gap.ts';
import { judge, makeSubject, uniform } from './survey-factory.ts';

const fromIntervals = (intervals: number[], start = 0) =>
  intervals.reduce((stamps, interval) => [...stamps, stamps.at(-1)! + interval], [start]);
const times = (count: number, value: number) => Array.from({ length: count }, () => value);
const geometric = (count: number, ratio: number) => Array.from({ length: count }, (_, i) => ratio ** i);
const found = (intervals: number[]) => judge(timeGap, makeSubject({ stamps: fromIntervals(intervals) }));

describe('time/gap', () => {
  it.each<[string, number[], number[]]>([
    ['a missing stretch of a uniform record', [...times(20, 1), 8, ...times(20, 1)], [20]],
    ['a gap of just over three steps', [...times(20, 1), 3.01, ...times(20, 1)], [20]],
    ['a gap at the end', [...times(20, 1), 8], [20]],
    ['a gap at the start', [8, ...times(20, 1)], [0]],
    ['two gaps side by side', [...times(20, 1), 8, 8, ...times(20, 1)], [20, 21]],
    ['a gap in the slow part of two rates', [...times(20, 1), ...times(10, 10), 80, ...times(10, 10)], [30]],
    ['a gap within a growing step', [...geometric(10, 1.2), 60, ...geometric(10, 1.2).map((h) => 6.2 * h)], [10]],
    ['a gap among four intervals', [1, 1, 9, 1], [2]],
    ['pauses between bursts of seven', [...times(6, 1), 20, ...times(6, 1), 20, ...times(6, 1)], [6, 13]],
  ])('fires for %s', (_name, intervals, indices) => {
    const judgements = found(intervals);
    expect(judgements).toHaveLength(1);
    expect(judgements[0].evidence.indices).toEqual(indices);
    expect(judgements[0].evidence.count).toBe(indices.length);
  });

  it.each<[string, number[]]>([
    ['uniform stamps', times(30, 0.01)],
    ['an interval of three steps', [...times(20, 1), 3, ...times(20, 1)]],
    ['logarithmic spacing with ratio 1.5', geometric(30, 1.5)],
    ['logarithmic spacing with ratio 1.5, falling', geometric(30, 1.5).reverse()],
    ['doubling steps', geometric(20, 2)],
    ['decades of decades', [1, 9, 90, 900, 9000]],
    ['a step that grows, then shrinks', [...geometric(12, 1.5), ...geometric(12, 1.5).reverse()]],
    ['a step that shrinks, then grows', [...geometric(12, 1.5).reverse(), ...geometric(12, 1.5)]],
    ['an adaptive step that still grows at the end', [...times(20, 1), ...geometric(8, 1.3)]],
    ['two rates, fast then slow by 10', [...times(40, 1), ...times(20, 10)]],
    ['two rates, fast then slow by 100', [...times(40, 1), ...times(20, 100)]],
    ['two rates, slow then fast', [...times(20, 100), ...times(40, 1)]],
    ['two rates in turn', [...times(20, 1), ...times(20, 10), ...times(20, 1), ...times(20, 10)]],
    ['pairs of close snapshots', Array.from({ length: 40 }, (_, i) => (i % 2 === 0 ? 0.1 : 10))],
    ['a shortened last step', [...times(20, 1), 0.01]],
    ['months of 28 to 31 days', [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31]],
    ['three stamps, with which nothing is usual', [1, 100]],
    ['two stamps', [5]],
    ['one stamp', []],
  ])('is silent for %s', (_name, intervals) => {
    expect(found(intervals)).toEqual([]);
  });

  it('offers the longest stretch without a gap', () => {
    const [{ remedy }] = found([...times(20, 1), 8, ...times(30, 1), 9, ...times(10, 1)]);
    expect(windowStep.parse({ step: remedy!.step, ...remedy!.parameters })).toMatchObject({ from: 28, to: 58 });
    expect(found([...times(20, 1), 8, ...times(5, 1)])[0].remedy!.parameters).toEqual({ from: null, to: 20 });
  });

  it('points into the storage order when duplicates precede the gap', () => {
    const stamps = [0, 1, 1, 2, 3, 4, 5, 20, 21, 22, 23, 24];
    expect(judge(timeGap, makeSubject({ stamps }))[0].evidence).toMatchObject({ indices: [6], times: [5] });
  });

  it('is silent on both sides of a restart', () => {
    expect(judge(timeGap, makeSubject({ stamps: [...uniform(101, 0.01), ...uniform(60, 0.01, 0.8)] }))).toEqual([]);
  });

  it('never fires while neighbouring steps differ by less than 1.5', () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: 1 / 1.5, max: 1.5, noNaN: true }), { maxLength: 200 }), (ratios) => {
        let step = 1;
        const intervals = ratios.map((ratio) => {
          const next = step * ratio;
          // A random walk of the step; kept where the sums are exact enough.
          step = next > 1e6 || next < 1e-6 ? step : next;
          return step;
        });
        expect(found(intervals)).toEqual([]);
      }),
      { numRuns: 300 },
    );
  });
});
