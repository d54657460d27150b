/**
 * Weighted spectrum and modes by the correlation matrix, streamed over tiles of rows.
 *   S = W^(1/2) X diag(sqrt a),  C = S* S,  C v = lambda v,  sigma = sqrt(lambda),  phi = X diag(sqrt a) v / sigma   (Phi* W Phi = I)
 * Sources: L. Sirovich, Quart. Appl. Math. 45 (1987) 561-590 (method of snapshots); K. Kunisch, S. Volkwein, SIAM J. Numer. Anal.
 * 40 (2002) 492-515 (time-quadrature weights).
 */
import { PennyweightError } from '#contract/error.ts';
import type { SpectrumResult } from '#contract/weights.ts';
import { accurateSum } from '../quadrature/stamps.ts';

/** Rows [from, from + rows) of X for all m snapshots: value (i, j) at [j * rows + i]. The receiver may overwrite it. */
export interface RowTile {
  from: number;
  rows: number;
  values: Float64Array;
}

export interface RowTileSource {
  /** m */
  snapshots: number;
  /** n */
  nodes: number;
  tiles(): AsyncIterable<RowTile>;
}

/** The routines that linalg/ provides; stated here so that the engine depends on nothing. */
export interface Algebra {
  accumulateGram(gram: Float64Array, m: number, tile: Float64Array, rows: number): void;
  eigSymmetric(matrix: Float64Array, m: number): { values: Float64Array; vectors: Float64Array };
  multiply(left: Float64Array, rows: number, inner: number, right: Float64Array, columns: number): Float64Array;
}

export interface Decomposition {
  result: SpectrumResult;
  /** length m, descending; entries below the floor are noise */
  singularValues: Float64Array;
  /** m x m, column k the eigenvector v of sigma_k; sign such that the largest entry of v is positive, which needs no further pass */
  vectors: Float64Array;
}

export const energyLevels = [0.9, 0.99, 0.999, 0.9999] as const;

/** Both kinds of weights must be finite, not negative and of the right length. Errors: 'weights-invalid' with index and value. */
function rootsOf(weights: Float64Array, length: number, what: string): Float64Array {
  if (weights.length !== length)
    throw new PennyweightError('weights-invalid', `There are ${weights.length} ${what} weights for ${length}.`, {
      expected: length,
      actual: weights.length,
    });
  return weights.map((weight, index) => {
    if (!(weight >= 0) || weight === Infinity)
      throw new PennyweightError(
        'weights-invalid',
        `${what} weight ${index} is ${weight}: a snapshot is multiplied by the square root of its weight, so it must be finite and not negative.`,
        { index, value: String(weight) },
      );
    return Math.sqrt(weight);
  });
}

/** Multiplies a tile by the roots in place; returns its largest magnitude. Errors: 'matrix-invalid' with row and column. */
function scale(tile: RowTile, m: number, timeRoots: Float64Array, spaceRoots: Float64Array): number {
  const { rows, values, from } = tile;
  let largest = 0;
  for (let j = 0; j < m; j++) {
    const a = timeRoots[j];
    const column = j * rows;
    for (let i = 0; i < rows; i++) {
      const scaled = values[column + i] * (a * spaceRoots[from + i]);
      if (!Number.isFinite(scaled))
        throw new PennyweightError(
          'matrix-invalid',
          `The matrix holds ${values[column + i]} at row ${from + i}, column ${j}: drop that snapshot or mask the node.`,
          { row: from + i, column: j, value: String(values[column + i]) },
        );
      values[column + i] = scaled;
      largest = Math.max(largest, Math.abs(scaled));
    }
  }
  return largest;
}

/** Least energy that is not blurred by gradual underflow: the smallest normal double over eps. */
const leastEnergy = 2 ** -1022 / Number.EPSILON;

/** Trace of C. Errors: 'matrix-invalid' where there is no energy, or its squares leave the range of double precision. */
function energyOf(gram: Float64Array, m: number, largest: number): number {
  const energy = accurateSum(Float64Array.from({ length: m }, (_, j) => gram[j * m + j]));
  if (largest === 0)
    throw new PennyweightError(
      'matrix-invalid',
      'All values are zero (after centring and weighing): there is no spectrum.',
      { energy: 0 },
    );
  if (!Number.isFinite(energy) || energy < leastEnergy)
    throw new PennyweightError(
      'matrix-invalid',
      `The largest weighted value is ${largest.toPrecision(3)}, whose square leaves the range of double precision: state the fields in another unit.`,
      { largest },
    );
  return energy;
}

/**
 * Singular values and eigenvectors of S. `source` n x m, `timeWeights` length m (unit of time), `spaceWeights` length n;
 * `dataEpsilon` is the rounding unit of the stored data (2^-23 for single precision). Any n and m, rank-deficient too.
 * The correlation route squares the condition number: below sqrt(eps) sigma_1 there is noise, and below dataEpsilon sigma_1 the
 * data's own rounding (common practice, no source); the larger of the two is the floor. Relative error of sigma_k above
 * it: about eps (sigma_1 / sigma_k)^2. C is summed tile by tile in the order of the source: the same tiles give the same bits.
 * Memory: one tile and m^2. Errors: 'weights-invalid', 'matrix-invalid' (non-finite value with row and column; all zero; no
 * snapshot; tiles that do not cover the nodes).
 */
export async function weightedSpectrum(
  source: RowTileSource,
  timeWeights: Float64Array,
  spaceWeights: Float64Array,
  algebra: Algebra,
  dataEpsilon = Number.EPSILON,
): Promise<Decomposition> {
  const { snapshots: m, nodes: n } = source;
  if (m === 0 || n === 0)
    throw new PennyweightError('matrix-invalid', `A matrix of ${n} rows and ${m} columns has no spectrum.`, {
      rows: n,
      columns: m,
    });
  const timeRoots = rootsOf(timeWeights, m, 'time');
  const spaceRoots = rootsOf(spaceWeights, n, 'space');
  const gram = new Float64Array(m * m);
  let largest = 0;
  let covered = 0;
  for await (const tile of source.tiles()) {
    largest = Math.max(largest, scale(tile, m, timeRoots, spaceRoots));
    algebra.accumulateGram(gram, m, tile.values, tile.rows);
    covered += tile.rows;
  }
  if (covered !== n)
    throw new PennyweightError('matrix-invalid', `The matrix has ${n} rows, and ${covered} were read.`, {
      expected: n,
      actual: covered,
    });
  const energy = energyOf(gram, m, largest);
  const { values, vectors } = algebra.eigSymmetric(gram, m);
  const singularValues = values.map((lambda) => Math.sqrt(Math.max(0, lambda)));
  const floor = Math.max(Math.sqrt(Number.EPSILON), dataEpsilon) * singularValues[0];
  for (let k = 0; k < m; k++) fixSign(vectors.subarray(k * m, (k + 1) * m));
  return { result: describe(singularValues, floor, energy), singularValues, vectors };
}

function fixSign(vector: Float64Array): void {
  let largest = 0;
  // A hair's breadth of tolerance, so that rounding does not decide between two entries of the same size.
  for (let j = 1; j < vector.length; j++) if (Math.abs(vector[j]) > Math.abs(vector[largest]) * (1 + 1e-9)) largest = j;
  if (vector[largest] < 0) for (let j = 0; j < vector.length; j++) vector[j] = -vector[j];
}

function describe(singularValues: Float64Array, floor: number, energy: number): SpectrumResult {
  const resolved = singularValues.findIndex((sigma) => sigma <= floor);
  const rank: Record<string, number> = {};
  for (const level of energyLevels) {
    let sum = 0;
    let r = 0;
    while (r < singularValues.length && sum < level * energy) sum += singularValues[r++] ** 2;
    rank[String(level)] = r;
  }
  return {
    singular_values: Array.from(singularValues),
    floor,
    resolved: resolved < 0 ? singularValues.length : resolved,
    energy,
    rank,
  };
}

/**
 * Modes 0..r-1 in a second pass, tile by tile: `rows` of Phi as values[k * rows + i]. r is cut to the resolved ones.
 * Phi* W Phi = I to about eps (sigma_1 / sigma_r)^2: to 1e-10 for modes with sigma above a thousandth of sigma_1, and hardly at
 * all close to the floor, where a decomposition that does not square the condition number is called for.
 */
export async function* modesOf(
  source: RowTileSource,
  timeWeights: Float64Array,
  decomposition: Decomposition,
  r: number,
  algebra: Algebra,
): AsyncIterable<RowTile> {
  const m = source.snapshots;
  const count = Math.min(r, decomposition.result.resolved);
  const timeRoots = rootsOf(timeWeights, m, 'time');
  const right = new Float64Array(m * count);
  for (let k = 0; k < count; k++)
    for (let j = 0; j < m; j++)
      right[k * m + j] = (timeRoots[j] * decomposition.vectors[k * m + j]) / decomposition.singularValues[k];
  for await (const tile of source.tiles())
    yield { from: tile.from, rows: tile.rows, values: algebra.multiply(tile.values, tile.rows, m, right, count) };
}

/**
 * Coefficients of the snapshots: x_j = sum_k phi_k b_kj with b_kj = sigma_k v_jk / sqrt(a_j); r x m row-major, 0 for a snapshot
 * of weight 0 (it did not take part). r is cut to the resolved ones.
 */
export function coefficientsOf(decomposition: Decomposition, timeWeights: Float64Array, r: number): Float64Array {
  const m = timeWeights.length;
  const count = Math.min(r, decomposition.result.resolved);
  const coefficients = new Float64Array(count * m);
  for (let k = 0; k < count; k++)
    for (let j = 0; j < m; j++) {
      if (timeWeights[j] > 0)
        coefficients[k * m + j] =
          (decomposition.singularValues[k] * decomposition.vectors[k * m + j]) / Math.sqrt(timeWeights[j]);
    }
  return coefficients;
}

/**
 * Relative projection error in the weighted norm by rank r = 0..m: sqrt(sum_{k>=r} lambda_k / sum lambda), the tail added from
 * its small end. All zero when the singular values are.
 */
export function projectionError(singularValues: ArrayLike<number>): Float64Array {
  const errors = new Float64Array(singularValues.length + 1);
  for (let r = singularValues.length - 1; r >= 0; r--) errors[r] = errors[r + 1] + singularValues[r] ** 2;
  const total = errors[0];
  return total > 0 ? errors.map((tail) => Math.sqrt(tail / total)) : errors;
}
