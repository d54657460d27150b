/** What every routine asks of its arrays before it touches them: a foreign function would write beyond a short one. */
import { PennyweightError } from '#contract/error.ts';

/** Sizes are handed to BLAS and LAPACK as 32-bit integers. */
const largest = 2 ** 31 - 1;

function assertSizes(sizes: Record<string, number>): void {
  for (const [name, size] of Object.entries(sizes))
    if (!Number.isInteger(size) || size < 0 || size > largest)
      throw new PennyweightError('matrix-invalid', `A matrix cannot have ${size} ${name}.`, { [name]: size });
}

function assertDoubles(what: string, values: unknown, rows: number, columns: number, exact: boolean): void {
  if (!(values instanceof Float64Array))
    throw new PennyweightError('matrix-invalid', `The ${what} must be in double precision.`, { array: what });
  const expected = rows * columns;
  if (exact ? values.length !== expected : values.length < expected)
    throw new PennyweightError(
      'matrix-invalid',
      `The ${what} has ${values.length} values and ${rows} x ${columns} need ${expected}.`,
      { array: what, expected, actual: values.length },
    );
}

export function assertGram(gram: Float64Array, m: number, tile: Float64Array, rows: number): void {
  assertSizes({ columns: m, rows });
  assertDoubles('correlation matrix', gram, m, m, true);
  assertDoubles('tile', tile, rows, m, false);
}

/** Also that every entry is finite: LAPACK may not come back from a matrix that holds NaN. */
export function assertSymmetric(matrix: Float64Array, m: number): void {
  assertSizes({ columns: m });
  assertDoubles('symmetric matrix', matrix, m, m, true);
  if (m === 0) throw new PennyweightError('matrix-invalid', 'A matrix of 0 x 0 has no eigenvalues.', { columns: m });
  const at = matrix.findIndex((value) => !Number.isFinite(value));
  if (at >= 0)
    throw new PennyweightError(
      'matrix-invalid',
      `Entry ${at % m}, ${Math.floor(at / m)} of the symmetric matrix is ${matrix[at]}.`,
      {
        row: at % m,
        column: Math.floor(at / m),
      },
    );
}

export function assertProduct(
  left: Float64Array,
  rows: number,
  inner: number,
  right: Float64Array,
  columns: number,
): void {
  assertSizes({ rows, 'inner columns': inner, columns });
  assertDoubles('left factor', left, rows, inner, false);
  assertDoubles('right factor', right, inner, columns, false);
}
