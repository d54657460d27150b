import { describe, expect, it } from 'vitest';
import { axisValueAt, layBeam, positionOf } from '../../src/beam/beam-layout.ts';
import { binByPixel, nearestTo, pixelOf } from '../../src/beam/pixel-bins.ts';

const whole = { from: 0, to: 1 };

describe('the layout of a beam', () => {
  it('puts a snapshot where its stamp lies between the first and the last', () => {
    const { position } = layBeam({ stamps: [2, 3, 6], count: 3, records: [] }, 'linear');
    expect([...position]).toEqual([0, 0.25, 1]);
  });
  it('keeps the order of storage: a restart is a step back', () => {
    const { position } = layBeam({ stamps: [0, 1, 2, 1.5, 3], count: 5, records: [] }, 'linear');
    expect(position[3]).toBeLessThan(position[2]);
    expect(position[3]).toBeCloseTo(0.5, 12);
  });
  it('draws an ensemble by index, and a single snapshot in the middle', () => {
    expect([...layBeam({ stamps: null, count: 3, records: [] }, 'linear').position]).toEqual([0, 0.5, 1]);
    expect([...layBeam({ stamps: [7], count: 1, records: [] }, 'log').position]).toEqual([0.5]);
  });
  it('lays records side by side, each as wide as it lasts, without overlap', () => {
    const { position, parts } = layBeam({ stamps: [0, 1, 2, 0, 1], count: 5, records: [{ label: 'a', from: 0, count: 3 }, { label: 'b', from: 3, count: 2 }] }, 'linear');
    expect((parts[0].end - parts[0].start) / (parts[1].end - parts[1].start)).toBeCloseTo(2, 12);
    expect(parts[0].end).toBeLessThan(parts[1].start);
    expect(position[2]).toBeCloseTo(parts[0].end, 12);
    expect(position[4]).toBeCloseTo(1, 12);
  });
  it('counts elapsed time in steps on the logarithmic scale: equal ratios far from the start are equally wide', () => {
    const stamps = [5, 5 + 1e-6, 5 + 1e-3, 6, 1005];
    const { position } = layBeam({ stamps, count: 5, records: [] }, 'log');
    expect((position[3] - position[2]) / (position[4] - position[3])).toBeCloseTo(1, 2);
  });
  it.each(['linear', 'log'] as const)('finds the time again from the place (%s)', (scale) => {
    const { parts, position } = layBeam({ stamps: [-1, 0.5, 7, 40], count: 4, records: [] }, scale);
    [-1, 0.5, 7, 40].forEach((t, j) => {
      expect(positionOf(parts[0], scale, t)).toBeCloseTo(position[j], 12);
      expect(axisValueAt(parts[0], scale, position[j])).toBeCloseTo(t, 9);
    });
  });
});

describe('bins by pixel', () => {
  it('loses no snapshot and keeps the extremes of each column', () => {
    const count = 100_000;
    const weights = Float64Array.from({ length: count }, (_, j) => Math.sin(j));
    const { position } = layBeam({ stamps: Array.from({ length: count }, (_, j) => j), count, records: [] }, 'linear');
    const bins = binByPixel(position, weights, whole, 800);
    expect(bins.count.reduce((sum, n) => sum + n, 0)).toBe(count);
    expect(Math.max(...bins.high)).toBe(weights.reduce((a, b) => Math.max(a, b)));
    expect(Math.min(...bins.low)).toBe(weights.reduce((a, b) => Math.min(a, b)));
  });
  it('shows each of three snapshots in a column of its own', () => {
    const bins = binByPixel(Float64Array.of(0, 0.5, 1), [1, 2, -3], whole, 101);
    expect([0, 50, 100].map((x) => [bins.count[x], bins.high[x], bins.low[x]])).toEqual([[1, 1, 1], [1, 2, 2], [1, -3, -3]]);
    expect(bins.count.reduce((sum, n) => sum + n, 0)).toBe(3);
  });
  it('leaves out what lies outside the view', () => {
    const view = { from: 0.4, to: 0.6 };
    expect(binByPixel(Float64Array.of(0, 0.5, 1), null, view, 50).count.reduce((sum, n) => sum + n, 0)).toBe(1);
    expect(pixelOf(0.4, view, 50)).toBe(0);
    expect(pixelOf(0.6, view, 50)).toBe(49);
  });
  it('finds the nearest snapshot, also behind a restart, the first of equals', () => {
    const position = Float64Array.of(0, 0.5, 0.5, 1, 0.7);
    expect([0.1, 0.49, 0.72, 2].map((wanted) => nearestTo(position, wanted))).toEqual([0, 1, 4, 3]);
    expect(nearestTo(new Float64Array(0), 0.5)).toBe(-1);
  });
  it('is fast enough to be done at each frame: 100,000 snapshots well under 100 ms', () => {
    const position = Float64Array.from({ length: 100_000 }, (_, j) => j / 99_999);
    binByPixel(position, position, whole, 1200);
    const start = performance.now();
    binByPixel(position, position, whole, 1200);
    expect(performance.now() - start).toBeLessThan(100);
  });
});
