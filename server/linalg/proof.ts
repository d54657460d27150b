/**
 * Proof that a kernel computes: products of small whole numbers, which are exact in double precision in any order of
 * summation, and an eigenproblem with a known answer. Sizes are odd, so that the edges of every kernel's blocks are met.
 */
import { PennyweightError } from '#contract/error.ts';
import type { LinearAlgebra } from './linear-algebra.ts';

const wrong = (what: string) =>
  new PennyweightError('unavailable', `The linear algebra library computes ${what} wrongly on this processor.`, {
    what,
  });

/** Whole numbers from -8 to 8 without a period that a kernel could share. */
const whole = (length: number, step: number) => Float64Array.from({ length }, (_, i) => (((i * step) % 8191) % 17) - 8);

function proveGram(algebra: LinearAlgebra, m: number, rows: number): void {
  const tile = whole(m * rows, 7919),
    gram = new Float64Array(m * m).fill(3);
  algebra.accumulateGram(gram, m, tile, rows);
  for (let j = 0; j < m; j++)
    for (let k = 0; k < m; k++) {
      let sum = 3;
      for (let i = 0; i < rows; i++) sum += tile[j * rows + i] * tile[k * rows + i];
      if (gram[j * m + k] !== sum) throw wrong('a correlation matrix');
    }
}

function proveProduct(algebra: LinearAlgebra, rows: number, inner: number, columns: number): void {
  const left = whole(rows * inner, 5573),
    right = whole(inner * columns, 3571);
  const product = algebra.multiply(left, rows, inner, right, columns);
  for (let c = 0; c < columns; c++)
    for (let i = 0; i < rows; i++) {
      let sum = 0;
      for (let k = 0; k < inner; k++) sum += left[k * rows + i] * right[c * inner + k];
      if (product[c * rows + i] !== sum) throw wrong('a product');
    }
}

/** Second differences: eigenvalues 2 + 2 cos(k pi / (m + 1)), k = 1..m (common knowledge; J. Demmel, Applied Numerical Linear Algebra, 1997, lemma 6.1). */
function proveEigen(algebra: LinearAlgebra, m: number): void {
  const matrix = new Float64Array(m * m);
  for (let j = 0; j < m; j++) {
    matrix[j * m + j] = 2;
    if (j > 0) matrix[j * m + j - 1] = matrix[(j - 1) * m + j] = -1;
  }
  const { values, vectors } = algebra.eigSymmetric(matrix, m);
  for (let k = 0; k < m; k++) {
    const exact = 2 + 2 * Math.cos(((k + 1) * Math.PI) / (m + 1));
    if (!(Math.abs(values[k] - exact) < 1e-12)) throw wrong('an eigenvalue');
    for (let i = 0; i < m; i++) {
      const v = (at: number) => (at < 0 || at >= m ? 0 : vectors[k * m + at]);
      if (!(Math.abs(2 * v(i) - v(i - 1) - v(i + 1) - exact * v(i)) < 1e-12)) throw wrong('an eigenvector');
    }
  }
}

/** About a tenth of a second. Errors: 'unavailable', naming what is wrong. */
export function prove(algebra: LinearAlgebra): void {
  for (const [m, rows] of [
    [1, 1],
    [5, 3],
    [37, 301],
    [67, 2511],
  ])
    proveGram(algebra, m, rows);
  for (const [rows, inner, columns] of [
    [3, 5, 7],
    [301, 41, 23],
  ])
    proveProduct(algebra, rows, inner, columns);
  proveEigen(algebra, 61);
}
