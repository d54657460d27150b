/**
 * The linear algebra of this process: OpenBLAS where it is there and proven to compute rightly on this processor, else the
 * portable routines. PENNYWEIGHT_LINALG=portable asks for the latter.
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
async function provenKernel(kernel: string | null): Promise<string> {
  const extension = extname(fileURLToPath(import.meta.url));
  const entry = fileURLToPath(new URL(`./proof-child${extension}`, import.meta.url));
  const loader =
    extension === '.ts' ? ['--import', pathToFileURL(createRequire(import.meta.url).resolve('tsx')).href] : [];
  const { LD_LIBRARY_PATH } = process.env;
  const env = { ...(LD_LIBRARY_PATH && { LD_LIBRARY_PATH }), ...(kernel && { [coreType]: kernel }) };
  const { stdout } = await promisify(execFile)(process.execPath, [...loader, entry], {
    env,
    timeout: proofMillis,
    killSignal: 'SIGKILL',
  });
  return stdout;
}

/** Why a kernel is not used: the child's last error, or the signal that ended it. */
function failureOf(kernel: string | null, cause: unknown): string {
  if (cause instanceof PennyweightError) return cause.message;
  const { stderr, signal } = cause as { stderr?: string; signal?: string | null };
  const said = /Error: (.*)/.exec(stderr ?? '')?.[1];
  return `the proof of ${kernel ?? 'the usual kernel'} failed: ${signal ? `ended by ${signal}` : (said ?? String(cause))}`;
}

/** Not remembered: each call proves and opens anew. */
export async function chooseLinearAlgebra(env: NodeJS.ProcessEnv): Promise<LinearAlgebra> {
  if (env.PENNYWEIGHT_LINALG === 'portable') return portableBecause('PENNYWEIGHT_LINALG asks for it');
  let reason = '';
  for (const kernel of kernelsFor(processorText(), env[coreType])) {
    try {
      const proven = await provenKernel(kernel);
      // The library reads the variable when it is loaded; a worker thread's own environment does not reach it.
      if (kernel && isMainThread) process.env[coreType] = kernel;
      const algebra = openOpenblas();
      if (algebra.kernel === proven) return algebra;
      reason = `this process runs the kernel ${algebra.kernel}, and ${proven} was proven: open the linear algebra in the main thread first`;
      break;
    } catch (cause) {
      reason = failureOf(kernel, cause);
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
