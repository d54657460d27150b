/**
 * Which kernel OpenBLAS is to run. Debian's 0.3.21 does not know processors that are newer than itself and then takes its
 * oldest kernel, five times slower (measured: 16 GFLOP/s a thread against 81). So we choose from what the processor says
 * it can do. Source: the flags that the kernels are compiled with, OpenBLAS cmake/cc.cmake, from memory.
 */

const needs: [kernel: string, flags: string[]][] = [
  ['SkylakeX', ['avx512f', 'avx512bw', 'avx512cd', 'avx512dq', 'avx512vl']],
  ['Haswell', ['avx2', 'fma']],
];

/**
 * Kernels to try, best first; null leaves the choice to the library. `cpuinfo`: text of /proc/cpuinfo ('' when there is
 * none); `asked`: OPENBLAS_CORETYPE as it was set by whoever started us, which is obeyed.
 */
export function kernelsFor(cpuinfo: string, asked: string | undefined): (string | null)[] {
  if (asked) return [asked];
  const flags = new Set(/^flags\s*:(.*)$/m.exec(cpuinfo)?.[1].trim().split(/\s+/));
  return [...needs.filter(([, needed]) => needed.every((flag) => flags.has(flag))).map(([kernel]) => kernel), null];
}
