/** Spatial weights of one field's nodes by a space rule. */
import { PennyweightError } from '#contract/error.ts';
import type { SpaceRuleId, SpaceRuleResult } from '#contract/weights.ts';
import { accurateSum } from '../quadrature/stamps.ts';
import type { SurveyAxis } from '../survey.ts';
import { axisTrapezoid } from './axis-weights.ts';

export interface SpaceWeights {
  /** length = nodes x components, C order of the reading's axes without time */
  weights: Float64Array;
  result: SpaceRuleResult;
}

/** Relative variation of a spacing above which a grid counts as uneven; above what single precision stores of a linear axis. */
const unevenness = 1e-4;

const isUneven = (nodes: Float64Array) => {
  let least = Infinity, most = 0;
  for (let i = 1; i < nodes.length; i++) {
    const h = Math.abs(nodes[i] - nodes[i - 1]);
    least = Math.min(least, h);
    most = Math.max(most, h);
  }
  return nodes.length > 2 && most > least * (1 + unevenness);
};

/**
 * `axes`: the field's space axes in storage order, with a 'component' axis where it stands; `provided`: weights of the archive,
 * one a node, when it brings any.
 *   none      1 each
 *   tensor    product of the axes' trapezoid weights (rectilinear, node-centred); components count 1
 *   provided  as given, after shape, sign and zeros were checked
 * Errors: 'rule-not-admissible' when the rule needs what the archive does not have; 'weights-invalid' with index and value.
 */
export function spaceWeights(rule: SpaceRuleId, axes: SurveyAxis[], provided: Float64Array | null): SpaceWeights {
  const grid = axes.filter((axis) => axis.name !== 'component');
  const total = axes.reduce((n, axis) => n * axis.count, 1);
  const known = grid.length > 0 && grid.every((axis) => axis.nodes !== null && axis.name !== 'node');
  const measure = known ? grid.reduce((product, axis) => product * axisSum(axis), 1) : null;
  if (rule === 'none') {
    const uneven = known ? grid.filter((axis) => isUneven(axis.nodes!)).map((axis) => axis.name) : [];
    const why = uneven.length > 0 ? `Every node counts the same although the grid is uneven along ${uneven.join(', ')}: densely meshed regions count too much.` : known ? 'Every node counts the same; the grid is even.' : 'Every node counts the same; the grid is not known.';
    return { weights: new Float64Array(total).fill(1), result: { chosen: 'none', why, sum: total, measure } };
  }
  if (rule === 'tensor') {
    const missing = grid.find((axis) => axis.nodes === null || axis.name === 'node');
    if (grid.length === 0 || missing) {
      throw new PennyweightError('rule-not-admissible', `The space rule "tensor" needs the coordinates of every axis${missing ? `, and axis ${missing.name} has none` : ''}: give them in the reading or choose "none".`, { rule, axis: missing?.name });
    }
    const factors = axes.map((axis) => (axis.name === 'component' ? new Float64Array(axis.count).fill(1) : axisTrapezoid(axis.name, axis.nodes!, axis.periodic === true)));
    const weights = factors.reduce((product, factor) => outer(product, factor), Float64Array.of(1));
    const components = axes.find((axis) => axis.name === 'component')?.count ?? 1;
    return { weights, result: { chosen: 'tensor', why: `Product of the trapezoid weights along ${grid.map((axis) => axis.name).join(', ')}.`, sum: accurateSum(weights) / components, measure } };
  }
  if (rule === 'provided') return providedSpaceWeights(axes, total, provided, measure);
  throw new PennyweightError('rule-not-admissible', `The space rule "${rule}" is not available for this archive: choose none, tensor or provided.`, { rule });
}

const axisSum = (axis: SurveyAxis) => (axis.count === 1 ? 1 : accurateSum(axisTrapezoid(axis.name, axis.nodes!, axis.periodic === true)));

function outer(a: Float64Array, b: Float64Array): Float64Array {
  const product = new Float64Array(a.length * b.length);
  for (let i = 0; i < a.length; i++) for (let k = 0; k < b.length; k++) product[i * b.length + k] = a[i] * b[k];
  return product;
}

function providedSpaceWeights(axes: SurveyAxis[], total: number, given: Float64Array | null, measure: number | null): SpaceWeights {
  if (!given) throw new PennyweightError('rule-not-admissible', 'The archive brings no spatial weights: name their array in the reading or choose another space rule.', { rule: 'provided' });
  const component = axes.findIndex((axis) => axis.name === 'component');
  const components = component < 0 ? 1 : axes[component].count;
  const nodes = total / components;
  if (given.length !== nodes && given.length !== total) {
    throw new PennyweightError('weights-invalid', `The archive gives ${given.length} spatial weights for ${nodes} nodes: correct the reading.`, { expected: nodes, actual: given.length });
  }
  let zeros = 0;
  for (let i = 0; i < given.length; i++) {
    if (!Number.isFinite(given[i]) || given[i] < 0) throw new PennyweightError('weights-invalid', `Provided spatial weight ${i} is ${given[i]}: weights must be finite and not negative.`, { index: i, value: String(given[i]) });
    if (given[i] === 0) zeros++;
  }
  if (zeros === given.length) throw new PennyweightError('weights-invalid', 'All provided spatial weights are zero.', { count: zeros });
  const inner = component < 0 ? 1 : axes.slice(component + 1).reduce((n, axis) => n * axis.count, 1);
  const weights = given.length === total ? Float64Array.from(given) : Float64Array.from({ length: total }, (_, k) => given[Math.floor(k / (inner * components)) * inner + (k % inner)]);
  const sum = accurateSum(given) / (given.length === total ? components : 1);
  const off = measure ? Math.abs(sum - measure) / measure : 0;
  const why = `Given by the archive${zeros ? `; ${zeros} nodes have weight zero and do not count` : ''}${off > 0.01 ? `; their sum differs by ${(off * 100).toPrecision(2)} % from the measure of the grid` : ''}.`;
  return { weights, result: { chosen: 'provided', why, sum, measure } };
}
