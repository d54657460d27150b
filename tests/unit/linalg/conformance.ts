/** What every implementation of LinearAlgebra must do. */
import { describe, expect, it } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import type { LinearAlgebra } from '../../../server/linalg/linear-algebra.ts';
import { accurateSum } from '../../../server/engine/quadrature/stamps.ts';
import { prove } from '../../../server/linalg/proof.ts';
import { randomNumbers } from '../engine/quadrature/stamp-sets.ts';

export function filled(length: number, seed: number): Float64Array {
  const random = randomNumbers(seed);
  return Float64Array.from({ length }, () => 2 * random() - 1);
}

/** m x m, symmetric, positive semi-definite, of the given rank. */
export function gramOf(algebra: LinearAlgebra, m: number, rank: number, seed: number): Float64Array {
  const gram = new Float64Array(m * m);
  algebra.accumulateGram(gram, m, filled(m * rank, seed), rank);
  return gram;
}

const sameBits = (a: Float64Array, b: Float64Array) => Buffer.compare(new Uint8Array(a.buffer), new Uint8Array(b.buffer)) === 0;

const refusalOf = (run: () => unknown) => {
  try {
    run();
  } catch (error) {
    return error instanceof PennyweightError ? error.code : error;
  }
  return 'nothing was refused';
};

export function conformance(algebra: LinearAlgebra): void {
  describe(algebra.name, () => {
    it.each([[1, 1], [3, 5], [4, 300], [7, 257], [17, 1000], [5, 4099], [66, 130]])('accumulates the Gram matrix of %i columns and %i rows', (m, rows) => {
      const tile = filled(m * rows, m), gram = new Float64Array(m * m);
      algebra.accumulateGram(gram, m, tile, rows);
      algebra.accumulateGram(gram, m, tile, rows);
      let worst = 0;
      for (let j = 0; j < m; j++) for (let k = 0; k < m; k++) {
        const dot = accurateSum(Float64Array.from({ length: rows }, (_, i) => tile[j * rows + i] * tile[k * rows + i]));
        worst = Math.max(worst, Math.abs(gram[k * m + j] - 2 * dot), gram[k * m + j] === gram[j * m + k] ? 0 : Infinity);
      }
      expect(worst).toBeLessThan(4 * Number.EPSILON * rows);
    });
    it('takes a tile that begins inside a larger array, and one that is longer than it needs', () => {
      const tile = filled(60, 2), inside = new Float64Array(200).fill(NaN);
      inside.set(tile, 77);
      const [plain, shifted] = [new Float64Array(9), new Float64Array(9)];
      algebra.accumulateGram(plain, 3, tile, 20);
      algebra.accumulateGram(shifted, 3, inside.subarray(77), 20);
      expect(shifted).toEqual(plain);
      expect(plain.every(Number.isFinite)).toBe(true);
    });
    it('leaves its inputs as they are', () => {
      const tile = filled(40, 3), before = tile.slice(), gram = gramOf(algebra, 4, 9, 4), matrix = gram.slice();
      algebra.accumulateGram(new Float64Array(16), 4, tile, 10);
      algebra.eigSymmetric(gram, 4);
      algebra.multiply(tile, 10, 4, gram, 4);
      expect([tile, gram]).toEqual([before, matrix]);
    });
    it('gives the same bits for the same calls', () => {
      const m = 70, tile = filled(m * 3000, 5), [a, b] = [new Float64Array(m * m), new Float64Array(m * m)];
      for (const gram of [a, b]) algebra.accumulateGram(gram, m, tile, 3000);
      expect(sameBits(a, b)).toBe(true);
      const [one, two] = [a, b].map((gram) => algebra.eigSymmetric(gram, m));
      expect(sameBits(one.values, two.values) && sameBits(one.vectors, two.vectors)).toBe(true);
      expect(sameBits(algebra.multiply(tile, 3000, m, a, m), algebra.multiply(tile, 3000, m, b, m))).toBe(true);
    });
    it.each([1, 2, 3, 12, 40, 90])('solves the symmetric eigenproblem of size %i', (m) => {
      const matrix = gramOf(algebra, m, 3 * m, m + 1), { values, vectors } = algebra.eigSymmetric(matrix, m);
      let [order, orthogonality, residual] = [0, 0, 0];
      for (let k = 1; k < m; k++) order = Math.max(order, values[k] - values[k - 1]);
      for (let k = 0; k < m; k++) for (let l = 0; l < m; l++) {
        let dot = k === l ? -1 : 0, image = -values[k] * vectors[k * m + l];
        for (let i = 0; i < m; i++) {
          dot += vectors[k * m + i] * vectors[l * m + i];
          image += matrix[l * m + i] * vectors[k * m + i];
        }
        orthogonality = Math.max(orthogonality, Math.abs(dot));
        residual = Math.max(residual, Math.abs(image));
      }
      expect(order).toBe(0);
      expect(orthogonality).toBeLessThan(1e-12);
      expect(residual).toBeLessThan(1e-12 * values[0]);
    });
    it('handles rank-deficient, zero and indefinite matrices', () => {
      const ones = algebra.eigSymmetric(new Float64Array(9).fill(1), 3).values;
      expect(Math.abs(ones[0] - 3)).toBeLessThan(1e-14);
      expect(Math.abs(ones[2])).toBeLessThan(1e-14);
      const deficient = algebra.eigSymmetric(gramOf(algebra, 30, 4, 6), 30).values;
      expect(deficient[3]).toBeGreaterThan(1e-3);
      expect(Math.abs(deficient[4])).toBeLessThan(1e-13);
      expect(Array.from(algebra.eigSymmetric(new Float64Array(16), 4).values)).toEqual([0, 0, 0, 0]);
      expect(Array.from(algebra.eigSymmetric(Float64Array.of(0, 1, 1, 0), 2).values, (x) => Number(x.toFixed(14)))).toEqual([1, -1]);
    });
    it('multiplies', () => {
      expect(Array.from(algebra.multiply(Float64Array.of(1, 2, 3, 4, 5, 6), 2, 3, Float64Array.of(1, 0, 2, 0, 1, 0), 2))).toEqual([11, 14, 3, 4]);
      expect(algebra.multiply(new Float64Array(0), 0, 2, Float64Array.of(1, 2), 1)).toHaveLength(0);
      expect(algebra.multiply(Float64Array.of(1, 2), 2, 1, new Float64Array(0), 0)).toHaveLength(0);
      expect(Array.from(algebra.multiply(new Float64Array(0), 2, 0, new Float64Array(0), 1))).toEqual([0, 0]);
    });
    it('passes the proof that a kernel has to pass', () => prove(algebra));
    it('says what it is', () => expect(algebra.describe()).toMatch(/\S/));
    const single = new Float32Array(4) as unknown as Float64Array;
    it.each<[string, () => unknown]>([
      ['a short correlation matrix', () => algebra.accumulateGram(new Float64Array(3), 2, new Float64Array(4), 2)],
      ['a long correlation matrix', () => algebra.accumulateGram(new Float64Array(5), 2, new Float64Array(4), 2)],
      ['a short tile', () => algebra.accumulateGram(new Float64Array(4), 2, new Float64Array(3), 2)],
      ['a tile in single precision', () => algebra.accumulateGram(new Float64Array(4), 2, single, 2)],
      ['half a row', () => algebra.accumulateGram(new Float64Array(4), 2, new Float64Array(4), 1.5)],
      ['fewer than no rows', () => algebra.accumulateGram(new Float64Array(4), 2, new Float64Array(4), -1)],
      ['a short symmetric matrix', () => algebra.eigSymmetric(new Float64Array(3), 2)],
      ['a symmetric matrix in single precision', () => algebra.eigSymmetric(single, 2)],
      ['no matrix', () => algebra.eigSymmetric(new Float64Array(0), 0)],
      ['NaN in a matrix', () => algebra.eigSymmetric(Float64Array.of(1, NaN, NaN, 1), 2)],
      ['infinity in a matrix', () => algebra.eigSymmetric(Float64Array.of(Infinity, 0, 0, 1), 2)],
      ['a short left factor', () => algebra.multiply(new Float64Array(3), 2, 2, new Float64Array(4), 2)],
      ['a short right factor', () => algebra.multiply(new Float64Array(4), 2, 2, new Float64Array(3), 2)],
      ['a factor in single precision', () => algebra.multiply(new Float64Array(4), 2, 2, single, 2)],
    ])('refuses %s', (_name, run) => expect(refusalOf(run)).toBe('matrix-invalid'));
  });
}
