import { describe, expect, it } from 'vitest';
import type { SplitPart } from '#contract/recipe.ts';
import { mustPlan, planRecipe } from '../../../../server/engine/recipe/plan.ts';
import { uniform } from '../checks/survey-factory.ts';
import { recipeOf, source, type Loose } from './recipe-factory.ts';

const runs = (count: number, snapshots = 6) => Array.from({ length: count }, (_, i) => source(i + 1, uniform(snapshots)));
const split = (sources: ReturnType<typeof source>[], parameters: object) => mustPlan(recipeOf([{ step: 'split', ...parameters } as Loose], sources.length), sources);
const problem = (sources: ReturnType<typeof source>[], parameters: object) => planRecipe(recipeOf([{ step: 'split', ...parameters } as Loose], sources.length), sources).problems[0]?.message;
const count = (parts: SplitPart[], part: SplitPart) => parts.filter((each) => each === part).length;

describe('a split by run', () => {
  it('never divides a run', () => {
    const plan = split(runs(10), { by: 'run', shares: [0.6, 0.2, 0.2] });
    for (let s = 0; s < 10; s++) expect(new Set(plan.split.filter((_, j) => plan.columns[j].source === s)).size).toBe(1);
    expect(['train', 'validation', 'test'].map((part) => count(plan.split, part as SplitPart))).toEqual([36, 12, 12]);
  });

  it('follows the seed, and nothing else', () => {
    const assigned = (seed: number) => split(runs(12), { by: 'run', shares: [0.5, 0.25, 0.25], seed }).split.join();
    expect(assigned(3)).toBe(assigned(3));
    expect(new Set([1, 2, 3, 4, 5].map(assigned)).size).toBeGreaterThan(1);
  });

  it('gives every part that is asked for a run when there are enough', () => {
    const plan = split(runs(3), { by: 'run', shares: [0.98, 0.01, 0.01] });
    expect(new Set(plan.split)).toEqual(new Set(['train', 'validation', 'test']));
    expect(problem(runs(2), { by: 'run', shares: [0.6, 0.2, 0.2] })).toMatch(/part would be empty: 2 runs cannot be shared out among 3 parts/);
  });

  it('leaves a part without a share empty', () => {
    expect(count(split(runs(4), { by: 'run', shares: [0.5, 0, 0.5] }).split, 'validation')).toBe(0);
  });

  it('refuses shares that do not add up', () => {
    expect(problem(runs(3), { by: 'run', shares: [0.6, 0.2, 0.1] })).toMatch(/add up to 0.9 instead of 1/);
    // 0.1 + 0.2 + 0.7 is not 1 in binary, and is meant to be.
    expect(problem(runs(10), { by: 'run', shares: [0.7, 0.2, 0.1] })).toBeUndefined();
  });
});

describe('a split by blocks', () => {
  it('keeps the guard band between two parts, and only there', () => {
    const { split: parts } = split([source(1, uniform(100))], { by: 'blocks', shares: [0.6, 0.2, 0.2], blocks: 10, guard: 2, seed: 4 });
    parts.forEach((part, j) => {
      if (j === 0 || part === parts[j - 1]) return;
      // Whoever leaves a part enters the guard band first, two snapshots wide.
      if (part === 'guard') expect(parts.slice(j, j + 3)).toEqual(['guard', 'guard', parts[j + 2]]);
      else expect(parts[j - 1]).toBe('guard');
      if (part === 'guard') expect(parts[j - 1]).not.toBe(parts[j + 2]);
    });
    expect(count(parts, 'train') + count(parts, 'validation') + count(parts, 'test') + count(parts, 'guard')).toBe(100);
  });

  it('without a guard uses every snapshot', () => {
    const { split: parts } = split([source(1, uniform(50))], { by: 'blocks', shares: [0.5, 0, 0.5], blocks: 5, guard: 0 });
    expect(count(parts, 'guard')).toBe(0);
    expect([count(parts, 'train'), count(parts, 'test')].sort((a, b) => a - b)).toEqual([20, 30]);
  });

  it('cuts every run by itself', () => {
    const { split: parts } = split([source(1, uniform(20)), source(2, uniform(40))], { by: 'blocks', shares: [0.5, 0, 0.5], blocks: 4, guard: 0, seed: 2 });
    for (const [from, length] of [[0, 5], [5, 5], [10, 5], [15, 5], [20, 10], [30, 10], [40, 10], [50, 10]]) expect(new Set(parts.slice(from, from + length)).size).toBe(1);
  });

  it('refuses more blocks than snapshots, and a guard that leaves nothing', () => {
    expect(problem([source(1, uniform(5))], { by: 'blocks', shares: [0.5, 0, 0.5], blocks: 6 })).toMatch(/run 1 has 5 snapshots, fewer than the 6 blocks/);
    // Blocks of three: where the parts alternate, a guard of three leaves nothing of one of them.
    const problems = [1, 2, 3, 4, 5, 6, 7, 8].map((seed) => problem([source(1, uniform(12))], { by: 'blocks', shares: [0.5, 0, 0.5], blocks: 4, guard: 3, seed }));
    expect(problems.filter(Boolean)).toContainEqual(expect.stringMatching(/part is empty: the guard band of 3 snapshots/));
  });
});
