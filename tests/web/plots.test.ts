import { describe, expect, it } from 'vitest';
import { decadeTicks, linearTicks } from '../../src/components/axis-ticks.ts';
import { colourIndex, colourMaps, colourRange } from '../../src/plots/colour-map.ts';
import { aspectOf, cellAt, cellBorders } from '../../src/plots/field-geometry.ts';
import { sliceOf } from '../../src/plots/field-slice.ts';
import { thinLine, type Point } from '../../src/plots/line-thinning.ts';
import { decadeSpan, spectrumRows } from '../../src/plots/spectrum-figures.ts';

/** Lightness L of OKLab from sRGB (B. Ottosson, 2020), written a second time for this test. */
function lightness(r: number, g: number, b: number): number {
  const [R, G, B] = [r, g, b].map((v) => (v / 255 <= 0.04045 ? v / 255 / 12.92 : ((v / 255 + 0.055) / 1.055) ** 2.4));
  const l = Math.cbrt(0.4122214708 * R + 0.5363325363 * G + 0.0514459929 * B);
  const m = Math.cbrt(0.2119034982 * R + 0.6806995451 * G + 0.1073969566 * B);
  const s = Math.cbrt(0.0883024619 * R + 0.2817188376 * G + 0.6299787005 * B);
  return 0.2104542553 * l + 0.793617785 * m - 0.0040720468 * s;
}
const lightnesses = (map: Uint8ClampedArray) => Array.from({ length: 256 }, (_, k) => lightness(map[3 * k], map[3 * k + 1], map[3 * k + 2]));

describe('colour maps', () => {
  it('the sequential one grows evenly in lightness', () => {
    const L = lightnesses(colourMaps.sequential);
    L.forEach((value, k) => expect(Math.abs(value - (L[0] + ((L[255] - L[0]) * k) / 255))).toBeLessThan(0.015));
  });
  it('the diverging one is lightest in the middle and alike on both sides', () => {
    const L = lightnesses(colourMaps.diverging);
    expect(Math.max(...L)).toBeCloseTo((L[127] + L[128]) / 2, 2);
    L.forEach((value, k) => expect(Math.abs(value - L[255 - k])).toBeLessThan(0.08));
  });
  it('centres a mode on zero', () => {
    const range = colourRange('diverging', -0.2, 3);
    expect(range).toEqual([-3, 3]);
    expect(Math.abs(colourIndex(0, range) - 127.5)).toBeLessThanOrEqual(0.5);
    expect([colourIndex(-9, range), colourIndex(9, range)]).toEqual([0, 255]);
  });
});

describe('the geometry of a field', () => {
  it('draws cells of a graded axis as wide as they are', () => {
    const borders = cellBorders([0, 1, 3], 3);
    expect([...borders].map((b) => b * 4.5)).toEqual([0, expect.closeTo(1, 12), expect.closeTo(2.5, 12), 4.5]);
    expect([0, 0.3, 0.999].map((fraction) => cellAt(borders, fraction))).toEqual([0, 1, 2]);
  });
  it('draws an axis without, or with disordered, coordinates evenly', () => {
    expect([...cellBorders(null, 4)]).toEqual([0, 0.25, 0.5, 0.75, 1]);
    expect([...cellBorders([0, 2, 1, 3], 4)]).toEqual([0, 0.25, 0.5, 0.75, 1]);
  });
  it('takes the proportions from lengths of one unit, else from the counts', () => {
    const axis = (nodes: number[] | null, unit: string | null, count = 2) => ({ nodes, unit, count });
    expect(aspectOf(axis([0, 4], 'm'), axis([0, 2], 'm'))).toBeCloseTo(0.5, 12);
    expect(aspectOf(axis([0, 4], 'm', 10), axis([0, 2], 's', 5))).toBeCloseTo(0.5, 12);
  });
});

describe('the slice of a field', () => {
  const axis = (name: string, count: number) => ({ name, unit: null, count, nodes: null });
  const values = Array.from({ length: 24 }, (_, k) => k);
  it('holds one axis and walks the others in storage order', () => {
    const { x, y, values: shown } = sliceOf({ axes: [axis('a', 2), axis('b', 3), axis('c', 4)], values }, { axis: 0, index: 1 });
    expect([x.name, y?.name]).toEqual(['c', 'b']);
    expect(shown).toEqual(values.slice(12));
  });
  it('cuts across any axis', () => {
    const { x, y, values: shown } = sliceOf({ axes: [axis('a', 2), axis('b', 3), axis('c', 4)], values }, { axis: 2, index: 3 });
    expect([x.name, y?.name]).toEqual(['b', 'a']);
    expect(shown).toEqual([3, 7, 11, 15, 19, 23]);
  });
  it('lets x run to the right although it is stored first, and drops axes of one node', () => {
    const { x, y, values: shown } = sliceOf({ axes: [axis('x', 2), axis('y', 3), axis('z', 1)], values: [0, 1, 2, 3, 4, 5] }, null);
    expect([x.name, y?.name]).toEqual(['x', 'y']);
    expect(shown).toEqual([0, 3, 1, 4, 2, 5]);
  });
  it('is a line where one axis is long', () => {
    expect(sliceOf({ axes: [axis('x', 1), axis('y', 3)], values: [7, 8, 9] }, null)).toMatchObject({ x: { name: 'y' }, y: null, values: [7, 8, 9] });
  });
});

describe('figures of a spectrum', () => {
  it('adds up the energy and calls everything at or below the floor noise', () => {
    const rows = spectrumRows([2, 1, 1e-9], 1e-8);
    expect(rows.map((row) => row.energy)).toEqual([0.8, expect.closeTo(1, 12), 1]);
    expect(rows.map((row) => row.noise)).toEqual([false, false, true]);
  });
  it('spans the decades that can be read, and survives an all-zero matrix', () => {
    expect(decadeSpan(spectrumRows([100, 1, 1e-30], 1e-6), 1e-6)).toEqual([-9, 2]);
    const [low, high] = decadeSpan(spectrumRows([0, 0], 0), 0);
    expect(high).toBeGreaterThan(low);
  });
});

describe('lines and ticks', () => {
  it('a thinned line keeps its extremes and its order', () => {
    const points: Point[] = Array.from({ length: 50_000 }, (_, j) => [j / 100, Math.sin(j * 1.7)]);
    const thin = thinLine(points, 500);
    expect(thin.length).toBeLessThanOrEqual(2 * 501);
    expect(Math.max(...thin.map((point) => point[1]))).toBe(points.reduce((most, point) => Math.max(most, point[1]), -1));
    expect(thin.every((point, k) => k === 0 || point[0] >= thin[k - 1][0])).toBe(true);
  });
  it('ticks are round, inside the axis, and about as many as wished', () => {
    expect(linearTicks(0.13, 0.87, 4)).toEqual([0.2, 0.4, 0.6, 0.8]);
    expect(linearTicks(3, 3, 5)).toEqual([3]);
    expect(decadeTicks(1e-9, 100, 4)).toEqual([-7, -4, -1, 2]);
  });
});
