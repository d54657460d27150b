/** The weighted spectrum against what theory says. */
import { describe, expect, it } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import { coefficientsOf, modesOf, projectionError, weightedSpectrum, type RowTileSource } from '../../../../server/engine/spectrum/spectrum.ts';
import { portable } from '../../../../server/linalg/portable.ts';
import { randomNumbers } from '../quadrature/stamp-sets.ts';

/** A matrix in memory as tiles of `height` rows. */
export function tilesOf(matrix: Float64Array, n: number, m: number, height = 7): RowTileSource {
  return {
    nodes: n, snapshots: m,
    async *tiles() {
      for (let from = 0; from < n; from += height) {
        const rows = Math.min(height, n - from), values = new Float64Array(rows * m);
        for (let j = 0; j < m; j++) values.set(matrix.subarray(j * n + from, j * n + from + rows), j * rows);
        yield { from, rows, values };
      }
    },
  };
}

async function modes(source: RowTileSource, a: Float64Array, decomposition: Awaited<ReturnType<typeof weightedSpectrum>>, r: number): Promise<Float64Array> {
  const phi = new Float64Array(source.nodes * Math.min(r, decomposition.result.resolved));
  for await (const tile of modesOf(source, a, decomposition, r, portable)) for (let k = 0; k < phi.length / source.nodes; k++) phi.set(tile.values.subarray(k * tile.rows, (k + 1) * tile.rows), k * source.nodes + tile.from);
  return phi;
}

function example(n: number, m: number, seed: number) {
  const random = randomNumbers(seed);
  return { matrix: Float64Array.from({ length: n * m }, () => random() - 0.5), a: Float64Array.from({ length: m }, () => 0.1 + random()), w: Float64Array.from({ length: n }, () => 0.1 + random()) };
}

describe('weightedSpectrum', () => {
  it.each([[60, 9], [9, 24]])('of a %i x %i matrix: energy, orthonormal modes, reconstruction', async (n, m) => {
    const { matrix, a, w } = example(n, m, n);
    const source = tilesOf(matrix, n, m), decomposition = await weightedSpectrum(source, a, w, portable);
    let energy = 0;
    for (let j = 0; j < m; j++) for (let i = 0; i < n; i++) energy += a[j] * w[i] * matrix[j * n + i] ** 2;
    const { result } = decomposition;
    expect(result.energy).toBeCloseTo(energy, 10);
    expect(result.singular_values.reduce((sum, sigma) => sum + sigma * sigma, 0) / energy).toBeCloseTo(1, 12);
    const r = Math.min(n, m), phi = await modes(source, a, decomposition, r), b = coefficientsOf(decomposition, a, r);
    for (let k = 0; k < r; k++) for (let l = 0; l < r; l++) {
      let dot = 0;
      for (let i = 0; i < n; i++) dot += phi[k * n + i] * w[i] * phi[l * n + i];
      expect(Math.abs(dot - (k === l ? 1 : 0))).toBeLessThan(1e-10);
    }
    for (let j = 0; j < m; j++) for (let i = 0; i < n; i++) {
      let sum = 0;
      for (let k = 0; k < r; k++) sum += phi[k * n + i] * b[k * m + j];
      expect(Math.abs(sum - matrix[j * n + i])).toBeLessThan(1e-10);
    }
  });
  it('does not depend on the tiles', async () => {
    const { matrix, a, w } = example(50, 8, 3);
    const [one, many] = await Promise.all([50, 3].map((height) => weightedSpectrum(tilesOf(matrix, 50, 8, height), a, w, portable)));
    one.singularValues.forEach((sigma, k) => expect(many.singularValues[k] / sigma).toBeCloseTo(1, 12));
  });
  it('leaves modes as they are when all weights are scaled, but for their norm', async () => {
    const { matrix, a, w } = example(40, 6, 4), source = tilesOf(matrix, 40, 6);
    const plain = await weightedSpectrum(source, a, w, portable), scaled = await weightedSpectrum(source, a.map((x) => 9 * x), w, portable);
    const [p, q] = [await modes(source, a, plain, 6), await modes(source, a.map((x) => 9 * x), scaled, 6)];
    p.forEach((value, i) => expect(Math.abs(value - q[i])).toBeLessThan(1e-10));
    plain.singularValues.forEach((sigma, k) => expect(scaled.singularValues[k] / sigma).toBeCloseTo(3, 10));
  });
  it('marks the floor and gives no modes below it', async () => {
    const n = 30, u = Float64Array.from({ length: n }, (_, i) => Math.sin(i)), matrix = Float64Array.from({ length: 3 * n }, (_, k) => u[k % n] * (1 + Math.floor(k / n)));
    const { result } = await weightedSpectrum(tilesOf(matrix, n, 3), new Float64Array(3).fill(1), new Float64Array(n).fill(1), portable);
    expect(result.resolved).toBe(1);
    expect(result.rank).toEqual({ 0.9: 1, 0.99: 1, 0.999: 1, 0.9999: 1 });
  });
  const one = new Float64Array(2).fill(1);
  it.each([
    ['all zero', [0, 0, 0, 0], one, one, 'matrix-invalid'], ['NaN', [1, NaN, 1, 1], one, one, 'matrix-invalid'], ['infinite', [1, 1, Infinity, 1], one, one, 'matrix-invalid'],
    ['a negative weight', [1, 1, 1, 1], Float64Array.of(1, -1), one, 'weights-invalid'], ['a weight that is not a number', [1, 1, 1, 1], one, Float64Array.of(NaN, 1), 'weights-invalid'],
    ['too few weights', [1, 1, 1, 1], Float64Array.of(1), one, 'weights-invalid'],
  ] as const)('refuses %s', async (_name, values, a, w, code) => {
    const refusal = await weightedSpectrum(tilesOf(Float64Array.from(values), 2, 2), a, w, portable).catch((error: unknown) => error);
    expect(refusal).toBeInstanceOf(PennyweightError);
    expect((refusal as PennyweightError).code).toBe(code);
  });
  it('gives the projection error by rank', () => {
    const errors = projectionError([3, 4 / 1, 0].sort((x, y) => y - x));
    expect(Array.from(errors)).toEqual([1, 0.6, 0, 0]);
  });
});
