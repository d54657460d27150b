import { describe, expect, it } from 'vitest';
import { gridNotMonotone } from '../../../../server/engine/checks/grid-not-monotone.ts';
import { judge, makeSubject, movingValues, uniform, type AxisPlan } from './survey-factory.ts';

const found = (axis: AxisPlan) =>
  judge(gridNotMonotone, makeSubject({ fields: [{ values: movingValues(3, axis.nodes?.length ?? 3) }], axes: [axis] }));

describe('grid/not-monotone', () => {
  it.each<[string, AxisPlan, number[]]>([
    ['an axis that turns back', { name: 'x', nodes: [0, 1, 3, 2, 4] }, [3]],
    ['a descending axis that turns', { name: 'z', nodes: [4, 3, 3.5, 2, 1] }, [2]],
    ['coordinates that run through a mesh', { name: 'x', nodes: [0, 1, 2, 0, 1, 2, 0, 1, 2] }, [3, 6]],
    ['a longitude that wraps', { name: 'lon', nodes: [180, 270, 0, 90] }, [2]],
    ['a coordinate that is no number', { name: 'x', nodes: [0, NaN, 2] }, [1]],
    ['cell edges that turn back', { name: 'x', edges: [0, 1, 0.5, 2] }, [2]],
  ])('fires for %s', (_name, axis, indices) => {
    const judgements = found(axis);
    expect(judgements).toHaveLength(1);
    expect(judgements[0].evidence).toMatchObject({ indices, axis: axis.name });
  });

  it("says where it turns, in the axis' unit", () => {
    expect(found({ name: 'x', nodes: [0, 1, 3, 2, 4] })[0].message).toContain('first at index 3 from 3 m to 2 m');
  });

  it.each<[string, AxisPlan]>([
    ['an ascending axis', { name: 'x', nodes: uniform(9) }],
    ['a descending axis', { name: 'z', nodes: [3, 2, 1, 0] }],
    ['a strongly graded axis', { name: 'y', nodes: Array.from({ length: 40 }, (_, i) => 1e-6 * 1.4 ** i) }],
    [
      'Chebyshev points from 1 to -1',
      { name: 'x', nodes: Array.from({ length: 17 }, (_, i) => Math.cos((Math.PI * i) / 16)) },
    ],
    ['equal neighbours', { name: 'x', nodes: [0, 1, 1, 2] }],
    ['one node', { name: 'x', nodes: [7] }],
    ['no node', { name: 'x', nodes: [] }],
    ['unknown coordinates', { name: 'x', nodes: null, count: 4 }],
  ])('is silent for %s', (_name, axis) => {
    expect(found(axis)).toEqual([]);
  });

  it('asks no order of a list of nodes', () => {
    const fields = [{ values: movingValues(3), axes: ['time' as const, 'node' as const] }];
    expect(
      judge(
        gridNotMonotone,
        makeSubject({
          fields,
          axes: [
            { name: 'node', nodes: null, count: 4 },
            { name: 'x', nodes: [0, 1, 0, 1] },
            { name: 'y', nodes: [1, 0, 0, 1] },
          ],
        }),
      ),
    ).toEqual([]);
  });
});
