/** Proposed readings of archives that differ in one thing only: what speaks for a role, and near misses. */
import { describe, expect, it } from 'vitest';
import type { ArrayInfo, Reading } from '#contract/reading.ts';
import { mismatchesOf } from '../../../server/reading/fit.ts';
import { propose } from '../../../server/reading/proposal/propose.ts';
import { array, contentsOf, evidenceFor } from './made-contents.ts';

function proposed(arrays: ArrayInfo[], more: { unlimited?: Record<string, boolean[]>; vectors?: Record<string, number[]>; attributes?: Record<string, number> } = {}): Reading {
  const contents = contentsOf(arrays, more.attributes);
  const reading = propose(contents, evidenceFor(contents, more.vectors, more.unlimited));
  expect(mismatchesOf(contents, reading).filter(({ message }) => reading.fields.length > 0 || !message.includes('names no field'))).toEqual([]);
  return reading;
}

const axesOf = (reading: Reading) => reading.fields.map(({ name, axes }) => `${name}(${axes.join(',')})`);
const roleOf = (reading: Reading, path: string) => reading.roles.find((role) => role.path === path)?.role;
const grid = [array('/x', [8]), array('/y', [6])];

describe('the time axis', () => {
  it.each(['/t', '/time', '/Time', '/times', '/timeVector', '/snapshot_times', '/sim_time', '/results/t_save'])('is found by the vector %s', (path) => {
    const reading = proposed([array('/u', [5, 6, 8]), array(path, [5]), ...grid]);
    expect([reading.time, axesOf(reading)]).toEqual([{ kind: 'array', path, unit: null }, ['u(time,y,x)']]);
  });

  it.each(['/dt', '/time_step', '/end_time', '/time_weights', '/temperature', '/weights_t'])('is not named by %s', (path) => {
    expect(proposed([array('/u', [5, 6, 8]), array(path, [5]), ...grid], { vectors: { [path]: [1, 1, 1, 1, 1] } }).time).toBeNull();
  });

  it('is found by attributes alone', () => {
    const reading = proposed([array('/u', [5, 6, 8]), array('/q', [5], { attributes: { units: 'seconds since 2001-01-01' } }), ...grid]);
    expect(reading.time).toEqual({ kind: 'array', path: '/q', unit: 'seconds since 2001-01-01' });
  });

  it('is found by the only increasing vector that fits, and that is called uncertain', () => {
    const reading = proposed([array('/u', [5, 6, 8]), array('/q', [5]), ...grid]);
    expect(reading.time).toMatchObject({ path: '/q' });
    expect(reading.roles.find(({ path }) => path === '/q')?.why).toMatch(/uncertain/);
    expect(proposed([array('/u', [5, 6, 8]), array('/q', [5]), ...grid], { vectors: { '/q': [1, 3, 2, 4, 5] } }).time).toBeNull();
  });

  it('is known though stamps jump back, as after a restart', () => {
    expect(proposed([array('/u', [5, 6, 8]), array('/t', [5]), ...grid], { vectors: { '/t': [0, 1, 2, 1, 2] } }).time).toMatchObject({ path: '/t' });
  });

  it('is the last one when its length says so', () => {
    const reading = proposed([array('/u', [8, 6, 5]), array('/t', [5]), ...grid]);
    expect([reading.layout, axesOf(reading)]).toEqual(['time-last', ['u(x,y,time)']]);
    expect(reading.fields[0].why).not.toMatch(/uncertain/);
  });

  it('of a bare field solver is told by chunks of one frame and the axis that grows', () => {
    const ez = array('/ez', [60, 50, 40], { chunks: [60, 50, 1] });
    const reading = proposed([ez], { unlimited: { '/ez': [false, false, true] } });
    expect([reading.layout, axesOf(reading), reading.time]).toEqual(['time-last', ['ez(x,y,time)'], null]);
    expect(reading.fields[0].why).toMatch(/it alone may grow.*chunks \(60, 50, 1\)/);
    expect(proposed([ez]).layout).toBe('time-last');
  });

  it('of nothing but a shape is the first, said to be uncertain', () => {
    const reading = proposed([array('/u', [40, 50, 60])]);
    expect(reading.layout).toBe('time-first');
    expect(reading.fields[0].why).toMatch(/^uncertain/);
  });

  it('is missing from one snapshot on a grid', () => {
    const reading = proposed([array('/u', [6, 8]), ...grid]);
    expect([reading.layout, axesOf(reading)]).toEqual(['single-snapshot', ['u(y,x)']]);
  });
});

describe('a cube of equal lengths', () => {
  const cube = (more: Partial<ArrayInfo> = {}) => [array('/u', [7, 7, 7], more), array('/t', [7]), array('/x', [7]), array('/y', [7])];

  it('is resolved by dimension scales', () => {
    const reading = proposed(cube({ dimensionScales: ['/y', '/x', '/t'] }));
    expect(axesOf(reading)).toEqual(['u(y,x,time)']);
    expect(reading.fields[0].why).not.toMatch(/uncertain/);
  });

  it.each([[['time', 'y', 'x'], 'u(time,y,x)'], ['x y time', 'u(x,y,time)'], ['tyx', 'u(time,y,x)']])('is resolved by the attribute %j', (dims, axes) => {
    const reading = proposed(cube({ attributes: { dims } }));
    expect(axesOf(reading)).toEqual([axes]);
    expect(reading.fields[0].why).not.toMatch(/uncertain/);
  });

  it('is resolved in time by chunks of one frame', () => {
    const reading = proposed(cube({ chunks: [7, 7, 1] }));
    expect(axesOf(reading)).toEqual(['u(x,y,time)']);
    expect(reading.fields[0].why).toMatch(/^time is the last axis/);
  });

  it('without any of these is said to be uncertain', () => {
    expect(proposed(cube()).fields[0].why).toMatch(/^uncertain: time is the first axis/);
  });
});

describe('a snapshot matrix', () => {
  it.each([
    [[500, 20], 'X(node,time)'],
    [[20, 500], 'X(time,node)'],
  ])('of shape %j is %s, with and without a time vector', (shape, axes) => {
    expect(axesOf(proposed([array('/X', shape), array('/t', [20])]))).toEqual([axes]);
    const bare = proposed([array('/X', shape)]);
    expect([axesOf(bare), bare.layout, bare.time]).toEqual([[axes], 'snapshot-matrix', null]);
  });

  it('has nodes when coordinates come one a node or as the product of the grid', () => {
    const nodes = proposed([array('/X', [500, 20]), array('/t', [20]), array('/x', [500]), array('/y', [500])]);
    expect(nodes.axes).toMatchObject([{ name: 'node', path: null, count: 500 }]);
    expect(nodes.fields[0].why).toMatch(/one value a node/);
    expect(proposed([array('/X', [20, 48]), array('/t', [20]), ...grid]).fields[0].why).toMatch(/product of the coordinates' lengths/);
  });

  it('of one coordinate of that length is a line', () => {
    const line = proposed([array('/u', [20, 500]), array('/t', [20]), array('/x', [500])]);
    expect([axesOf(line), line.layout]).toEqual([['u(time,x)'], 'time-first']);
  });
});

describe('components', () => {
  it('are a short last axis that no coordinate explains', () => {
    expect(axesOf(proposed([array('/velocity', [5, 6, 8, 3]), array('/t', [5]), ...grid]))).toEqual(['velocity(time,y,x,component)']);
    expect(axesOf(proposed([array('/velocity', [5, 100, 2]), array('/t', [5])]))).toEqual(['velocity(time,node,component)']);
  });

  it('are not an axis that a coordinate explains', () => {
    expect(axesOf(proposed([array('/p', [5, 6, 8, 3]), array('/t', [5]), ...grid, array('/z', [3])]))).toEqual(['p(time,y,x,z)']);
  });
});

describe('other roles', () => {
  const field = [array('/u', [5, 6, 8]), array('/t', [5]), ...grid];

  it.each(['/weights', '/w', '/quadrature_weights', '/cell_volume', '/cellVolumes', '/area'])('%s of one value a node is space weights', (path) => {
    expect(proposed([...field, array(path, [48])]).spaceWeights).toEqual({ path });
    expect(proposed([...field, array(path, [47])]).spaceWeights).toBeNull();
  });

  it('w with a time axis is a field', () => {
    const reading = proposed([...field, array('/w', [5, 6, 8])]);
    expect(reading.fields.map(({ name }) => name)).toEqual(['u', 'w']);
  });

  it('time weights are one a snapshot', () => {
    expect(proposed([...field, array('/time_weights', [5])]).timeWeights).toEqual({ path: '/time_weights' });
  });

  it('masks, connectivity, points, edges and single numbers are told apart', () => {
    const reading = proposed([
      ...field, array('/mask', [6, 8], { dtype: 'uint8' }), array('/connectivity', [30, 4], { dtype: 'int32' }), array('/points', [48, 2]),
      array('/x_edges', [9]), array('/Re', []), array('/history', [77]), array('/label', [3], { dtype: 'string' }),
    ]);
    expect(['/mask', '/connectivity', '/points', '/x_edges', '/Re', '/history', '/label'].map((path) => roleOf(reading, path))).toEqual([
      'mask', 'connectivity', 'coordinate', 'cell-edges', 'parameter', 'ignored', 'ignored',
    ]);
    expect(reading.roles.map(({ why }) => why).every((why) => why.length > 5)).toBe(true);
    expect(reading.roles).toHaveLength(11);
  });

  it('arrays of another grid or record are left out, with the reason', () => {
    const reading = proposed([...field, array('/probe', [5, 3]), array('/initial', [6, 8])]);
    expect(reading.fields.map(({ name }) => name)).toEqual(['u']);
    expect(reading.roles.find(({ path }) => path === '/probe')?.why).toMatch(/5 snapshots, node 3, and the larger fields have/);
    expect(roleOf(reading, '/initial')).toBe('ignored');
  });

  it('parameters come from root attributes and single datasets, not from bookkeeping', () => {
    const reading = proposed([...field, array('/nu', [], { attributes: { units: 'm2/s' } })], { attributes: { Re: 100, version: 3, _x: 1 } });
    expect(reading.parameters.map(({ name, unit, from }) => [name, unit, from])).toEqual([['Re', null, '/@Re'], ['nu', 'm2/s', '/nu']]);
  });

  it.each([['units', 'm/s', 'm/s'], ['unit', ' Pa ', 'Pa'], ['Units', 'none', null], ['description', 'm', null]])('the unit in attribute %s is %j -> %j', (name, text, unit) => {
    expect(proposed([array('/u', [5, 6, 8], { attributes: { [name]: text } }), array('/t', [5]), ...grid]).fields[0].unit).toBe(unit);
  });
});

describe('one group per step', () => {
  const steps = (more: (j: number) => ArrayInfo[] = () => []) => [1, 2, 10].flatMap((j) => [array(`/step_${j}/u`, [6, 8]), ...more(j)]);

  it('is a template with a role for each array of a step', () => {
    const reading = proposed([...steps((j) => [array(`/step_${j}/time`, [])]), ...grid]);
    expect(reading).toMatchObject({ layout: 'group-per-step', time: { kind: 'step-dataset', name: 'time' }, fields: [{ path: '/{step}/u', axes: ['y', 'x'] }] });
    expect(reading.roles.map(({ path, role }) => [path, role])).toEqual(
      expect.arrayContaining([['/{step}/u', 'field'], ['/{step}/time', 'time'], ['/x', 'coordinate']]),
    );
  });

  it('says that a whole number in a name is a count rather than a time', () => {
    expect(proposed(steps()).roles.find(({ role }) => role === 'time')?.why).toMatch(/uncertain.*a count of steps/);
  });

  it('is not what several runs in one file are', () => {
    const runs = [1, 2].flatMap((j) => [array(`/run${j}/u`, [5, 6, 8]), array(`/run${j}/t`, [5])]);
    expect(proposed([...runs, ...grid]).layout).toBe('time-first');
  });

  it('leaves an array that is missing in a step out', () => {
    const reading = proposed([...steps((j) => (j > 1 ? [array(`/step_${j}/v`, [6, 8])] : [])), ...grid]);
    expect(reading.fields.map(({ path }) => path)).toEqual(['/{step}/u']);
  });
});

describe('an archive without fields', () => {
  it.each([[[]], [[array('/t', [5])]], [[array('/label', [], { dtype: 'string' })]]])('%# is unknown, and nothing breaks', (arrays) => {
    const reading = proposed(arrays);
    expect([reading.layout, reading.fields, reading.axes]).toEqual(['unknown', [], []]);
    expect(reading.roles).toHaveLength(arrays.length);
  });
});
