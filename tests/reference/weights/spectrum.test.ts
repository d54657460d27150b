/** The weighted spectrum against LAPACK's SVD of the weighted matrix, and against Karhunen-Loeve spectra known in closed form. */
import { describe, expect, it } from 'vitest';
import { simpson } from '../../../server/engine/quadrature/simpson.ts';
import { trapezoid } from '../../../server/engine/quadrature/trapezoid.ts';
import { modesOf, weightedSpectrum, type RowTileSource } from '../../../server/engine/spectrum/spectrum.ts';
import { linearAlgebra } from '../../../server/linalg/choose.ts';
import { portable } from '../../../server/linalg/portable.ts';
import { randomNumbers, uniform } from '../../unit/engine/quadrature/stamp-sets.ts';
import { python } from './python.ts';

const library = await linearAlgebra();
const implementations = library.name === portable.name ? [portable] : [portable, library];

/** A matrix in memory, n x m, as tiles of `height` rows. */
function tilesOf(matrix: Float64Array, n: number, m: number, height = n): RowTileSource {
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

describe.each(implementations)('$name against numpy.linalg.svd of W^(1/2) X diag(sqrt a)', (algebra) => {
  // More nodes than snapshots and fewer.
  it.each([[300, 40], [30, 45]])('n = %i, m = %i: singular values above the floor, and subspaces by principal angle', async (n, m) => {
    const random = randomNumbers(8), matrix = new Float64Array(n * m), r = 6;
    // Decaying singular values, so that the correlation route is put to the test.
    for (let k = 0; k < Math.min(n, m); k++) {
      const u = Float64Array.from({ length: n }, () => random() - 0.5), v = Float64Array.from({ length: m }, () => random() - 0.5);
      for (let j = 0; j < m; j++) for (let i = 0; i < n; i++) matrix[j * n + i] += 10 ** (-k / 6) * u[i] * v[j];
    }
    const a = Float64Array.from({ length: m }, () => 0.2 + random()), w = Float64Array.from({ length: n }, () => 0.2 + random());
    const source = tilesOf(matrix, n, m, 64), decomposition = await weightedSpectrum(source, a, w, algebra);
    const phi = new Float64Array(n * r);
    for await (const { from, rows, values } of modesOf(source, a, decomposition, r, algebra)) {
      for (let k = 0; k < r; k++) phi.set(values.subarray(k * rows, (k + 1) * rows), k * n + from);
    }
    // sin of the largest principal angle between the first k left singular vectors and W^(1/2) Phi, for k = 1..r
    const theirs = python<{ s: number[]; sines: number[]; gram: number }>(
      `w, a, n, m, r = np.array(given["w"]), np.array(given["a"]), given["n"], given["m"], given["r"]
S = np.sqrt(w)[:, None] * np.array(given["x"]).reshape(m, n).T * np.sqrt(a)
u, s, _ = np.linalg.svd(S, full_matrices=False)
V = np.sqrt(w)[:, None] * np.array(given["phi"]).reshape(r, n).T
sines = [float(np.linalg.norm(V[:, :k] - u[:, :k] @ (u[:, :k].T @ V[:, :k]), 2)) for k in range(1, r + 1)]
print(json.dumps({"s": s.tolist(), "sines": sines, "gram": float(np.abs(V.T @ V - np.eye(r)).max())}))`,
      { x: Array.from(matrix), n, m, r, a: Array.from(a), w: Array.from(w), phi: Array.from(phi) },
    );
    let compared = 0;
    theirs.s.forEach((sigma, k) => {
      if (sigma <= decomposition.result.floor) return;
      // The correlation route squares the condition number: the error grows as eps (sigma_1 / sigma)^2.
      const tolerance = Math.max(1e-12, 32 * Number.EPSILON * (theirs.s[0] / sigma) ** 2);
      expect(Math.abs(decomposition.singularValues[k] - sigma) / sigma, `sigma ${k + 1}`).toBeLessThan(tolerance);
      compared++;
    });
    expect(compared).toBe(Math.min(n, m));
    expect(decomposition.result.resolved).toBe(compared);
    for (const sine of theirs.sines) expect(sine).toBeLessThan(1e-10);
    expect(theirs.gram).toBeLessThan(1e-10);
  });
});

/** Kernel k(s, t) on nodes t_j as snapshots: X* X = K for X = L*, K = L L* (Cholesky), so that the spectrum of X is that of the covariance. */
function covariance(nodes: Float64Array, kernel: (s: number, t: number) => number): Float64Array {
  const n = nodes.length, transposed = new Float64Array(n * n); // column j is row j of L
  for (let j = 0; j < n; j++) for (let k = 0; k <= j; k++) {
    let rest = kernel(nodes[j], nodes[k]);
    for (let i = 0; i < k; i++) rest -= transposed[j * n + i] * transposed[k * n + i];
    const pivot = transposed[k * n + k];
    // The Wiener process starts at zero: a pivot that vanishes.
    transposed[j * n + k] = k === j ? Math.sqrt(Math.max(0, rest)) : pivot > 0 ? rest / pivot : 0;
  }
  return transposed;
}

/** Eigenvalues of the weighted covariance: the squares of the singular values of the snapshots. */
async function eigenvalues(nodes: Float64Array, weights: Float64Array, kernel: (s: number, t: number) => number): Promise<number[]> {
  const n = nodes.length, one = new Float64Array(n).fill(1);
  const { singularValues } = await weightedSpectrum(tilesOf(covariance(nodes, kernel), n, n), weights, one, library);
  return Array.from(singularValues, (sigma) => sigma * sigma);
}

describe('Wiener process on [0, 1]: lambda_k = 1 / ((k - 1/2)^2 pi^2)', () => {
  const exact = (k: number) => 1 / ((k + 0.5) ** 2 * Math.PI ** 2);
  const graded = (n: number) => uniform(n).map((x) => x ** 2);
  /** largest relative error of the first three */
  const error = async (nodes: Float64Array, weights: Float64Array) => Math.max(...(await eigenvalues(nodes, weights, Math.min)).slice(0, 3).map((lambda, k) => Math.abs(lambda - exact(k)) / exact(k)));
  it.each([['even', uniform], ['graded', graded]] as const)('the trapezoid converges with order 2 on an %s grid', async (_name, grid) => {
    const errors: number[] = [];
    for (const n of [21, 41, 81, 161]) errors.push(await error(grid(n), trapezoid.weights(grid(n))));
    for (let i = 1; i < errors.length; i++) {
      const order = Math.log2(errors[i - 1] / errors[i]);
      expect(order).toBeGreaterThan(1.8);
      expect(order).toBeLessThan(2.2);
    }
    expect(errors[3]).toBeLessThan(1e-3);
  });
  it('equal weights do not converge on a graded grid', async () => {
    const [coarse, fine] = [await error(graded(41), new Float64Array(41).fill(1 / 41)), await error(graded(161), new Float64Array(161).fill(1 / 161))];
    expect(fine).toBeGreaterThan(0.2);
    expect(fine / coarse).toBeGreaterThan(0.9);
  });
});

describe('exponential covariance exp(-|s - t|) on [-1, 1] (Ghanem & Spanos 1991, 2.3.3)', () => {
  it('has the first five eigenvalues 2 / (omega^2 + 1) of its transcendental equations', async () => {
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
    // Richardson extrapolation over two grids takes the error of order 2 away and leaves one of order 4.
    for (const rule of [trapezoid, simpson]) {
      const [coarse, fine] = await Promise.all([81, 161].map((n) => eigenvalues(uniform(n, -1, 1), rule.weights(uniform(n, -1, 1)), (s, t) => Math.exp(-Math.abs(s - t)))));
      omegas.forEach((omega, k) => {
        const exact = 2 / (omega * omega + 1);
        expect(Math.abs(fine[k] - exact) / exact, rule.id).toBeLessThan(1e-2);
        if (rule.id === 'trapezoid') expect(Math.abs((4 * fine[k] - coarse[k]) / 3 - exact) / exact).toBeLessThan(1e-5);
      });
    }
  });
});
