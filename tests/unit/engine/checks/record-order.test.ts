import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { describeOrder } from '../../../../server/engine/checks/record-order.ts';
import { uniform } from './survey-factory.ts';

const order = (stamps: number[]) => describeOrder(Float64Array.from(stamps));
const keptStamps = (stamps: number[]) => order(stamps).kept.map((j) => stamps[j]);
const growing = Array.from({ length: 20 }, (_, j) => 1.5 ** j);
const asText = Array.from({ length: 120 }, (_, j) => j).sort((a, b) => (String(a) < String(b) ? -1 : 1));

/** name, stamps, backward, restarts, duplicates, stamps that remain */
const table: [string, number[], number[], number[], number[], number[]][] = [
  ['nothing', [], [], [], [], []],
  ['one stamp', [3], [], [], [], [3]],
  ['two stamps', [3, 4], [], [], [], [3, 4]],
  ['in order', [0, 1, 2, 5], [], [], [], [0, 1, 2, 5]],
  ['a repeated stamp', [0, 1, 1, 2], [], [], [2], [0, 1, 2]],
  ['three equal stamps', [0, 1, 1, 1, 2], [], [], [2, 3], [0, 1, 2]],
  ['a restart at a stored time', [0, 1, 2, 3, 2, 3, 4], [], [4], [], [0, 1, 2, 3, 4]],
  ['a restart between stored times', [0, 1, 2, 3, 1.5, 2.5, 3.5], [], [4], [], [0, 1, 1.5, 2.5, 3.5]],
  [
    'a restart after a variable step',
    [0.48, 0.49, 0.5, 0.513, 0.507, 0.52, 0.53],
    [],
    [4],
    [],
    [0.48, 0.49, 0.5, 0.507, 0.52, 0.53],
  ],
  ['a restart that ends early', [0, 1, 2, 3, 4, 1, 2], [], [5], [], [0, 1, 2]],
  ['a restart with coarser output', [0, 1, 2, 3, 4, 5, 2, 7, 12, 17], [], [6], [], [0, 1, 2, 7, 12, 17]],
  [
    'a restart in a growing step',
    [...growing, growing[17], growing[18], growing[19], growing[19] * 1.5],
    [],
    [20],
    [],
    [...growing, growing[19] * 1.5],
  ],
  ['two restarts', [0, 1, 2, 3, 2, 3, 4, 5, 4, 5, 6], [], [4, 8], [], [0, 1, 2, 3, 4, 5, 6]],
  ['two files with the same times', [0, 1, 2, 0, 1, 2], [], [3], [], [0, 1, 2]],
  ['two swapped stamps', [0, 1, 3, 2, 4, 5], [3], [], [], [0, 1, 2, 3, 4, 5]],
  ['the last two swapped', [0, 1, 2, 4, 3], [4], [], [], [0, 1, 2, 3, 4]],
  ['a stray copy of an early stamp', [0, 1, 2, 3, 1, 4, 5], [4], [], [4], [0, 1, 2, 3, 4, 5]],
  ['running backwards', [4, 3, 2, 1, 0], [1, 2, 3, 4], [], [], [0, 1, 2, 3, 4]],
  ['two writers, one after the other', [0, 2, 4, 6, 8, 1, 3, 5, 7, 9], [5], [], [], [0, 1, 2, 3, 4, 5, 6, 7, 8, 9]],
  ['the earlier file last', [5, 6, 7, 0, 1, 2], [3], [], [], [0, 1, 2, 5, 6, 7]],
  ['a stamp that is no number', [0, 1, NaN, 3], [], [], [], [0, 1, 3]],
];

describe('describeOrder', () => {
  it.each(table)('judges %s', (_name, stamps, backward, restarts, duplicates, remaining) => {
    const found = order(stamps);
    expect(found.backward).toEqual(backward);
    expect(found.restarts.map((restart) => restart.index)).toEqual(restarts);
    expect(found.duplicates).toEqual(duplicates);
    expect(keptStamps(stamps)).toEqual(remaining);
  });

  it('finds stamps sorted as text out of order, not restarted: sorting keeps every snapshot', () => {
    const found = order(asText);
    expect(found.restarts).toEqual([]);
    expect(found.backward.length).toBeGreaterThan(0);
    expect(found.kept).toHaveLength(120);
  });

  it('says where a restart came from and how much it covers again', () => {
    const [restart] = order([0, 1, 2, 3, 1, 2, 3, 4]).restarts;
    expect(restart).toEqual({ index: 4, from: 3, to: 1, overlapped: 3, overtakes: true });
    expect(order([0, 1, 2, 3, 1, 2]).restarts[0].overtakes).toBe(false);
  });

  it('finds the stamps that are no numbers', () => {
    expect(order([NaN, 0, Infinity, 1]).undefinedStamps).toEqual([0, 2]);
  });

  it.each<[string, number[], number[], number[]]>([
    ['a checkpoint time computed anew, one unit later', [0, 0.25, 0.5, 0.5 + 2 ** -53, 0.75], [3], []],
    ['a checkpoint time computed anew, one unit earlier', [0, 0.25, 0.5, 0.5 - 2 ** -54, 0.75], [3], []],
    ['stamps that the type can hardly tell apart', [1, 1 + 2 ** -52, 1 + 2 ** -51, 1 + 3 * 2 ** -52], [], []],
    ['a first step far smaller than the others', [0, 1e-12, 0.1, 0.2], [], []],
    ['a jump back by more than rounding', [0, 0.25, 0.5, 0.5 - 1e-6, 0.75], [], [3]],
  ])('judges %s', (_name, stamps, nearlyEqual, restarts) => {
    const found = describeOrder(Float64Array.from(stamps), 2 ** -53);
    expect([found.nearlyEqual, found.duplicates]).toEqual([nearlyEqual, nearlyEqual]);
    expect(found.restarts.map((restart) => restart.index)).toEqual(restarts);
    expect(found.backward).toEqual([]);
  });

  it('keeps every snapshot of a shuffled record with distinct stamps', () => {
    fc.assert(
      fc.property(fc.shuffledSubarray(uniform(60, 1), { minLength: 60, maxLength: 60 }), (stamps) => {
        const found = order(stamps);
        expect(found.restarts).toEqual([]);
        expect(found.kept).toHaveLength(60);
      }),
      { numRuns: 200 },
    );
  });

  it('always leaves strictly increasing stamps, and nothing to report of what it leaves', () => {
    fc.assert(
      fc.property(
        fc.array(fc.oneof(fc.integer({ min: 0, max: 30 }), fc.double({ noNaN: false })), { maxLength: 80 }),
        (stamps) => {
          const left = Float64Array.from(keptStamps(stamps));
          expect(left.every((stamp, j) => j === 0 || stamp > left[j - 1])).toBe(true);
          const again = describeOrder(left);
          expect([again.backward, again.restarts, again.duplicates, again.undefinedStamps]).toEqual([[], [], [], []]);
        },
      ),
      { numRuns: 300 },
    );
  });

  it('finds every restart of a record with a steady step, wherever it falls', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 3, max: 50 }),
        fc.double({ min: 0.05, max: 0.95, noNaN: true }),
        fc.integer({ min: 3, max: 40 }),
        (m, place, later) => {
          const top = m - 1;
          const back = place * top;
          const stamps = [...uniform(m, 1), ...Array.from({ length: later + m }, (_, j) => back + j)];
          const found = order(stamps);
          expect(found.restarts.map((restart) => restart.index)).toEqual([m]);
          expect([found.backward, found.duplicates]).toEqual([[], []]);
        },
      ),
      { numRuns: 300 },
    );
  });

  it('finds all of many restarts in a long record', () => {
    const stamps = Float64Array.from({ length: 100_000 }, (_, j) => Math.floor(j / 100) * 90 + (j % 100));
    expect(describeOrder(stamps).restarts).toHaveLength(999);
  });
});
