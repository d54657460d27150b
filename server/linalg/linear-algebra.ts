/** The few dense routines that the spectrum needs. Column-major throughout: entry (i, j) of an r x c matrix is at [j * r + i]. */

export interface LinearAlgebra {
  /** which implementation it is, for pages and reports */
  readonly name: string;
  /** One line for a log: library, version, kernel and threads, or why the portable routines run. */
  describe(): string;
  /**
   * gram += tile* tile. `tile` is rows x m, `gram` m x m with both triangles filled. Sums in double precision and in a
   * fixed order: the same calls give the same bits. Errors: 'matrix-invalid' for types and lengths that do not fit.
   */
  accumulateGram(gram: Float64Array, m: number, tile: Float64Array, rows: number): void;
  /**
   * Eigenvalues descending and orthonormal eigenvectors as columns of a symmetric matrix, which stays as it is.
   * Errors: 'matrix-invalid' for a length that does not fit or an entry that is not finite.
   */
  eigSymmetric(matrix: Float64Array, m: number): { values: Float64Array; vectors: Float64Array };
  /** left (rows x inner) times right (inner x columns). Errors: 'matrix-invalid' for types and lengths that do not fit. */
  multiply(left: Float64Array, rows: number, inner: number, right: Float64Array, columns: number): Float64Array;
}
