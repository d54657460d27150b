/** Spatial weights: measures of known domains, provided weights, refusals. */
import { describe, expect, it } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import type { AxisName } from '#contract/reading.ts';
import { spaceRules } from '../../../../server/engine/space/index.ts';
import { spaceWeights } from '../../../../server/engine/space/space-weights.ts';
import type { SurveyAxis } from '../../../../server/engine/survey.ts';
import { uneven } from '../quadrature/stamp-sets.ts';

const axis = (name: AxisName, nodes: number[] | Float64Array | null, count = nodes?.length ?? 0, periodic: boolean | null = null): SurveyAxis => ({ name, path: null, unit: 'm', count, nodes: nodes ? Float64Array.from(nodes) : null, edges: null, dtype: 'float64', periodic });

function refusal(run: () => unknown): PennyweightError {
  try {
    run();
  } catch (error) {
    if (error instanceof PennyweightError) return error;
    throw error;
  }
  return expect.fail('nothing was refused');
}

describe('tensor', () => {
  const y = uneven(9, 1), x = uneven(13, 2, 8);
  it('sums to the area of the domain and integrates bilinear functions exactly', () => {
    const { weights, result } = spaceWeights('tensor', [axis('y', y), axis('x', x)], null);
    const [ly, lx] = [y[8], x[12]];
    expect(result.sum).toBeCloseTo(lx * ly, 9);
    expect(result.measure).toBeCloseTo(lx * ly, 9);
    let integral = 0;
    for (let j = 0; j < 9; j++) for (let i = 0; i < 13; i++) integral += weights[j * 13 + i] * (2 * x[i] + 3 * y[j]);
    expect(integral / (lx * lx * ly + 1.5 * ly * ly * lx)).toBeCloseTo(1, 12);
  });
  it('takes three axes, and one node as no extent', () => {
    const { weights, result } = spaceWeights('tensor', [axis('z', [0, 2]), axis('y', [7]), axis('x', [0, 1, 3])], null);
    expect(Array.from(weights)).toEqual([0.5, 1.5, 1, 0.5, 1.5, 1]);
    expect(result).toMatchObject({ chosen: 'tensor', sum: 6, measure: 6 });
  });
  it('gives descending axes the same positive weights', () => {
    const up = spaceWeights('tensor', [axis('x', x)], null).weights, down = spaceWeights('tensor', [axis('x', Float64Array.from(x).reverse())], null).weights;
    expect(Array.from(down).reverse()).toEqual(Array.from(up));
    expect(Math.min(...down)).toBeGreaterThan(0);
  });
  it('counts components once', () => {
    const { weights, result } = spaceWeights('tensor', [axis('x', [0, 1, 3]), axis('component', null, 2)], null);
    expect(Array.from(weights)).toEqual([0.5, 0.5, 1.5, 1.5, 1, 1]);
    expect(result.sum).toBe(3);
  });
  it('closes a periodic axis', () => expect(Array.from(spaceWeights('tensor', [axis('x', [0, 1, 2, 3], 4, true)], null).weights)).toEqual([1, 1, 1, 1]));
  it.each([['unknown nodes', [axis('x', null, 5)], 'rule-not-admissible'], ['unstructured', [axis('node', null, 5)], 'rule-not-admissible'], ['not monotone', [axis('x', [0, 2, 1])], 'weights-invalid'], ['coincident', [axis('x', [0, 1, 1])], 'weights-invalid'], ['a node that is not a number', [axis('x', [0, NaN, 1])], 'weights-invalid'],
    ['fewer nodes than the axis counts', [axis('x', [0, 1], 3)], 'rule-not-admissible'], ['no axis', [], 'rule-not-admissible'], ['a measure beyond double precision', [axis('y', [0, 1e300]), axis('x', [0, 1e300])], 'weights-invalid']] as const)('refuses %s', (_name, axes, code) => {
    expect(refusal(() => spaceWeights('tensor', [...axes], null)).code).toBe(code);
  });
});

describe('none', () => {
  it('says when the grid is uneven', () => {
    expect(spaceWeights('none', [axis('x', [0, 1, 5])], null).result.why).toMatch(/uneven along x/);
    expect(spaceWeights('none', [axis('x', [0, 1, 2])], null).result.why).toMatch(/even/);
    expect(spaceWeights('none', [axis('x', [2, 1, 0])], null).result).toMatchObject({ why: 'Every node counts the same; the grid is even.', measure: 2 });
    expect(spaceWeights('none', [axis('x', [5, 1, 0])], null).result.why).toMatch(/uneven along x/);
    const single = { ...axis('x', Float64Array.from({ length: 40 }, (_, i) => Math.fround(i * 0.1))), dtype: 'float32' as const };
    expect(spaceWeights('none', [single], null).result.why).toMatch(/grid is even/);
    expect(spaceWeights('none', [axis('node', null, 4)], null).weights).toHaveLength(4);
  });
  it('counts each node once in the sum, and needs no grid', () => {
    expect(spaceWeights('none', [axis('x', [0, 1, 2]), axis('component', null, 2)], null).result.sum).toBe(3);
    for (const nodes of [[0, 2, 1], [0, NaN, 1], [3, 3, 3]]) expect(spaceWeights('none', [axis('x', nodes)], null).result).toMatchObject({ why: 'Every node counts the same; the grid is not known.', measure: null });
  });
});

describe('provided', () => {
  const grid = [axis('x', [0, 1, 2])];
  it('takes one weight a node, repeated for each component, and reports zeros and a sum that is off', () => {
    expect(Array.from(spaceWeights('provided', grid, Float64Array.of(0.5, 1, 0.5)).weights)).toEqual([0.5, 1, 0.5]);
    expect(Array.from(spaceWeights('provided', [...grid, axis('component', null, 2)], Float64Array.of(0.5, 1, 0.5)).weights)).toEqual([0.5, 0.5, 1, 1, 0.5, 0.5]);
    expect(Array.from(spaceWeights('provided', [axis('component', null, 2), ...grid], Float64Array.of(0.5, 1, 0.5)).weights)).toEqual([0.5, 1, 0.5, 0.5, 1, 0.5]);
    expect(spaceWeights('provided', grid, Float64Array.of(0, 1, 2)).result.why).toMatch(/1 node has weight zero and does not count.*differs by 50 %/);
  });
  it.each([[null, 'rule-not-admissible'], [[1, 2], 'weights-invalid'], [[1, -2, 1], 'weights-invalid'], [[1, NaN, 1], 'weights-invalid'], [[0, 0, 0], 'weights-invalid'], [[1e308, 1e308, 1e308], 'weights-invalid']] as const)('refuses %j', (given, code) => {
    expect(refusal(() => spaceWeights('provided', grid, given && Float64Array.from(given))).code).toBe(code);
  });
});

describe('the catalogue', () => {
  it('names each rule once and refuses others', () => {
    expect(spaceRules.map((rule) => rule.id)).toEqual(['none', 'tensor', 'provided']);
    for (const rule of spaceRules) expect(`${rule.title} ${rule.source}`).toMatch(/\S+ \S+/);
    expect(refusal(() => spaceWeights('cell-volume', [axis('x', [0, 1])], null)).message).toMatch(/"cell-volume" is not available: choose one of none, tensor, provided/);
  });
  it('takes the weights of the archive on a grid that is not monotone', () => {
    expect(spaceWeights('provided', [axis('x', [0, 2, 1])], Float64Array.of(1, 2, 1)).result).toMatchObject({ sum: 4, measure: null });
  });
});
