import { describe, expect, it } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import type { Recipe } from '#contract/recipe.ts';
import { mustPlan, planRecipe, readRecipe, rowsOf } from '../../../../server/engine/recipe/plan.ts';
import { movingValues, uniform } from '../checks/survey-factory.ts';
import { archiveId, recipeOf, source, type Loose } from './recipe-factory.ts';

const problemOf = (steps: Loose[], sources = [source(1, uniform(10))], runs = 1, fields = ['u']) => planRecipe(recipeOf(steps, runs, fields), sources).problems[0];

describe('a recipe from outside', () => {
  it('gets the defaults of the contract', () => {
    const recipe = readRecipe({ pennyweight: 1, steps: [{ step: 'select', archives: [archiveId(1)], fields: ['u'] }, { step: 'weigh' }] });
    expect(recipe.steps[1]).toEqual({ step: 'weigh', time: 'trapezoid', space: 'tensor', runs: 'equal' });
  });

  it.each([
    ['of a newer version', { pennyweight: 2, steps: [] }, /version 2.*up to 1.*Update/],
    ['with a step that does not exist', { pennyweight: 1, steps: [{ step: 'bake' }] }, /Step 1 of the recipe/],
    ['with a wrong parameter', { pennyweight: 1, steps: [{ step: 'select', archives: [archiveId(1)], fields: ['u'] }, { step: 'window', every: 0 }] }, /Step 2 of the recipe is not valid: every/],
    ['that is no object', 'select all', /recipe is not valid/],
    ['that is nothing', null, /recipe is not valid/],
  ])('%s is refused with the place', (_, value, sentence) => {
    expect(() => readRecipe(value)).toThrow(PennyweightError);
    expect(() => readRecipe(value)).toThrow(sentence);
  });
});

describe('the order of steps', () => {
  it('begins with select', () => {
    const recipe: Recipe = { pennyweight: 1, steps: [{ step: 'cast', type: 'float64' }] };
    expect(planRecipe(recipe, [source(1, uniform(4))]).problems).toEqual([{ step: 0, code: 'recipe-invalid', message: expect.stringMatching(/begins with select/) }]);
  });

  it.each([
    ['order after window', [{ step: 'window' }, { step: 'order' }], 2, /order stands too late/],
    ['weigh before order', [{ step: 'weigh' }, { step: 'order' }], 2, /order stands too late/],
    ['anything after cast', [{ step: 'cast', type: 'float32' }, { step: 'centre' }], 2, /centre stands too late/],
    ['a step twice', [{ step: 'weigh' }, { step: 'weigh' }], 2, /weigh is there twice/],
  ] as [string, Loose[], number, RegExp][])('%s is refused, and the step is named', (_, steps, at, sentence) => {
    expect(problemOf(steps)).toEqual({ step: at, code: 'recipe-invalid', message: expect.stringMatching(sentence) });
  });

  it.each([['centre', 'weigh', 'split'], ['split', 'weigh', 'centre'], ['weigh', 'split', 'centre']])('lets %s, %s and %s stand in any order', (...names) => {
    const parameters: Record<string, object> = { split: { by: 'blocks', shares: [0.5, 0, 0.5], blocks: 4 } };
    expect(problemOf(names.map((step) => ({ step, ...parameters[step] }) as Loose))).toBeUndefined();
  });
});

describe('a plan', () => {
  it('tells what each step changed, by counts', () => {
    const plan = planRecipe(recipeOf([{ step: 'order' }, { step: 'window', from: 0.02, to: 0.07 }, { step: 'weigh' }]), [source(1, uniform(10))]);
    expect(plan.effects.map(({ step, before, after }) => [step, before, after])).toEqual([['select', 0, 10], ['order', 10, 10], ['window', 10, 6], ['weigh', 6, 6]]);
    expect(plan.columns.map((column) => column.index)).toEqual([2, 3, 4, 5, 6, 7]);
  });

  it('without weigh counts every snapshot and node the same; the sum is the duration', () => {
    const plan = mustPlan(recipeOf([]), [source(1, [0, 1, 2, 7])]);
    expect(Array.from(plan.timeWeights!)).toEqual([7 / 4, 7 / 4, 7 / 4, 7 / 4]);
    expect(Array.from(plan.spaceWeights!)).toEqual([1, 1, 1, 1]);
    expect(plan.split).toEqual(['train', 'train', 'train', 'train']);
  });

  it.each([['with', [{ step: 'weigh' }], 1], ['without', [], null]] as [string, Loose[], number | null][])('%s a weigh step needs stamps that increase', (_, steps, at) => {
    expect(problemOf(steps, [source(1, [0, 1, 1, 2])])).toEqual({ step: at, code: 'stamps-invalid', message: expect.stringMatching(/stamp 2 \(1\) is not after stamp 1/) });
  });

  it('stacks fields in the order of select, whatever the archive says', () => {
    const two = source(1, uniform(5), { fields: [{ name: 'u', values: movingValues(5) }, { name: 'p', unit: 'Pa', values: movingValues(5) }] });
    const plan = mustPlan(recipeOf([], 1, ['p', 'u']), [two]);
    expect(plan.fields.map(({ name, unit, from, count }) => [name, unit, from, count])).toEqual([['p', 'Pa', 0, 4], ['u', 'm s-1', 4, 4]]);
    expect(rowsOf(plan)).toBe(8);
  });

  it('stops with a refusal by the first problem when it must hold', () => {
    expect(() => mustPlan(recipeOf([{ step: 'window', from: 5, to: 6 }]), [source(1, uniform(10))])).toThrow(/^Step 2: The window leaves no snapshot of run run 1, which spans 0 to 0.09/);
  });

  it('is the same for the same recipe and sources', () => {
    const recipe = recipeOf([{ step: 'order' }, { step: 'weigh' }, { step: 'split', by: 'blocks', shares: [0.6, 0.2, 0.2], seed: 5 }], 2);
    const plans = [0, 1].map(() => mustPlan(recipe, [source(1, uniform(40)), source(2, uniform(30, 0.02))]));
    expect(plans[0]).toEqual(plans[1]);
  });
});

describe('select', () => {
  it('takes runs in the order of the recipe', () => {
    const plan = mustPlan(readRecipe({ pennyweight: 1, steps: [{ step: 'select', archives: [archiveId(2), archiveId(1)], fields: ['u'] }] }), [source(1, uniform(3)), source(2, uniform(4))]);
    expect(plan.columns.map((column) => plan.sources[column.source].run)).toEqual(['run 2', 'run 2', 'run 2', 'run 2', 'run 1', 'run 1', 'run 1']);
  });

  const grid = (nodes: number[], more: object = {}) => ({ axes: [{ name: 'x' as const, nodes, ...more }] });
  it.each([
    ['a field that a run lacks', [source(1, uniform(5))], 1, ['q'], /Run run 1 has no field "q": it has u/],
    ['an archive that is not there', [source(1, uniform(5))], 2, ['u'], /is not there, is withdrawn, or has not been read/],
    ['a field twice', [source(1, uniform(5))], 1, ['u', 'u'], /"u" is selected twice/],
    ['runs on different grids', [source(1, uniform(5), grid([0, 1, 2, 3])), source(2, uniform(5), grid([0, 1, 2, 4]))], 2, ['u'], /run 2 is on another grid than that of run run 1: node 3 of the axis x lies at 3 in run 1 and at 4 in run 2/],
    ['runs with different numbers of nodes', [source(1, uniform(5)), source(2, uniform(5), { fields: [{ values: movingValues(5, 3) }] })], 2, ['u'], /another grid/],
    ['runs in different units', [source(1, uniform(5)), source(2, uniform(5), { fields: [{ unit: 'cm s-1', values: movingValues(5) }] })], 2, ['u'], /in m s-1 in run run 1 and in cm s-1 in run run 2/],
    ['time in different units', [source(1, uniform(5)), source(2, uniform(5), { timeUnit: 'ms' })], 2, ['u'], /Time is in s in run run 1 and in ms in run run 2/],
    ['a run with time and one without', [source(1, uniform(5)), source(2, null, { time: { kind: 'ensemble' } })], 2, ['u'], /Some runs have time stamps and others have none/],
    ['fewer stamps than snapshots', [source(1, uniform(5), { fields: [{ values: movingValues(6) }] })], 1, ['u'], /has 5 time stamps for 6 snapshots/],
  ] as [string, ReturnType<typeof source>[], number, string[], RegExp][])('refuses %s', (_, sources, runs, fields, sentence) => {
    expect(problemOf([], sources, runs, fields)).toEqual({ step: 0, code: 'recipe-invalid', message: expect.stringMatching(sentence) });
  });

  it('takes grids that differ by the rounding of single precision for one', () => {
    const nodes = [0.1, 0.2, 0.3, 0.4];
    expect(problemOf([], [source(1, uniform(5), grid(nodes)), source(2, uniform(5), grid(nodes.map(Math.fround), { dtype: 'float32' }))], 2)).toBeUndefined();
  });
});

describe('window', () => {
  const kept = (parameters: object, stamps: number[] = uniform(10, 1)) => mustPlan(recipeOf([{ step: 'window', ...parameters } as Loose]), [source(1, stamps)]).columns.map((column) => column.time);

  it.each([
    ['from and to include their stamps', { from: 2, to: 4 }, [2, 3, 4]],
    ['every third counts from the first that is left', { from: 1, every: 3 }, [1, 4, 7]],
    ['the first two', { first: 2 }, [0, 1]],
    ['the last two', { last: 2 }, [8, 9]],
    ['the last two of the first five', { first: 5, last: 2 }, [3, 4]],
    ['more than there are', { first: 100 }, [0, 1, 2, 3, 4, 5, 6, 7, 8, 9]],
  ])('%s', (_, parameters, expected) => {
    expect(kept(parameters)).toEqual(expected);
  });

  it('treats every run by itself', () => {
    const plan = mustPlan(recipeOf([{ step: 'window', first: 2 }], 2), [source(1, uniform(5)), source(2, uniform(7))]);
    expect(plan.columns.map(({ source: s, index }) => [s, index])).toEqual([[0, 0], [0, 1], [1, 0], [1, 1]]);
  });

  it('refuses to end before it starts, and to cut an ensemble by time', () => {
    expect(problemOf([{ step: 'window', from: 3, to: 2 }])?.message).toMatch(/starts at 3, after its end 2/);
    expect(problemOf([{ step: 'window', from: 3 }], [source(1, null, { time: { kind: 'ensemble' } })])?.message).toMatch(/no time axis/);
  });
});
