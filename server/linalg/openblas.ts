/**
 * BLAS and LAPACK of OpenBLAS through koffi, which checks neither types nor lengths: nothing but these wrappers calls it.
 * The Fortran entry points of LAPACK are in the same library (LAPACKE is not). Measured figures: shared/stack.
 */
import koffi from 'koffi';
import { PennyweightError } from '#contract/error.ts';
import { assertGram, assertProduct, assertSymmetric } from './array-shapes.ts';
import type { LinearAlgebra } from './linear-algebra.ts';

export interface Openblas extends LinearAlgebra {
  /** the kernel that the library chose or was told to take by OPENBLAS_CORETYPE, such as "SkylakeX" */
  readonly kernel: string;
}

/** Debian's libopenblas0-pthread */
const usualLibrary = 'libopenblas.so.0';
/** Enumerators of the C interface to BLAS, cblas.h. */
const columnMajor = 102;
const noTranspose = 111;
const transpose = 112;
const upper = 121;
/** Rows a call: the packed block stays in the cache, and sums of blocks round less than one long sum. */
const rowBlock = 2048;
/** 1 + 6 m + 2 m^2, the work space of dsyevd, must fit a 32-bit integer. */
const mostColumns = 32_000;

/** Pointers are typed arrays, used in place. */
const routines = {
  gram: 'void cblas_dsyrk(int, int, int, int, int, double, const double *, int, double, double *, int)',
  product:
    'void cblas_dgemm(int, int, int, int, int, int, double, const double *, int, const double *, int, double, double *, int)',
  eigen:
    'void dsyevd_(const char *, const char *, int *, double *, int *, double *, double *, int *, int *, int *, int *)',
  kernel: 'const char *openblas_get_corename()',
  config: 'const char *openblas_get_config()',
  threads: 'int openblas_get_num_threads()',
} as const;

type Routine = (...values: unknown[]) => unknown;

function load(library: string): Record<keyof typeof routines, Routine> {
  try {
    const { gram, product, eigen, kernel, config, threads } = routines;
    const handle = koffi.load(library);
    return {
      gram: handle.func(gram),
      product: handle.func(product),
      eigen: handle.func(eigen),
      kernel: handle.func(kernel),
      config: handle.func(config),
      threads: handle.func(threads),
    };
  } catch (cause) {
    throw new PennyweightError(
      'unavailable',
      `${library} cannot be used: install libopenblas0-pthread for fast linear algebra.`,
      { library },
      { cause },
    );
  }
}

/**
 * Loads the library into this process; the kernel is settled by that. Errors: 'unavailable' without the library.
 * Determinism: OpenBLAS gives each entry of a product to one thread, so the same calls on the same machine and number of
 * threads give the same bits; another kernel rounds differently.
 */
export function openOpenblas(library = usualLibrary): Openblas {
  const call = load(library);
  const kernel = String(call.kernel());
  const version = String(call.config()).split(' ').slice(0, 2).join(' ');

  return {
    name: `${version} (${kernel})`,
    kernel,
    describe: () => `${version}, kernel ${kernel}, ${String(call.threads())} threads`,

    accumulateGram(gram, m, tile, rows) {
      assertGram(gram, m, tile, rows);
      if (m === 0) return;
      for (let from = 0; from < rows; from += rowBlock) {
        const height = Math.min(rowBlock, rows - from);
        call.gram(columnMajor, upper, transpose, m, height, 1, tile.subarray(from), rows, 1, gram, m);
      }
      for (let k = 0; k < m; k++) for (let j = 0; j < k; j++) gram[j * m + k] = gram[k * m + j];
    },

    eigSymmetric(matrix, m) {
      assertSymmetric(matrix, m);
      if (m > mostColumns)
        throw new PennyweightError(
          'limit-exceeded',
          `The eigenproblem of ${m} snapshots is larger than ${mostColumns}.`,
          { columns: m },
        );
      const vectors = matrix.slice(),
        ascending = new Float64Array(m);
      const order = Int32Array.of(m),
        status = new Int32Array(1);
      const work = new Float64Array(1 + 6 * m + 2 * m * m),
        integers = new Int32Array(3 + 5 * m);
      const lengths = [Int32Array.of(work.length), Int32Array.of(integers.length)];
      call.eigen('V', 'U', order, vectors, order, ascending, work, lengths[0], integers, lengths[1], status);
      if (status[0] !== 0)
        throw new PennyweightError(
          'matrix-invalid',
          `The eigenproblem of ${m} snapshots did not converge (dsyevd, ${status[0]}).`,
          { info: status[0] },
        );
      return descending(ascending, vectors, m);
    },

    multiply(left, rows, inner, right, columns) {
      assertProduct(left, rows, inner, right, columns);
      const product = new Float64Array(rows * columns);
      if (rows > 0 && inner > 0 && columns > 0)
        call.product(
          columnMajor,
          noTranspose,
          noTranspose,
          rows,
          columns,
          inner,
          1,
          left,
          rows,
          right,
          inner,
          0,
          product,
          rows,
        );
      return product;
    },
  };
}

/** LAPACK orders eigenvalues upwards. */
function descending(
  values: Float64Array,
  vectors: Float64Array,
  m: number,
): { values: Float64Array; vectors: Float64Array } {
  const turned = new Float64Array(m * m);
  for (let k = 0; k < m; k++) turned.set(vectors.subarray((m - 1 - k) * m, (m - k) * m), k * m);
  return { values: values.reverse(), vectors: turned };
}
