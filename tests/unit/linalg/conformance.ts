/** What every implementation of LinearAlgebra must do. */
import { describe, expect, it } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import type { LinearAlgebra } from '../../../server/linalg/linear-algebra.ts';
import { randomNumbers } from '../engine/quadrature/stamp-sets.ts';

function filled(length: number, seed: number): Float64Array {
  const random = randomNumbers(seed);
  return Float64Array.from({ length }, () => 2 * random() - 1);
}

export function conformance(algebra: LinearAlgebra): void {
  describe(algebra.name, () => {
    it.each([[1, 1], [3, 5], [4, 300], [7, 257], [17, 1000]])('accumulates the Gram matrix of %i columns and %i rows', (m, rows) => {
      const tile = filled(m * rows, m), gram = new Float64Array(m * m);
      algebra.accumulateGram(gram, m, tile, rows);
      algebra.accumulateGram(gram, m, tile, rows);
      for (let j = 0; j < m; j++) for (let k = 0; k < m; k++) {
        let dot = 0;
        for (let i = 0; i < rows; i++) dot += tile[j * rows + i] * tile[k * rows + i];
        expect(Math.abs(gram[k * m + j] - 2 * dot)).toBeLessThan(1e-13 * rows);
        expect(gram[k * m + j]).toBe(gram[j * m + k]);
      }
    });
    it('gives the same bits for the same calls', () => {
      const tile = filled(9 * 400, 5), [a, b] = [new Float64Array(81), new Float64Array(81)];
      algebra.accumulateGram(a, 9, tile, 400);
      algebra.accumulateGram(b, 9, tile, 400);
      expect(a).toEqual(b);
    });
    it.each([1, 2, 12, 40])('solves the symmetric eigenproblem of size %i', (m) => {
      const tile = filled(m * 3 * m, m + 1), matrix = new Float64Array(m * m);
      algebra.accumulateGram(matrix, m, tile, 3 * m);
      const { values, vectors } = algebra.eigSymmetric(matrix, m);
      for (let k = 1; k < m; k++) expect(values[k]).toBeLessThanOrEqual(values[k - 1]);
      for (let k = 0; k < m; k++) for (let l = 0; l < m; l++) {
        let dot = 0, residual = -values[k] * vectors[k * m + l];
        for (let i = 0; i < m; i++) {
          dot += vectors[k * m + i] * vectors[l * m + i];
          residual += matrix[l * m + i] * vectors[k * m + i];
        }
        expect(Math.abs(dot - (k === l ? 1 : 0))).toBeLessThan(1e-12);
        expect(Math.abs(residual)).toBeLessThan(1e-12 * values[0]);
      }
    });
    it('handles a rank-deficient matrix', () => {
      const { values } = algebra.eigSymmetric(new Float64Array(9).fill(1), 3);
      expect(values[0]).toBeCloseTo(3, 12);
      expect(Math.abs(values[2])).toBeLessThan(1e-14);
    });
    it('multiplies', () => expect(Array.from(algebra.multiply(Float64Array.of(1, 2, 3, 4, 5, 6), 2, 3, Float64Array.of(1, 0, 2, 0, 1, 0), 2))).toEqual([11, 14, 3, 4]));
    it('refuses lengths that do not fit', () => {
      expect(() => algebra.accumulateGram(new Float64Array(3), 2, new Float64Array(4), 2)).toThrow(PennyweightError);
      expect(() => algebra.eigSymmetric(new Float64Array(3), 2)).toThrow(PennyweightError);
      expect(() => algebra.multiply(new Float64Array(3), 2, 2, new Float64Array(4), 2)).toThrow(PennyweightError);
    });
  });
}
