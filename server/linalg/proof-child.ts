/**
 * Entry of the child process that tries the kernel named by OPENBLAS_CORETYPE: prints the name of the kernel that ran when
 * it computes rightly. Status 2: there is no such library, whatever the kernel.
 */
import { PennyweightError } from '#contract/error.ts';
import { openOpenblas } from './openblas.ts';
import { prove } from './proof.ts';

try {
  const algebra = openOpenblas(process.env.PENNYWEIGHT_OPENBLAS);
  prove(algebra);
  process.stdout.write(algebra.kernel);
} catch (error) {
  if (!(error instanceof PennyweightError)) throw error;
  process.stderr.write(error.message);
  process.exitCode = 'library' in error.details ? 2 : 1;
}
