/** none: every node counts 1, what an unweighted SVD does; a sum over nodes instead of an integral. Common practice, no source. */
import { unevenAxes, type Grid } from './grid.ts';
import type { SpaceRule } from './space-rule.ts';

function remark(grid: Grid): string {
  if (grid.measure === null) return 'the grid is not known.';
  const uneven = unevenAxes(grid);
  return uneven.length === 0
    ? 'the grid is even.'
    : `but the grid is uneven along ${uneven.map((axis) => axis.name).join(', ')}, so densely meshed regions count too much.`;
}

export const none: SpaceRule = {
  id: 'none',
  title: 'Every node counts the same',
  source: 'common practice, no source',
  weights: (grid) => ({
    weights: new Float64Array(grid.total).fill(1),
    result: {
      chosen: 'none',
      why: `Every node counts the same; ${remark(grid)}`,
      sum: grid.total / Math.max(1, grid.components),
      measure: grid.measure,
    },
  }),
};
