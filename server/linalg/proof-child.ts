/** Entry of the child process that tries the kernel named by OPENBLAS_CORETYPE: prints its name when it computes rightly. */
import { openOpenblas } from './openblas.ts';
import { prove } from './proof.ts';

const algebra = openOpenblas();
prove(algebra);
process.stdout.write(algebra.kernel);
