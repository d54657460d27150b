import { describe, expect, it } from 'vitest';
import type { CheckSubject } from '../../../../server/engine/checks/check.ts';
import { gridDiffers } from '../../../../server/engine/checks/grid-differs.ts';
import { gridOf } from '../../../../server/engine/checks/space-axes.ts';
import { judge, makeSubject, movingValues, uniform, type AxisPlan } from './survey-factory.ts';

type OtherAxis = CheckSubject['otherGrids'][number]['axes'][number];
const other = (nodes: ArrayLike<number>, more: Partial<OtherAxis> = {}) => ({
  archive: 'run-b',
  axes: [{ name: 'x', nodes: Float64Array.from(nodes), count: nodes.length, ...more }],
});
const found = (axis: AxisPlan, ...otherGrids: CheckSubject['otherGrids']) =>
  judge(
    gridDiffers,
    makeSubject(
      { fields: [{ values: movingValues(3, axis.nodes?.length ?? axis.count ?? 0) }], axes: [axis] },
      { otherGrids },
    ),
  );
const nodes = Array.from({ length: 21 }, (_, i) => Math.sin(i / 20));

describe('grid/differs', () => {
  it('fires when nodes differ, and says where', () => {
    const moved = nodes.map((x, i) => (i === 7 ? x + 1e-4 : x));
    const [judgement] = found({ name: 'x', nodes }, other(moved));
    expect(judgement.message).toContain('node 7 of the axis x');
    expect(judgement.evidence).toMatchObject({ count: 1, archives: ['run-b'] });
  });

  it.each<[string, OtherAxis[]]>([
    ['another length', other(uniform(20)).axes],
    ['another unit', other(nodes.map((x) => 1000 * x)).axes],
    ['the reverse direction', other([...nodes].reverse()).axes],
    ['an axis less', []],
    ['an axis more', [...other(nodes).axes, { name: 'y', nodes: null, count: 3 }]],
  ])('fires for %s', (_name, axes) => {
    expect(found({ name: 'x', nodes }, { archive: 'run-b', axes })).toHaveLength(1);
  });

  it.each<[string, AxisPlan, CheckSubject['otherGrids']]>([
    ['the same grid', { name: 'x', nodes }, [other(nodes)]],
    [
      'the same grid stored as float32 there',
      { name: 'x', nodes },
      [other(Float32Array.from(nodes), { dtype: 'float32' })],
    ],
    ['the same grid stored as float32 there, type unknown', { name: 'x', nodes }, [other(Float32Array.from(nodes))]],
    [
      'the same grid stored as float32 here',
      { name: 'x', nodes: [...Float32Array.from(nodes)], dtype: 'float32' },
      [other(nodes, { dtype: 'float64' })],
    ],
    [
      'rounding of double',
      { name: 'x', nodes },
      [
        other(
          nodes.map((x) => (x / 3) * 3),
          { dtype: 'float64' },
        ),
      ],
    ],
    ['no other archive', { name: 'x', nodes }, []],
    [
      'coordinates unknown there',
      { name: 'x', nodes },
      [{ archive: 'run-b', axes: [{ name: 'x', nodes: null, count: 21 }] }],
    ],
    ['coordinates unknown here', { name: 'x', nodes: null, count: 21 }, [other(nodes)]],
  ])('is silent for %s', (_name, axis, grids) => {
    expect(found(axis, ...grids)).toEqual([]);
  });

  it('compares lists of nodes by their coordinates, as gridOf hands them over', () => {
    const listed = (y: number[]) =>
      makeSubject({
        fields: [{ values: movingValues(3), axes: ['time', 'node'] }],
        axes: [
          { name: 'node', nodes: null, count: 4 },
          { name: 'x', nodes: [0, 1, 0, 1] },
          { name: 'y', nodes: y },
        ],
      });
    const grid = gridOf(listed([0, 0, 1, 1]).survey!);
    expect(grid.map((axis) => axis.name)).toEqual(['x', 'y', 'node']);
    const compared = (y: number[]) =>
      judge(gridDiffers, { ...listed(y), otherGrids: [{ archive: 'run-b', axes: grid }] });
    expect(compared([0, 0, 1, 1])).toEqual([]);
    expect(compared([0, 0, 1, 2])[0].message).toContain('node 3 of the axis y');
  });

  it('does not take a float64 difference for rounding', () => {
    const shifted = nodes.map((x) => x + 1e-9);
    expect(found({ name: 'x', nodes }, other(shifted, { dtype: 'float64' }))).toHaveLength(1);
  });

  it('makes one finding of many archives', () => {
    const [judgement, ...more] = found(
      { name: 'x', nodes },
      ...Array.from({ length: 30 }, () => other(uniform(21))),
      other(nodes),
    );
    expect(more).toEqual([]);
    expect(judgement.evidence.count).toBe(30);
    expect(judgement.evidence.archives).toHaveLength(20);
  });
});
