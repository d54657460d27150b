/**
 * centre: what is subtracted. The weighted mean is sum_j a_j u_j / sum_j a_j over all columns (or those of a run), with the weights of
 * the weigh step, wherever that stands; it is computed while building.
 */
import type { Step } from './step.ts';

const words = {
  nothing: 'Nothing is subtracted.',
  'weighted-mean': 'The weighted time mean over all columns is subtracted.',
  'weighted-mean-per-run': "Each run's own weighted time mean is subtracted.",
  'first-snapshot': 'The first column is subtracted from all.',
};

export const centre: Step<'centre'> = {
  name: 'centre',
  rank: 3,
  apply(state, { subtract }) {
    state.centre = subtract;
    return words[subtract];
  },
};
