/**
 * The linear algebra of this process: OpenBLAS where it is there and proven to compute rightly on this processor, else the
 * portable routines. PENNYWEIGHT_LINALG=portable asks for the latter; PENNYWEIGHT_OPENBLAS names another library file.
 */
import { execFile } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { extname } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { promisify } from 'node:util';
import { isMainThread } from 'node:worker_threads';
import { PennyweightError } from '#contract/error.ts';
import { kernelsFor } from './kernel.ts';
import type { LinearAlgebra } from './linear-algebra.ts';
import { openOpenblas } from './openblas.ts';
import { portableBecause } from './portable.ts';

const coreType = 'OPENBLAS_CORETYPE';
const libraryName = 'PENNYWEIGHT_OPENBLAS';
const steering = /^(OPENBLAS_|OMP_|LD_LIBRARY_PATH$|PENNYWEIGHT_OPENBLAS$)/;
/** A proof takes half a second, most of it the start of Node.js; a machine may be busy. */
const proofMillis = 30_000;

function processorText(): string {
  try {
    return readFileSync('/proc/cpuinfo', 'latin1');
  } catch {
    return '';
  }
}

/**
 * Name of the kernel that the library ran in a child process, where a wrong one may crash or compute nonsense without harm.
 * Runs from source (.ts) and compiled (.js) alike. Errors: the child's own, or its end by a signal.
 */
async function provenKernel(kernel: string | null, environment: NodeJS.ProcessEnv): Promise<string> {
  const extension = extname(fileURLToPath(import.meta.url));
  const entry = fileURLToPath(new URL(`./proof-child${extension}`, import.meta.url));
  const loader =
    extension === '.ts' ? ['--import', pathToFileURL(createRequire(import.meta.url).resolve('tsx')).href] : [];
  // What steers the library here steers it there, and nothing else of ours: no secret, no option for Node.js.
  const env = Object.fromEntries(Object.entries(environment).filter(([name]) => steering.test(name)));
  if (kernel) env[coreType] = kernel;
  const { stdout } = await promisify(execFile)(process.execPath, [...loader, entry], {
    env,
    timeout: proofMillis,
    killSignal: 'SIGKILL',
  });
  return stdout;
}

/** What the child said last, or the signal that ended it; `lost` when no other kernel would help. See proof-child.ts. */
function failureOf(kernel: string | null, cause: unknown): { why: string; lost: boolean } {
  if (cause instanceof PennyweightError) return { why: cause.message, lost: true };
  const {
    stderr = '',
    signal = null,
    code = null,
  } = cause as { stderr?: string; signal?: string | null; code?: unknown };
  const said = signal ? `the process ended by ${signal}` : stderr.trim() || String(cause);
  if (code === 2) return { why: said, lost: true };
  return { why: `the kernel ${kernel ?? 'of its own choice'} failed its proof: ${said}`, lost: false };
}

/** Not remembered: each call proves and opens anew. */
export async function chooseLinearAlgebra(env: NodeJS.ProcessEnv): Promise<LinearAlgebra> {
  if (env.PENNYWEIGHT_LINALG === 'portable') return portableBecause('PENNYWEIGHT_LINALG asks for it');
  let reason = '';
  for (const kernel of kernelsFor(processorText(), env[coreType])) {
    try {
      const proven = await provenKernel(kernel, env);
      // The library reads the variable when it is loaded; a worker thread's own environment does not reach it.
      if (kernel && isMainThread) process.env[coreType] = kernel;
      const algebra = openOpenblas(env[libraryName]);
      if (algebra.kernel === proven) return algebra;
      return portableBecause(
        `this process runs the kernel ${algebra.kernel} and ${proven} was proven: choose in the main thread first`,
      );
    } catch (cause) {
      const { why, lost } = failureOf(kernel, cause);
      reason = why;
      if (lost) break;
    }
  }
  return portableBecause(reason);
}

let chosen: Promise<LinearAlgebra> | null = null;

/** `log` is told once what runs, and why when it is not the library. */
export function linearAlgebra(log?: (message: string) => void): Promise<LinearAlgebra> {
  chosen ??= chooseLinearAlgebra(process.env).then((algebra) => {
    log?.(`linear algebra: ${algebra.describe()}`);
    return algebra;
  });
  return chosen;
}
