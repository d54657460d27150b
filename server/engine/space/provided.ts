/** provided: one weight a node (or one a value), read from the archive; shape, sign, zeros and the sum against the grid are checked. */
import { PennyweightError } from '#contract/error.ts';
import { accurateSum } from '../quadrature/stamps.ts';
import type { Grid } from './grid.ts';
import type { SpaceRule } from './space-rule.ts';

/** Share by which the sum may miss the measure of the grid before it is said: cell volumes differ from nodal weights at the borders. */
const sumTolerance = 0.01;

/** Number of zeros. Errors: 'weights-invalid' with { index, value }. */
function zerosOf(given: Float64Array): number {
  let zeros = 0;
  for (let i = 0; i < given.length; i++) {
    if (!Number.isFinite(given[i]) || given[i] < 0)
      throw new PennyweightError(
        'weights-invalid',
        `Provided spatial weight ${i} is ${given[i]}: weights must be finite and not negative.`,
        { index: i, value: String(given[i]) },
      );
    if (given[i] === 0) zeros++;
  }
  return zeros;
}

/** One weight a node, repeated for each component where that axis stands. */
function eachComponent(given: Float64Array, { axes, total, components }: Grid): Float64Array {
  const at = axes.findIndex((axis) => axis.name === 'component');
  const inner = axes.slice(at + 1).reduce((count, axis) => count * axis.count, 1);
  const spread = new Float64Array(total);
  for (let k = 0; k < total; k++) spread[k] = given[Math.floor(k / (inner * components)) * inner + (k % inner)];
  return spread;
}

export const provided: SpaceRule = {
  id: 'provided',
  title: 'Weights that the archive brings',
  source: 'the archive',
  weights(grid, given) {
    const { total, components, measure } = grid;
    const nodes = total / components;
    if (!given)
      throw new PennyweightError(
        'rule-not-admissible',
        'The archive brings no spatial weights: name their array in the reading or choose another space rule.',
        { rule: 'provided' },
      );
    if (given.length !== nodes && given.length !== total)
      throw new PennyweightError(
        'weights-invalid',
        `The archive gives ${given.length} spatial weights for ${nodes} nodes: correct the reading.`,
        { expected: nodes, actual: given.length },
      );
    const zeros = zerosOf(given);
    const each = given.length === total;
    const sum = accurateSum(given) / (each ? components : 1);
    if (!(sum > 0) || sum === Infinity)
      throw new PennyweightError(
        'weights-invalid',
        `The provided spatial weights sum to ${sum}: correct them or choose another space rule.`,
        { sum: String(sum) },
      );
    const off = measure ? Math.abs(sum - measure) / measure : 0;
    const remarks = [
      zeros > 0
        ? `${zeros} ${zeros === 1 ? 'node has weight zero and does' : 'nodes have weight zero and do'} not count`
        : '',
      off > sumTolerance ? `their sum differs by ${(off * 100).toPrecision(2)} % from the measure of the grid` : '',
    ];
    const why = `${['Given by the archive', ...remarks.filter((remark) => remark !== '')].join('; ')}.`;
    const weights = each ? Float64Array.from(given) : eachComponent(given, grid);
    return { weights, result: { chosen: 'provided', why, sum, measure } };
  },
};
