import { describe, expect, it } from 'vitest';
import { gridMissing } from '../../../../server/engine/checks/grid-missing.ts';
import { judge, makeSubject, movingValues, uniform, type RecordPlan } from './survey-factory.ts';

const nodeField = { values: movingValues(3), axes: ['time' as const, 'node' as const] };

describe('grid/missing', () => {
  it.each<[string, RecordPlan, string[]]>([
    ['an axis without coordinates', { axes: [{ name: 'x', nodes: null, count: 4 }] }, ['x']],
    [
      'two such axes, in one finding',
      {
        fields: [{ values: movingValues(3, 6) }],
        axes: [
          { name: 'y', nodes: null, count: 2 },
          { name: 'x', nodes: null, count: 3 },
        ],
      },
      ['y', 'x'],
    ],
    [
      'one of two axes',
      {
        fields: [{ values: movingValues(3, 6) }],
        axes: [
          { name: 'y', nodes: [0, 1] },
          { name: 'x', nodes: null, count: 3 },
        ],
      },
      ['x'],
    ],
    [
      'a snapshot matrix of bare nodes',
      { fields: [nodeField], axes: [{ name: 'node', nodes: null, count: 4 }] },
      ['node'],
    ],
  ])('fires for %s', (_name, plan, axes) => {
    const [found, ...more] = judge(gridMissing, makeSubject(plan));
    expect(more).toEqual([]);
    expect(found.evidence).toEqual({ count: axes.length, axes });
  });

  it.each<[string, RecordPlan]>([
    ['coordinates', {}],
    ['cell edges', { axes: [{ name: 'x', edges: uniform(5) }] }],
    [
      'weights for bare nodes',
      { fields: [nodeField], axes: [{ name: 'node', nodes: null, count: 4 }], spaceWeights: [1, 1, 1, 1] },
    ],
    [
      'nodes with coordinates of their own',
      {
        fields: [nodeField],
        axes: [
          { name: 'node', nodes: null, count: 4 },
          { name: 'x', nodes: [0, 1, 0, 1] },
          { name: 'y', nodes: [0, 0, 1, 1] },
        ],
      },
    ],
    ['an axis of one node', { fields: [{ values: movingValues(3, 1) }], axes: [{ name: 'x', nodes: null, count: 1 }] }],
    ['an axis of length 0', { fields: [{ values: [[], []] }], axes: [{ name: 'x', nodes: null, count: 0 }] }],
    ['values at one point', { fields: [{ values: movingValues(3, 1), axes: ['time'] }], axes: [] }],
    [
      'components',
      {
        fields: [{ values: movingValues(3, 12), axes: ['time', 'x', 'component'] }],
        axes: [
          { name: 'x', nodes: uniform(4) },
          { name: 'component', nodes: null, count: 3 },
        ],
      },
    ],
    ['no field', { fields: [], axes: [{ name: 'x', nodes: null, count: 4 }] }],
  ])('is silent for %s', (_name, plan) => {
    expect(judge(gridMissing, makeSubject(plan))).toEqual([]);
  });
});
