/** Simpson against SciPy (odd counts), Cartwright's formula (even counts) and Abramowitz & Stegun 25.4. */
import { describe, expect, it } from 'vitest';
import { simpson } from '../../../server/engine/quadrature/simpson.ts';
import { trapezoid } from '../../../server/engine/quadrature/trapezoid.ts';
import { uneven, uniform } from '../../unit/engine/quadrature/stamp-sets.ts';
import { python } from './python.ts';

describe('against SciPy', () => {
  it('integrates random values on random odd grids to 1e-12 relative', () => {
    const cases = Array.from({ length: 40 }, (_, seed) => {
      const t = uneven(3 + 2 * seed, seed + 1, 1 + (seed % 11));
      return { t: Array.from(t), y: Array.from(t, (x, j) => 2 + Math.sin(7 * x + j)) };
    });
    const theirs = python<number[]>('from scipy.integrate import simpson\nprint(json.dumps([float(simpson(c["y"], x=c["t"])) for c in given]))', cases);
    cases.forEach(({ t, y }, k) => {
      const ours = simpson.weights(Float64Array.from(t)).reduce((sum, a, j) => sum + a * y[j], 0);
      expect(Math.abs(ours - theirs[k]) / Math.abs(theirs[k])).toBeLessThan(1e-12);
    });
  });
  it('the trapezoid is numpy.trapz', () => {
    const t = uneven(101, 9, 20), y = t.map(Math.cos);
    const theirs = python<number>('print(json.dumps(float(np.trapz(given["y"], given["t"]))))', { t: Array.from(t), y: Array.from(y) });
    expect(trapezoid.weights(t).reduce((sum, a, j) => sum + a * y[j], 0) / theirs).toBeCloseTo(1, 12);
  });
});

describe('even counts', () => {
  /** K. V. Cartwright (2017): the parabola through the last three points, integrated over the last interval. Written from its Lagrange form. */
  function lastByLagrange(x: Float64Array, y: Float64Array): number {
    const m = x.length, [a, b, c] = [x[m - 3], x[m - 2], x[m - 1]];
    const exact = (p: number, q: number) => {
      // integral over [b, c] of (x - p)(x - q)
      const F = (t: number) => (t * t * t) / 3 - ((p + q) * t * t) / 2 + p * q * t;
      return F(c) - F(b);
    };
    return (y[m - 3] * exact(b, c)) / ((a - b) * (a - c)) + (y[m - 2] * exact(a, c)) / ((b - a) * (b - c)) + (y[m - 1] * exact(a, b)) / ((c - a) * (c - b));
  }
  it.each([4, 6, 20, 51 * 2])('%i points: Simpson on all but the last, and the correction there', (m) => {
    const x = uneven(m, m, 2.5), y = x.map((t) => Math.exp(-t / 40) + 0.3 * t);
    const head = simpson.weights(x.slice(0, m - 1)).reduce((sum, a, j) => sum + a * y[j], 0);
    const whole = simpson.weights(x).reduce((sum, a, j) => sum + a * y[j], 0);
    expect(Math.abs(whole - head - lastByLagrange(x, y)) / Math.abs(whole)).toBeLessThan(1e-12);
  });
});

describe('Abramowitz & Stegun', () => {
  it('25.4.2: h/2 (1 2 2 ... 2 1)', () => expect(Array.from(trapezoid.weights(uniform(5, 0, 4)))).toEqual([0.5, 1, 1, 1, 0.5]));
  it('25.4.6: h/3 (1 4 2 4 1)', () => simpson.weights(uniform(5, 0, 4)).forEach((a, j) => expect(a).toBeCloseTo([1, 4, 2, 4, 1][j] / 3, 14)));
});
