/** The stand-in that runs everywhere: a register-blocked product in plain TypeScript, ml-matrix for the eigenproblem. */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { assertGram, assertProduct, assertSymmetric } from './array-shapes.ts';
import type { LinearAlgebra } from './linear-algebra.ts';

/** Rows of a block that stay in the first cache with eight columns of doubles: 8 x 256 x 8 bytes = 16 KiB. */
const rowBlock = 256;

/** Adds the dot products of four columns j.. with four columns k.. over rows [from, to). */
// prettier-ignore
function block4(
  gram: Float64Array,
  m: number,
  tile: Float64Array,
  rows: number,
  j: number,
  k: number,
  from: number,
  to: number,
): void {
  const a0 = j * rows,
    a1 = a0 + rows,
    a2 = a1 + rows,
    a3 = a2 + rows;
  const b0 = k * rows,
    b1 = b0 + rows,
    b2 = b1 + rows,
    b3 = b2 + rows;
  let s00 = 0,
    s01 = 0,
    s02 = 0,
    s03 = 0,
    s10 = 0,
    s11 = 0,
    s12 = 0,
    s13 = 0,
    s20 = 0,
    s21 = 0,
    s22 = 0,
    s23 = 0,
    s30 = 0,
    s31 = 0,
    s32 = 0,
    s33 = 0;
  for (let i = from; i < to; i++) {
    const x0 = tile[a0 + i],
      x1 = tile[a1 + i],
      x2 = tile[a2 + i],
      x3 = tile[a3 + i];
    const y0 = tile[b0 + i],
      y1 = tile[b1 + i],
      y2 = tile[b2 + i],
      y3 = tile[b3 + i];
    s00 += x0 * y0;
    s01 += x0 * y1;
    s02 += x0 * y2;
    s03 += x0 * y3;
    s10 += x1 * y0;
    s11 += x1 * y1;
    s12 += x1 * y2;
    s13 += x1 * y3;
    s20 += x2 * y0;
    s21 += x2 * y1;
    s22 += x2 * y2;
    s23 += x2 * y3;
    s30 += x3 * y0;
    s31 += x3 * y1;
    s32 += x3 * y2;
    s33 += x3 * y3;
  }
  gram[k * m + j] += s00;
  gram[(k + 1) * m + j] += s01;
  gram[(k + 2) * m + j] += s02;
  gram[(k + 3) * m + j] += s03;
  gram[k * m + j + 1] += s10;
  gram[(k + 1) * m + j + 1] += s11;
  gram[(k + 2) * m + j + 1] += s12;
  gram[(k + 3) * m + j + 1] += s13;
  gram[k * m + j + 2] += s20;
  gram[(k + 1) * m + j + 2] += s21;
  gram[(k + 2) * m + j + 2] += s22;
  gram[(k + 3) * m + j + 2] += s23;
  gram[k * m + j + 3] += s30;
  gram[(k + 1) * m + j + 3] += s31;
  gram[(k + 2) * m + j + 3] += s32;
  gram[(k + 3) * m + j + 3] += s33;
}

function dot(tile: Float64Array, a: number, b: number, from: number, to: number): number {
  let sum = 0;
  for (let i = from; i < to; i++) sum += tile[a + i] * tile[b + i];
  return sum;
}

export const portable: LinearAlgebra = {
  name: 'portable (TypeScript and ml-matrix)',
  describe: () => 'portable routines in TypeScript and ml-matrix',

  accumulateGram(gram, m, tile, rows) {
    assertGram(gram, m, tile, rows);
    const quads = m - (m % 4);
    for (let from = 0; from < rows; from += rowBlock) {
      const to = Math.min(rows, from + rowBlock);
      // Upper triangle (j <= k) by 4 x 4 blocks, then the columns left over.
      for (let k = 0; k < quads; k += 4) for (let j = 0; j <= k; j += 4) block4(gram, m, tile, rows, j, k, from, to);
      for (let k = quads; k < m; k++)
        for (let j = 0; j <= k; j++) gram[k * m + j] += dot(tile, j * rows, k * rows, from, to);
    }
    for (let k = 0; k < m; k++) for (let j = 0; j < k; j++) gram[j * m + k] = gram[k * m + j];
  },

  eigSymmetric(matrix, m) {
    assertSymmetric(matrix, m);
    const full = new Matrix(m, m);
    for (let j = 0; j < m; j++) for (let i = 0; i < m; i++) full.set(i, j, matrix[j * m + i]);
    const decomposition = new EigenvalueDecomposition(full, { assumeSymmetric: true });
    const order = Array.from(decomposition.realEigenvalues, (value, k) => ({ value, k })).sort(
      (a, b) => b.value - a.value,
    );
    const vectors = new Float64Array(m * m),
      from = decomposition.eigenvectorMatrix;
    order.forEach(({ k }, column) => {
      for (let i = 0; i < m; i++) vectors[column * m + i] = from.get(i, k);
    });
    return { values: Float64Array.from(order, ({ value }) => value), vectors };
  },

  multiply(left, rows, inner, right, columns) {
    assertProduct(left, rows, inner, right, columns);
    const product = new Float64Array(rows * columns);
    for (let from = 0; from < rows; from += rowBlock) {
      const to = Math.min(rows, from + rowBlock);
      for (let c = 0; c < columns; c++)
        for (let k = 0; k < inner; k++) {
          const factor = right[c * inner + k],
            a = k * rows,
            p = c * rows;
          for (let i = from; i < to; i++) product[p + i] += left[a + i] * factor;
        }
    }
    return product;
  },
};

/** The same, with the reason why the library does not run. */
export function portableBecause(reason: string): LinearAlgebra {
  return { ...portable, describe: () => `${portable.describe()}, since ${reason}` };
}
