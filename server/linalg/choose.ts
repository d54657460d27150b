/** The linear algebra of this process. */
import type { LinearAlgebra } from './linear-algebra.ts';
import { portable } from './portable.ts';

export async function linearAlgebra(): Promise<LinearAlgebra> {
  return portable;
}
