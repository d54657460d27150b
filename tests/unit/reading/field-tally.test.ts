/** The fast loops against the plainest ones, and the content hash by what it must and must not tell apart. */
import { describe, expect, it } from 'vitest';
import { FieldTally, type Values } from '../../../server/reading/survey/field-tally.ts';

function seeded(seed: number): () => number {
  let state = seed;
  return () => (state = (Math.imul(state, 1664525) + 1013904223) >>> 0) / 2 ** 32;
}

function single(values: ArrayLike<number>): Values {
  const array = Float32Array.from(values);
  return { single: true, values: array, words: new Int32Array(array.buffer) };
}
function double(values: ArrayLike<number>): Values {
  const array = Float64Array.from(values);
  return { single: false, values: array, words: new Int32Array(array.buffer) };
}

function tallyOf(rows: number[][], make: (values: ArrayLike<number>) => Values, parts: number[] = [rows[0].length]): FieldTally {
  const tally = new FieldTally(rows.length, [{ value: -999, declared: false }]);
  const changed = new Uint8Array(rows[0].length);
  const values = rows.map(make);
  rows.forEach((_, j) => {
    let node = 0;
    for (const length of parts) {
      tally.add(j, values[j], node, values[Math.max(0, j - 1)], node, length, node, changed, node);
      node += length;
    }
  });
  return tally;
}

describe.each([
  ['single precision', single],
  ['double precision', double],
])('a tally in %s', (_, make) => {
  const random = seeded(3);
  const rows = Array.from({ length: 3 }, () => Array.from({ length: 5000 }, () => Math.fround(random() - 0.3)));

  it('is that of the plainest loops', () => {
    const tally = tallyOf(rows, make);
    rows.forEach((row, j) => {
      const sum = row.reduce((total, value) => total + value, 0);
      const norm = Math.hypot(...row);
      const change = j === 0 ? 0 : Math.hypot(...row.map((value, i) => value - rows[j - 1][i]));
      expect([tally.min[j], tally.max[j]]).toEqual([Math.min(...row), Math.max(...row)]);
      // Sums of 5,000 terms in another order: 5,000 eps relative to the sum of magnitudes at most.
      expect(Math.abs(tally.sum[j] - sum)).toBeLessThan(5000 * 2 ** -52 * 5000);
      expect(Math.abs(tally.norm(j) / norm - 1)).toBeLessThan(5000 * 2 ** -52);
      expect(Math.abs(tally.stepChange(j) - change)).toBeLessThanOrEqual(5000 * 2 ** -52 * Math.max(1, change));
    });
  });

  it('is the same however a snapshot is cut', () => {
    const [whole, cut] = [tallyOf(rows, make), tallyOf(rows, make, [1, 2047, 7, 2945])];
    expect([0, 1, 2].map((j) => cut.hash(j))).toEqual([0, 1, 2].map((j) => whole.hash(j)));
    expect(Math.abs(cut.norm(2) / whole.norm(2) - 1)).toBeLessThan(5000 * 2 ** -52);
  });

  it('leaves non-finite values out of all sums and says where the first one is', () => {
    const spoilt = rows.map((row) => row.slice());
    spoilt[1][4321] = NaN;
    spoilt[1][17] = Infinity;
    spoilt[1][18] = -Infinity;
    const tally = tallyOf(spoilt, make);
    const left = spoilt[1].filter(Number.isFinite);
    expect([tally.nonFinite[1], tally.firstNonFinite[1], tally.nonFinite[2], tally.firstNonFinite[2]]).toEqual([3, 17, 0, -1]);
    expect([tally.min[1], tally.max[1]]).toEqual([Math.min(...left), Math.max(...left)]);
    expect(Math.abs(tally.norm(1) / Math.hypot(...left) - 1)).toBeLessThan(5000 * 2 ** -52);
    const both = spoilt[2].map((value, i) => (Number.isFinite(spoilt[1][i]) ? value - spoilt[1][i] : 0));
    expect(Math.abs(tally.stepChange(2) / Math.hypot(...both) - 1)).toBeLessThan(5000 * 2 ** -52);
  });

  it('counts fill values exactly, also beside non-finite ones', () => {
    const filled = rows.map((row) => row.slice());
    filled[1][5] = filled[1][3000] = filled[2][1] = -999;
    filled[1][6] = NaN;
    filled[2][9] = -998.9999;
    const entry = tallyOf(filled, make).fill.get(-999)!;
    expect([[...entry.counts], entry.firstSnapshot, entry.firstNode]).toEqual([[0, 2, 1], 1, 5]);
  });
});

describe('the content hash', () => {
  const hashOf = (values: number[], make = double) => tallyOf([values], make).hash(0);
  const row = Array.from({ length: 300 }, (_, i) => Math.sin(i));

  it('tells values, positions and signs apart, and equal snapshots not', () => {
    const changed = row.with(7, row[7] + 2 ** -50);
    const swapped = row.with(7, row[8]).with(8, row[7]);
    const negative = row.with(0, -0);
    const shifted = [...row.slice(1), row[0]];
    const hashes = [row, changed, swapped, negative, shifted].map((one) => hashOf(one));
    expect(new Set(hashes).size).toBe(5);
    expect(hashOf(row.slice())).toBe(hashes[0]);
    expect(hashes[0]).toMatch(/^[0-9a-f]{16}$/);
  });

  it('does not collide in 200,000 snapshots that differ little', () => {
    for (const make of [single, double]) {
      const seen = new Set<string>();
      const values = [0, 0, 0, 0];
      for (let k = 0; k < 200_000; k++) {
        values[k % 4] = k;
        values[(k + 1) % 4] = -k;
        seen.add(tallyOf([values], make).hash(0));
      }
      expect(seen.size).toBe(200_000);
    }
  });
});
