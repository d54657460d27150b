/**
 * grid/missing: no coordinates, cell edges or weights, so the inner product of two snapshots is unknown. Axes of length 0
 * or 1 need none, nor do records of single values. Provided weights (one a node) are enough.
 */
import type { Check } from './check.ts';
import { gridAxes, nodeCoordinates } from './space-axes.ts';

export const gridMissing: Check = {
  id: 'grid/missing',
  severity: 'caution',
  title: 'The grid is known',
  source: 'common practice, no source',
  thresholds: {},
  judge({ survey }) {
    if (!survey || survey.spaceWeights || survey.reading.fields.length === 0) return [];
    const unknown = gridAxes(survey).filter((axis) => axis.count > 1 && !axis.nodes && !axis.edges);
    const node = survey.axes.find((axis) => axis.name === 'node');
    const usesNode = survey.reading.fields.some((field) => field.axes.includes('node'));
    if (node && usesNode && node.count > 1 && !node.nodes && !node.edges && nodeCoordinates(survey).length === 0)
      unknown.push(node);
    if (unknown.length === 0) return [];
    const names = unknown.map((axis) => axis.name);
    return [
      {
        path: null,
        message: `No coordinates, cell edges or weights for the ${names.length > 1 ? 'axes' : 'axis'} ${unknown.map((axis) => `${axis.name} (${axis.count} nodes)`).join(', ')}: the inner product is unknown; add the grid, or accept equal weights.`,
        evidence: { count: names.length, axes: names },
        remedy: null,
      },
    ];
  },
};
