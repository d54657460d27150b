import { describe, expect, it } from 'vitest';
import { gridDuplicateNodes } from '../../../../server/engine/checks/grid-duplicate-nodes.ts';
import { judge, makeSubject, movingValues, uniform, type AxisPlan } from './survey-factory.ts';

const found = (axis: AxisPlan) =>
  judge(
    gridDuplicateNodes,
    makeSubject({ fields: [{ values: movingValues(3, axis.nodes?.length ?? 3) }], axes: [axis] }),
  );
const list = (x: number[], y: number[]) =>
  judge(
    gridDuplicateNodes,
    makeSubject({
      fields: [{ values: movingValues(3, x.length), axes: ['time', 'node'] }],
      axes: [
        { name: 'node', nodes: null, count: x.length },
        { name: 'x', nodes: x },
        { name: 'y', nodes: y },
      ],
    }),
  );

/** Float32 wall grading at an offset: distinct neighbours a few units in the last place apart. */
const fineFloat32 = [...new Set(Float32Array.from({ length: 60 }, (_, i) => 1000 + 1e-4 * i))];

describe('grid/duplicate-nodes', () => {
  it.each<[string, AxisPlan, number[]]>([
    ['a block boundary stored twice', { name: 'x', nodes: [0, 0.25, 0.5, 0.5, 0.75, 1] }, [3]],
    ['a block boundary computed twice', { name: 'x', nodes: [0, 0.1, 0.2, 0.3, 0.1 + 0.2, 0.4, 0.5] }, [4]],
    ['a descending axis', { name: 'z', nodes: [3, 2, 2, 1] }, [2]],
    ['an axis collapsed to a point', { name: 'x', nodes: [1, 1, 1] }, [1, 2]],
    [
      'a float32 axis that lost its finest cells',
      { name: 'x', dtype: 'float32', nodes: [...Float32Array.from([1000, 1000 + 1e-6, 1001, 1002])] },
      [1],
    ],
  ])('fires for %s', (_name, axis, indices) => {
    const judgements = found(axis);
    expect(judgements).toHaveLength(1);
    expect(judgements[0].evidence).toMatchObject({ indices, count: indices.length });
  });

  it.each<[string, AxisPlan]>([
    ['a uniform axis', { name: 'x', nodes: uniform(9) }],
    ['a strongly graded wall', { name: 'y', nodes: Array.from({ length: 60 }, (_, i) => 1e-9 * 1.4 ** i) }],
    ['float32 nodes at the limit of the type', { name: 'x', dtype: 'float32', nodes: fineFloat32 }],
    ['one node', { name: 'x', nodes: [7] }],
    ['no node', { name: 'x', nodes: [] }],
    ['the repeated end of a periodic angle', { name: 'theta', nodes: uniform(9, 45) }],
  ])('is silent for %s', (_name, axis) => {
    expect(found(axis)).toEqual([]);
  });

  it('finds coincident nodes anywhere in a list, and only where all coordinates agree', () => {
    expect(list([0, 1, 0, 1, 0], [0, 0, 1, 1, 0])[0].evidence).toMatchObject({ indices: [4], count: 1 });
    expect(list([0, 1, 0, 1], [0, 0, 1, 1])).toEqual([]);
  });
});
