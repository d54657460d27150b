import { describe, expect, it } from 'vitest';
import { weighStep } from '#contract/recipe.ts';
import { gridUneven } from '../../../../server/engine/checks/grid-uneven.ts';
import { judge, makeSubject, movingValues, uniform, type AxisPlan } from './survey-factory.ts';

const found = (axis: AxisPlan) =>
  judge(gridUneven, makeSubject({ fields: [{ values: movingValues(3, axis.nodes?.length ?? 3) }], axes: [axis] }));
const linspace = (from: number, to: number, count: number) =>
  Array.from({ length: count }, (_, i) => from + ((to - from) * i) / (count - 1));

describe('grid/uneven', () => {
  it('says by how much', () => {
    const [judgement, ...more] = found({ name: 'y', nodes: [0, 1, 2, 4, 8] });
    expect(more).toEqual([]);
    expect(judgement.evidence).toMatchObject({ axis: 'y', narrowest: 1, widest: 4, ratio: 4 });
    expect(judgement.message).toContain('4 to 1');
    expect(weighStep.parse({ step: judgement.remedy!.step, ...judgement.remedy!.parameters }).space).toBe('tensor');
  });

  it.each<[string, AxisPlan]>([
    ['a graded axis', { name: 'y', nodes: Array.from({ length: 30 }, (_, i) => 1.1 ** i) }],
    [
      'Chebyshev points, descending',
      { name: 'x', nodes: Array.from({ length: 17 }, (_, i) => Math.cos((Math.PI * i) / 16)) },
    ],
    ['uneven cell edges', { name: 'x', edges: [0, 1, 3, 4] }],
    [
      'a graded axis in float32',
      { name: 'y', dtype: 'float32', nodes: [...Float32Array.from({ length: 30 }, (_, i) => 1.01 ** i)] },
    ],
  ])('fires for %s', (_name, axis) => {
    expect(found(axis)).toHaveLength(1);
  });

  it.each<[string, AxisPlan]>([
    ['a float32 linspace', { name: 'x', dtype: 'float32', nodes: [...Float32Array.from(linspace(-3, 7, 301))] }],
    ['a float32 linspace stored as doubles', { name: 'x', nodes: [...Float32Array.from(linspace(0, 1, 101))] }],
    ['a double linspace', { name: 'x', nodes: linspace(0, 1, 1001) }],
    ['a descending linspace', { name: 'z', nodes: linspace(1, -1, 65) }],
    ['coordinates printed with 4 decimals', { name: 'x', nodes: linspace(0, 1, 64).map((x) => Number(x.toFixed(4))) }],
    ['the angles of a periodic axis', { name: 'theta', nodes: linspace(0, 2 * Math.PI, 65).slice(0, 64) }],
    ['an axis that turns back', { name: 'x', nodes: [0, 2, 1, 3] }],
    ['two nodes', { name: 'x', nodes: [0, 5] }],
    ['one node', { name: 'x', nodes: [5] }],
    ['no node', { name: 'x', nodes: [] }],
    ['unknown coordinates', { name: 'x', nodes: null, count: 4 }],
  ])('is silent for %s', (_name, axis) => {
    expect(found(axis)).toEqual([]);
  });

  it('does not judge the coordinates of a list of nodes', () => {
    const fields = [{ values: movingValues(3), axes: ['time' as const, 'node' as const] }];
    expect(
      judge(
        gridUneven,
        makeSubject({
          fields,
          axes: [
            { name: 'node', nodes: null, count: 4 },
            { name: 'x', nodes: [0, 1, 5, 6] },
          ],
        }),
      ),
    ).toEqual([]);
    expect(judge(gridUneven, makeSubject({ axes: [{ name: 'x', nodes: uniform(4) }] }))).toEqual([]);
  });
});
