import { describe, expect, it } from 'vitest';
import { mustPlan, planRecipe } from '../../../../server/engine/recipe/plan.ts';
import { movingValues, uniform } from '../checks/survey-factory.ts';
import { archiveId, recipeOf, source, type Loose } from './recipe-factory.ts';

/** A run to t = 9, restarted from a checkpoint at t = 5.5 and run on to 14.5. */
const restarted = [...uniform(10, 1), ...uniform(10, 1, 5.5)];

const kept = (stamps: number[], parameters: object = {}, more: Parameters<typeof source>[2] = {}) =>
  mustPlan(recipeOf([{ step: 'order', ...parameters } as Loose]), [source(1, stamps, more)]).columns.map((column) => column.index);
const problem = (stamps: number[], parameters: object) => planRecipe(recipeOf([{ step: 'order', ...parameters } as Loose]), [source(1, stamps)]).problems[0]?.message;

describe('order', () => {
  it('lets the later segment win where a restart overlaps', () => {
    expect(kept(restarted)).toEqual([0, 1, 2, 3, 4, 5, ...uniform(10, 1, 10)]);
  });

  it('lets the earlier segment win when told to', () => {
    // The later segment is taken from t = 9.5 on, the first stamp beyond 9.
    expect(kept(restarted, { restart: 'keep-earlier' })).toEqual([...uniform(10, 1), ...uniform(6, 1, 14)]);
  });

  it('keeps the earlier segment of two restarts in a row', () => {
    const twice = [...uniform(8, 1), ...uniform(8, 1, 4.5), ...uniform(8, 1, 9.25)];
    const stamps = kept(twice, { restart: 'keep-earlier' }).map((j) => twice[j]);
    expect(stamps).toEqual([0, 1, 2, 3, 4, 5, 6, 7, 7.5, 8.5, 9.5, 10.5, 11.5, 12.25, 13.25, 14.25, 15.25, 16.25]);
  });

  it('refuses a restart when no segment is to be preferred', () => {
    expect(problem(restarted, { restart: 'refuse' })).toMatch(/run 1 was restarted: at snapshot 10 time goes back from 9 to 5.5/);
  });

  it('drops repeated stamps but for the first', () => {
    expect(kept([0, 1, 1, 2, 2, 2, 3])).toEqual([0, 1, 3, 6]);
    expect(problem([0, 1, 1, 2], { dropDuplicates: false })).toMatch(/time stamp 1 twice/);
  });

  it('drops stamps that repeat to rounding only, as the check of duplicates sees them', () => {
    const third = 1 / 3;
    expect(kept([0, third, third + 2 ** -53, 2 / 3, 1])).toEqual([0, 1, 3, 4]);
  });

  it('sorts what was merely swapped, and refuses to when told so', () => {
    const swapped = [0, 1, 2, 4, 3, 5, 6, 7, 8, 9];
    expect(kept(swapped)).toEqual([0, 1, 2, 4, 3, 5, 6, 7, 8, 9]);
    expect(problem(swapped, { sort: false })).toMatch(/not in order of time at snapshot 4/);
  });

  it('drops listed snapshots first, by their number in the archive', () => {
    expect(kept([0, 1, 99, 2, 3], { drop: [{ archive: archiveId(1), indices: [2] }] })).toEqual([0, 1, 3, 4]);
    expect(problem([0, 1, 2], { drop: [{ archive: archiveId(1), indices: [3] }] })).toMatch(/Snapshot 3 of run run 1.*only 3, numbered from 0/);
  });

  it('drops frozen copies only where every selected field stands still', () => {
    const moving = movingValues(6), half = movingValues(6);
    half[3] = half[2];
    half[4] = half[2];
    const fields = [{ name: 'u', values: half }, { name: 'p', values: moving }];
    expect(kept(uniform(6), { dropFrozen: true }, { fields })).toEqual([0, 1, 2, 5]);
    const plan = mustPlan(recipeOf([{ step: 'order', dropFrozen: true }], 1, ['u', 'p']), [source(1, uniform(6), { fields })]);
    expect(plan.columns).toHaveLength(6);
    expect(kept(uniform(6), {}, { fields })).toHaveLength(6);
  });

  it('refuses a stamp that is not a number, and takes it when it is dropped', () => {
    expect(problem([0, 1, NaN, 3], {})).toMatch(/no time stamp at snapshot 2/);
    expect(kept([0, 1, NaN, 3], { drop: [{ archive: archiveId(1), indices: [2] }] })).toEqual([0, 1, 3]);
  });

  it('leaves an ensemble as it is but for what is listed', () => {
    expect(mustPlan(recipeOf([{ step: 'order', drop: [{ archive: archiveId(1), indices: [0] }] }]), [source(1, null, { time: { kind: 'ensemble' } })]).columns.map((column) => column.index)).toEqual([1, 2, 3, 4, 5]);
  });

  it('says that nothing is left when all is dropped', () => {
    expect(problem([0, 1], { drop: [{ archive: archiveId(1), indices: [0, 1] }] })).toMatch(/No snapshot is left/);
  });
});
