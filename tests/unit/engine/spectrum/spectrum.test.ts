/** The weighted spectrum against what theory says. */
import { describe, expect, it } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import { spectrumResult } from '#contract/weights.ts';
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
  it('takes the rounding of single precision as the floor where it is larger', async () => {
    const { matrix, a, w } = example(40, 6, 5), floor = async (epsilon?: number) => {
      const { result, singularValues } = await weightedSpectrum(tilesOf(matrix, 40, 6), a, w, portable, epsilon);
      return result.floor / singularValues[0];
    };
    expect(await floor()).toBeCloseTo(2 ** -26, 15);
    expect(await floor(2 ** -23)).toBeCloseTo(2 ** -23, 15);
  });
  it('gives a snapshot of weight zero no part in the modes', async () => {
    const { matrix, a, w } = example(30, 5, 6), n = 30;
    a[2] = 0;
    const without = Float64Array.from([...matrix.subarray(0, 2 * n), ...matrix.subarray(3 * n)]);
    const [all, four] = [await weightedSpectrum(tilesOf(matrix, n, 5), a, w, portable), await weightedSpectrum(tilesOf(without, n, 4), a.filter((_, j) => j !== 2), w, portable)];
    four.singularValues.forEach((sigma, k) => expect(all.singularValues[k] / sigma).toBeCloseTo(1, 12));
    expect(all.result.resolved).toBe(4);
    expect(Array.from(coefficientsOf(all, a, 4)).filter((_, k) => k % 5 === 2)).toEqual([0, 0, 0, 0]);
  });
  // Degenerate shapes and magnitudes that still have a spectrum: n, m, value, expected sigma_1
  it.each([[1, 1, 3, 3], [5, 1, 1, Math.sqrt(5)], [1, 5, 1, Math.sqrt(5)], [2, 2, 1, 2], [3, 2, 1e150, Math.sqrt(6) * 1e150], [3, 2, 1e-140, Math.sqrt(6) * 1e-140]])('of a constant %i x %i matrix of %d', async (n, m, value, sigma) => {
    const ones = (length: number) => new Float64Array(length).fill(1);
    const { result } = await weightedSpectrum(tilesOf(ones(n * m).fill(value), n, m), ones(m), ones(n), portable);
    expect(result.singular_values[0] / sigma).toBeCloseTo(1, 12);
    expect(result).toMatchObject({ resolved: 1, rank: { 0.9: 1, 0.9999: 1 } });
    expect(spectrumResult.safeParse(result).error).toBeUndefined();
  });
  it.each([[0, 3], [3, 0], [0, 0]])('refuses a %i x %i matrix', async (n, m) => {
    await expect(weightedSpectrum(tilesOf(new Float64Array(0), n, m), new Float64Array(m), new Float64Array(n), portable)).rejects.toMatchObject({ code: 'matrix-invalid' });
  });
  it('names row and column of a value that is not finite', async () => {
    const matrix = new Float64Array(30).fill(1);
    matrix[2 * 10 + 8] = NaN;
    await expect(weightedSpectrum(tilesOf(matrix, 10, 3), new Float64Array(3).fill(1), new Float64Array(10).fill(1), portable)).rejects.toMatchObject({ details: { row: 8, column: 2, value: 'NaN' } });
  });
  it('refuses tiles that do not cover the matrix', async () => {
    const { matrix, a, w } = example(20, 3, 7), short = { ...tilesOf(matrix, 20, 3), tiles: tilesOf(matrix.slice(0, 42), 14, 3).tiles };
    await expect(weightedSpectrum(short, a, w, portable)).rejects.toMatchObject({ code: 'matrix-invalid', details: { expected: 20, actual: 14 } });
  });
  const one = new Float64Array(2).fill(1);
  it.each([
    ['squares that overflow', [1e200, 1, 1, 1], one, one, 'matrix-invalid'], ['squares that vanish', [1e-200, 0, 0, 0], one, one, 'matrix-invalid'],
    ['all zero', [0, 0, 0, 0], one, one, 'matrix-invalid'], ['NaN', [1, NaN, 1, 1], one, one, 'matrix-invalid'], ['infinite', [1, 1, Infinity, 1], one, one, 'matrix-invalid'],
    ['a negative weight', [1, 1, 1, 1], Float64Array.of(1, -1), one, 'weights-invalid'], ['a weight that is not a number', [1, 1, 1, 1], one, Float64Array.of(NaN, 1), 'weights-invalid'],
    ['too few weights', [1, 1, 1, 1], Float64Array.of(1), one, 'weights-invalid'],
  ] as const)('refuses %s', async (_name, values, a, w, code) => {
    const refusal = await weightedSpectrum(tilesOf(Float64Array.from(values), 2, 2), a, w, portable).catch((error: unknown) => error);
    expect(refusal).toBeInstanceOf(PennyweightError);
    expect((refusal as PennyweightError).code).toBe(code);
  });
  it('gives the projection error by rank', () => {
    const errors = projectionError([4, 3, 0]);
    expect(Array.from(errors)).toEqual([1, 0.6, 0, 0]);
    expect(Array.from(projectionError([0, 0]))).toEqual([0, 0, 0]);
    expect(projectionError([1, 1e-12])[1]).toBeCloseTo(1e-12, 24);
  });
});
