/** Even, even but for rounding, or uneven: right both ways. */
import { describe, expect, it } from 'vitest';
import { describeSpacing, effectiveStamps } from '../../../../server/engine/quadrature/spacing.ts';
import { uneven, uniform } from './stamp-sets.ts';

const made = (m: number, make: (j: number) => number) => Float64Array.from({ length: m }, (_, j) => make(j));

/** t += dt in single precision, as a solver does. */
function added(dt: number, m: number): Float64Array {
  const stamps = new Float64Array(m);
  for (let j = 1; j < m; j++) stamps[j] = Math.fround(stamps[j - 1] + dt);
  return stamps;
}

describe('describeSpacing', () => {
  it.each([
    ['linspace', uniform(201, 0, 10), 'float64'],
    ['made by adding', (() => { const t = new Float64Array(5000); for (let j = 1; j < t.length; j++) t[j] = t[j - 1] + 0.001; return t; })(), 'float64'],
    ['two stamps', Float64Array.of(1, 9), 'float64'], ['one stamp', Float64Array.of(1), 'float64'], ['none', new Float64Array(0), null],
  ] as const)('%s is even', (_name, stamps, dtype) => {
    expect(describeSpacing(stamps, dtype)).toMatchObject({ uniform: true, roundedOnly: false });
  });
  it.each([
    ['single precision', made(300, (j) => Math.fround(100 + j * 0.013)), 'float32', 'float32'],
    ['single precision, late and fine', made(200, (j) => Math.fround(1e5 + j * 0.01)), 'float32', 'float32'],
    ['singles stored as doubles', made(300, (j) => Math.fround(j * 0.1)), 'float64', 'float32'],
    ['three decimals', made(99, (j) => Number((j * 0.0125).toFixed(3))), 'float64', '3 decimals'],
    ['twelve digits, more decimals for small stamps than for large ones', made(300, (j) => Number((1e-3 * (1 + j / 7)).toPrecision(12))), 'float64', '12 digits'],
    ['printed singles', made(99, (j) => Math.fround(Number((j * 0.0125).toFixed(3)))), 'float32', '3 decimals'],
    ['added up in single precision', added(Math.fround(0.1), 20_000), 'float32', 'additions in float32'],
    ['added up in single precision, stored as doubles', added(Math.fround(0.013), 3000), 'float64', 'additions in float32'],
    ['six digits', made(400, (j) => Number((1234.5 + j / 3).toPrecision(6))), 'float64', '2 decimals'],
  ] as const)('%s is even but for rounding', (_name, stamps, dtype, by) => {
    expect(describeSpacing(stamps, dtype)).toMatchObject({ uniform: false, roundedOnly: true, explainedBy: by });
  });
  it.each([
    ['random', uneven(50, 1), 'float64'], ['months', Float64Array.of(0, 31, 59, 90, 120, 151), 'float64'], ['one stamp late', made(50, (j) => (j === 20 ? 20.4 : j)), 'float64'],
    ['small whole numbers', Float64Array.of(0, 1, 2, 4, 5), 'float64'], ['growing by a hundredth of a per cent', made(100, (j) => (1.0001 ** j - 1) / 1e-4), 'float64'],
  ] as const)('%s stamps are uneven', (_name, stamps, dtype) => {
    expect(describeSpacing(stamps, dtype)).toMatchObject({ uniform: false, roundedOnly: false });
  });
  it('puts rounded stamps back on their grid and leaves others alone', () => {
    const rounded = made(99, (j) => Number((j * 0.0125).toFixed(3)));
    const grid = effectiveStamps(rounded, describeSpacing(rounded, 'float64'));
    expect(grid[50]).toBeCloseTo((rounded[98] * 50) / 98, 14);
    const random = uneven(20, 3);
    expect(effectiveStamps(random, describeSpacing(random, 'float64'))).toBe(random);
  });
  it.each([
    ['even', uniform(9), 1], ['one stamp', Float64Array.of(0), 1], ['two rates beyond 2:1', made(9, (j) => (j < 4 ? j : 4 + 3 * (j - 4))), 6 / 7],
    ['exactly 2:1', Float64Array.of(0, 1, 3, 4), 1], ['each beyond 2:1', Float64Array.of(0, 1, 4, 5), 0],
  ] as const)('counts neighbours within 2:1: %s', (_name, stamps, share) => expect(describeSpacing(stamps, null).gentleShare).toBeCloseTo(share, 15));
  it('tells the intervals', () => {
    expect(describeSpacing(Float64Array.of(-1, 0, 4, 6), null)).toMatchObject({ count: 4, duration: 7, hMin: 1, hMax: 4, hMedian: 2, ratio: 4 });
  });
});
