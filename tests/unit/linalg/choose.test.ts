/** What runs where the library is missing, is not what it says, or computes wrongly. */
import { describe, expect, it } from 'vitest';
import { chooseLinearAlgebra, linearAlgebra } from '../../../server/linalg/choose.ts';
import { kernelsFor } from '../../../server/linalg/kernel.ts';
import { portable } from '../../../server/linalg/portable.ts';
import { prove } from '../../../server/linalg/proof.ts';

/** A proof starts a process, which takes long on a busy machine. */
const startMillis = 60_000;

describe('chooseLinearAlgebra', () => {
  it.each([
    ['when asked for', { PENNYWEIGHT_LINALG: 'portable' }, /since PENNYWEIGHT_LINALG asks for it/],
    ['without the library', { PENNYWEIGHT_OPENBLAS: 'libnowhere.so.0' }, /libnowhere\.so\.0 cannot be used: install libopenblas0-pthread/],
    ['with a library that has no BLAS in it', { PENNYWEIGHT_OPENBLAS: 'libm.so.6' }, /libm\.so\.6 cannot be used/],
  ])('takes the portable routines %s, and says why', async (_name, env, why) => {
    const algebra = await chooseLinearAlgebra(env);
    expect(algebra.name).toBe(portable.name);
    expect(algebra.describe()).toMatch(why);
  }, startMillis);
  it('tells the log once', async () => {
    const told: string[] = [];
    const [first, second] = await Promise.all([linearAlgebra((line) => told.push(line)), linearAlgebra((line) => told.push(line))]);
    expect(second).toBe(first);
    expect(told).toEqual([`linear algebra: ${first.describe()}`]);
  }, startMillis);
});

describe('kernelsFor', () => {
  const info = (...flags: string[]) => `processor\t: 0\nflags\t\t: fpu sse2 ${flags.join(' ')}\n\nprocessor\t: 1\n`;
  const skylake = ['avx512f', 'avx512bw', 'avx512cd', 'avx512dq', 'avx512vl'];
  it.each([
    ['all of AVX-512', info('avx2', 'fma', ...skylake), undefined, ['SkylakeX', 'Haswell', null]],
    ['AVX-512 without one of its parts', info('avx2', 'fma', ...skylake.slice(1)), undefined, ['Haswell', null]],
    ['AVX2', info('avx', 'avx2', 'fma'), undefined, ['Haswell', null]],
    ['AVX2 without fused multiply and add', info('avx', 'avx2', 'fma4'), undefined, [null]],
    ['another architecture', 'processor : 0\nFeatures : fp asimd\n', undefined, [null]],
    ['no such file', '', undefined, [null]],
    ['what was asked for', info('avx2', 'fma'), 'Zen', ['Zen']],
  ])('%s', (_name, text, asked, kernels) => expect(kernelsFor(text, asked)).toEqual(kernels));
});

describe('prove', () => {
  const off = (values: Float64Array, by: number) => values.map((value, i) => (i === values.length - 2 ? value + by : value));
  it.each([
    ['a correlation matrix', { ...portable, accumulateGram: (...call: Parameters<typeof portable.accumulateGram>) => { portable.accumulateGram(...call); call[0][call[0].length - 1] += 1; } }],
    ['a product', { ...portable, multiply: (...call: Parameters<typeof portable.multiply>) => off(portable.multiply(...call), 1) }],
    ['an eigenvalue', { ...portable, eigSymmetric: (matrix: Float64Array, m: number) => ({ ...portable.eigSymmetric(matrix, m), values: off(portable.eigSymmetric(matrix, m).values, 1e-9) }) }],
    ['an eigenvector', { ...portable, eigSymmetric: (matrix: Float64Array, m: number) => ({ ...portable.eigSymmetric(matrix, m), vectors: off(portable.eigSymmetric(matrix, m).vectors, NaN) }) }],
  ])('finds %s that is wrong in one entry', (what, algebra) => expect(() => prove(algebra)).toThrow(`computes ${what} wrongly`));
});
