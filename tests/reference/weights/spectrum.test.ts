/** The weighted spectrum against LAPACK's SVD of the weighted matrix, and against Karhunen-Loeve spectra known in closed form. */
import { describe, expect, it } from 'vitest';
import { trapezoid } from '../../../server/engine/quadrature/trapezoid.ts';
import { simpson } from '../../../server/engine/quadrature/simpson.ts';
import { weightedSpectrum, modesOf, type RowTileSource } from '../../../server/engine/spectrum/spectrum.ts';
import { portable } from '../../../server/linalg/portable.ts';
import { randomNumbers, uniform } from '../../unit/engine/quadrature/stamp-sets.ts';
import { python } from './python.ts';

function whole(matrix: Float64Array, n: number, m: number): RowTileSource {
  return { nodes: n, snapshots: m, async *tiles() { yield { from: 0, rows: n, values: matrix.slice() }; } };
}

describe('against numpy.linalg.svd of W^(1/2) X diag(sqrt a)', () => {
  it('singular values down to a thousandth of the first agree to 1e-9, the leading ones to 1e-12, the subspaces by principal angle', async () => {
    const n = 300, m = 40, random = randomNumbers(8);
    // Decaying singular values, so that the correlation route is put to the test.
    const matrix = new Float64Array(n * m);
    for (let k = 0; k < m; k++) {
      const u = Float64Array.from({ length: n }, () => random() - 0.5), v = Float64Array.from({ length: m }, () => random() - 0.5);
      for (let j = 0; j < m; j++) for (let i = 0; i < n; i++) matrix[j * n + i] += 10 ** (-k / 6) * u[i] * v[j];
    }
    const a = Float64Array.from({ length: m }, () => 0.2 + random()), w = Float64Array.from({ length: n }, () => 0.2 + random());
    const source = whole(matrix, n, m), decomposition = await weightedSpectrum(source, a, w, portable);
    const theirs = python<{ s: number[]; u: number[][] }>(
      'X = np.array(given["x"]).reshape(given["m"], given["n"]).T\nS = np.sqrt(given["w"])[:, None] * X * np.sqrt(given["a"])\nu, s, _ = np.linalg.svd(S, full_matrices=False)\nprint(json.dumps({"s": s.tolist(), "u": u[:, :6].T.tolist()}))',
      { x: Array.from(matrix), n, m, a: Array.from(a), w: Array.from(w) },
    );
    theirs.s.forEach((sigma, k) => {
      // The correlation route squares the condition number: the error grows as eps (sigma_1 / sigma)^2.
      const tolerance = Math.max(1e-12, 32 * Number.EPSILON * (theirs.s[0] / sigma) ** 2);
      if (sigma > decomposition.result.floor) expect(Math.abs(decomposition.singularValues[k] - sigma) / sigma, `sigma ${k + 1}`).toBeLessThan(tolerance);
    });
    const phi = new Float64Array(n * 6);
    for await (const tile of modesOf(source, a, decomposition, 6, portable)) phi.set(tile.values);
    // cos of each principal angle is a singular value of U* W^(1/2) Phi; all modes of one subspace: its Gram matrix is I.
    for (let k = 0; k < 6; k++) {
      let length = 0;
      for (let l = 0; l < 6; l++) {
        let dot = 0;
        for (let i = 0; i < n; i++) dot += theirs.u[l][i] * Math.sqrt(w[i]) * phi[k * n + i];
        length += dot * dot;
      }
      expect(Math.abs(1 - length)).toBeLessThan(1e-10);
    }
  });
});

/** First eigenvalue of a covariance kernel on given nodes and weights: of A^(1/2) K A^(1/2), through snapshots that are the columns of its root. */
function covarianceEigenvalues(nodes: Float64Array, weights: Float64Array, kernel: (s: number, t: number) => number): number[] {
  const n = nodes.length, matrix = new Float64Array(n * n);
  for (let j = 0; j < n; j++) for (let i = 0; i < n; i++) matrix[j * n + i] = Math.sqrt(weights[i] * weights[j]) * kernel(nodes[i], nodes[j]);
  return Array.from(portable.eigSymmetric(matrix, n).values);
}

describe('Wiener process on [0, 1]: lambda_k = 1 / ((k - 1/2)^2 pi^2)', () => {
  const exact = (k: number) => 1 / ((k + 0.5) ** 2 * Math.PI ** 2);
  const kernel = Math.min;
  const graded = (n: number) => uniform(n).map((x) => x ** 2);
  const error = (nodes: Float64Array, weights: Float64Array) => Math.max(...covarianceEigenvalues(nodes, weights, kernel).slice(0, 3).map((lambda, k) => Math.abs(lambda - exact(k)) / exact(k)));
  it('converges with order 2 for the trapezoid, also on a graded grid', () => {
    for (const grid of [uniform, graded]) {
      const [coarse, fine] = [21, 41].map((n) => error(grid(n), trapezoid.weights(grid(n))));
      expect(Math.log2(coarse / fine)).toBeGreaterThan(1.7);
      expect(fine).toBeLessThan(0.02);
    }
  });
  it('does not converge with equal weights on a graded grid', () => {
    const [coarse, fine] = [21, 41].map((n) => error(graded(n), new Float64Array(n).fill(1 / n)));
    expect(fine).toBeGreaterThan(0.2);
    expect(fine / coarse).toBeGreaterThan(0.7);
  });
});

describe('exponential covariance exp(-|s - t|) on [-1, 1] (Ghanem & Spanos 1991, 2.3.3)', () => {
  it('has the first five eigenvalues 2 / (omega^2 + 1) of its transcendental equations', () => {
    // odd k: 1 - omega tan(omega) = 0; even k: omega + tan(omega) = 0, one root in each quarter period (a = 1, c = 1)
    const root = (f: (x: number) => number, low: number, high: number) => {
      let [a, b] = [low, high];
      for (let i = 0; i < 200; i++) {
        const middle = (a + b) / 2;
        if (f(a) * f(middle) <= 0) b = middle;
        else a = middle;
      }
      return (a + b) / 2;
    };
    const odd = (x: number) => Math.cos(x) - x * Math.sin(x), even = (x: number) => x * Math.cos(x) + Math.sin(x);
    const omegas = [root(odd, 0.1, 1.5), root(even, Math.PI / 2 + 0.01, Math.PI), root(odd, Math.PI, 1.5 * Math.PI), root(even, 1.5 * Math.PI + 0.01, 2 * Math.PI), root(odd, 2 * Math.PI, 2.5 * Math.PI)];
    const n = 161, nodes = uniform(n, -1, 1);
    for (const weights of [trapezoid.weights(nodes), simpson.weights(nodes)]) {
      const lambda = covarianceEigenvalues(nodes, weights, (s, t) => Math.exp(-Math.abs(s - t)));
      omegas.forEach((omega, k) => expect(lambda[k] / (2 / (omega * omega + 1))).toBeCloseTo(1, 2));
    }
  });
});
