/** cast: the type in which the matrix is stored; the largest rounding error is measured while building. */
import type { Step } from './step.ts';

export const cast: Step<'cast'> = {
  name: 'cast',
  rank: 4,
  apply(state, { type }) {
    state.type = type;
    return type === 'float32' ? 'Stored in single precision; the build reports the largest rounding error.' : 'Stored in double precision.';
  },
};
