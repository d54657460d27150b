/** Each implementation by the one suite, and both against each other. The native one is missing only where the library is. */
import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { chooseLinearAlgebra } from '../../../server/linalg/choose.ts';
import { portable } from '../../../server/linalg/portable.ts';
import { conformance, filled } from './conformance.ts';

const installed = readdirSync('/usr/lib').some((folder) => existsSync(join('/usr/lib', folder, 'libopenblas.so.0')));
const chosen = await chooseLinearAlgebra({ ...process.env, PENNYWEIGHT_LINALG: '', PENNYWEIGHT_OPENBLAS: undefined });
const implementations = installed ? [portable, chosen] : [portable];

implementations.forEach(conformance);

describe(`${implementations.length} implementations ran: ${implementations.map((algebra) => algebra.name).join(', ')}`, () => {
  it('the library is used wherever it is installed', () => {
    expect(chosen.name.startsWith('OpenBLAS'), chosen.describe()).toBe(installed);
  });
  it.runIf(installed)('both agree to 1e-12 relative', () => {
    const m = 50, rows = 3001, tile = filled(m * rows, 11);
    const [a, b] = implementations.map((algebra) => {
      const gram = new Float64Array(m * m);
      algebra.accumulateGram(gram, m, tile, rows);
      return { gram, eigen: algebra.eigSymmetric(gram, m), product: algebra.multiply(tile, rows, m, gram, m) };
    });
    const apart = (x: Float64Array, y: Float64Array) => x.reduce((worst, value, i) => Math.max(worst, Math.abs(value - y[i])), 0) / x.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
    expect(apart(a.gram, b.gram)).toBeLessThan(1e-12);
    expect(apart(a.eigen.values, b.eigen.values)).toBeLessThan(1e-12);
    expect(apart(a.product, b.product)).toBeLessThan(1e-12);
    // Eigenvectors: the gaps of this spectrum are about a hundredth of its largest value.
    for (let k = 0; k < m; k++) {
      let cosine = 0;
      for (let i = 0; i < m; i++) cosine += a.eigen.vectors[k * m + i] * b.eigen.vectors[k * m + i];
      expect(Math.abs(Math.abs(cosine) - 1)).toBeLessThan(1e-12);
    }
  });
});
