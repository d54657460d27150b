/** Quadrature weights along one axis. */
import { PennyweightError } from '#contract/error.ts';

/** Index of the first node that is not finite or breaks strict monotony; -1 when none does. */
export function firstNotMonotone(nodes: Float64Array): number {
  const direction = Math.sign(nodes[nodes.length - 1] - nodes[0]);
  return nodes.findIndex((node, i) => !Number.isFinite(node) || (i > 0 && !((node - nodes[i - 1]) * direction > 0)));
}

/**
 * Trapezoid weights on strictly monotone nodes (length n, unit of the axis): (h_{i-1} + h_i)/2, h/2 at the ends, positive for
 * descending nodes too; their sum is the axis' length. One node: weight 1. Error O(h^2). Source: Abramowitz & Stegun 25.4.1.
 * A periodic axis whose end node is not repeated takes the closing interval as wide as the mean of the others, shared by
 * both ends. Errors: 'weights-invalid' with { axis, index, value } where nodes are not finite or not strictly monotone.
 */
export function axisTrapezoid(name: string, nodes: Float64Array, periodic = false): Float64Array {
  const n = nodes.length;
  const broken = firstNotMonotone(nodes);
  if (broken >= 0)
    throw new PennyweightError(
      'weights-invalid',
      `Axis ${name} is not strictly monotone at node ${broken} (${nodes[broken]}): correct the reading before weights are made from it.`,
      { axis: name, index: broken, value: String(nodes[broken]) },
    );
  const weights = new Float64Array(n);
  if (n === 1) return weights.fill(1);
  for (let i = 0; i + 1 < n; i++) {
    const half = Math.abs(nodes[i + 1] - nodes[i]) / 2;
    weights[i] += half;
    weights[i + 1] += half;
  }
  if (periodic) {
    const closing = Math.abs(nodes[n - 1] - nodes[0]) / (n - 1) / 2;
    weights[0] += closing;
    weights[n - 1] += closing;
  }
  return weights;
}
