/**
 * tensor: w = product over the axes of their trapezoid weights, on rectilinear node-centred grids of any number of axes;
 * each component of a vector counts as much as a scalar. Exact for multilinear functions on every cell, error O(h^2).
 * Source: product rules, A. H. Stroud, Approximate Calculation of Multiple Integrals, 1971, chapter 2.
 * Example: x = 0, 1, 3 and y = 0, 2 give 0.5 1.5 1 for each y.
 */
import { PennyweightError } from '#contract/error.ts';
import { accurateSum } from '../quadrature/stamps.ts';
import { axisTrapezoid } from './axis-weights.ts';
import { hasNodes } from './grid.ts';
import type { SpaceRule } from './space-rule.ts';

function outer(a: Float64Array, b: Float64Array): Float64Array {
  const product = new Float64Array(a.length * b.length);
  for (let i = 0; i < a.length; i++) for (let k = 0; k < b.length; k++) product[i * b.length + k] = a[i] * b[k];
  return product;
}

export const tensor: SpaceRule = {
  id: 'tensor',
  title: 'Product of the trapezoid weights along the axes',
  source: 'A. H. Stroud, Approximate Calculation of Multiple Integrals, 1971, chapter 2',
  weights({ axes, space, components, measure }) {
    const missing = space.find((axis) => !hasNodes(axis));
    if (space.length === 0 || missing)
      throw new PennyweightError(
        'rule-not-admissible',
        `The space rule "tensor" needs the coordinates of every axis${missing ? `, and axis ${missing.name} has none` : ''}: give them in the reading or choose "none".`,
        { rule: 'tensor', axis: missing?.name ?? null },
      );
    const factors = axes.map((axis) =>
      axis.name === 'component'
        ? new Float64Array(axis.count).fill(1)
        : axisTrapezoid(axis.name, axis.nodes!, axis.periodic === true),
    );
    const weights = factors.reduce(outer, Float64Array.of(1));
    const sum = accurateSum(weights) / components;
    if (!(sum > 0) || !Number.isFinite(sum))
      throw new PennyweightError(
        'weights-invalid',
        `The measure of the grid is ${sum} in double precision: state its coordinates in another unit.`,
        { sum: String(sum) },
      );
    const why = `Product of the trapezoid weights along ${space.map((axis) => axis.name).join(', ')}.`;
    return { weights, result: { chosen: 'tensor', why, sum, measure } };
  },
};
