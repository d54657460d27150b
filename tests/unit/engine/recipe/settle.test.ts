import { describe, expect, it } from 'vitest';
import type { Finding } from '#contract/finding.ts';
import { judgeAll } from '../../../../server/engine/checks/index.ts';
import { judgePlan } from '../../../../server/engine/recipe/judge-plan.ts';
import { mustPlan } from '../../../../server/engine/recipe/plan.ts';
import { settledBy } from '../../../../server/engine/recipe/settle.ts';
import { makeSubject, movingValues, uniform, type RecordPlan } from '../checks/survey-factory.ts';
import { archiveId, recipeOf, source, type Loose } from './recipe-factory.ts';

/** What the checks find in a record, and which of it the recipe settles. */
function findings(stamps: number[], steps: Loose[], more: RecordPlan = {}, fields = ['u']): Record<string, string | null> {
  const one = source(1, stamps, more), plan = mustPlan(recipeOf(steps, 1, fields), [one]);
  const found: Finding[] = judgeAll({ ...makeSubject(null), survey: one.survey, archive: archiveId(1) }, { thresholds: {} });
  return Object.fromEntries(found.map((finding) => [finding.path?.startsWith('/') && finding.id.startsWith('value/') ? `${finding.id} ${finding.path}` : finding.id, settledBy(finding, archiveId(1), plan)]));
}

const restarted = [...uniform(10, 1), ...uniform(10, 1, 5.5)];

describe('a finding is settled by the recipe', () => {
  it('when order mends the restart', () => {
    expect(findings(restarted, [{ step: 'order' }])['time/restart-overlap']).toMatch(/^order/);
  });

  it('when order drops what is repeated', () => {
    expect(findings([0, 1, 1, 2, 3, 4], [{ step: 'order' }])['time/duplicate']).toMatch(/^order/);
  });

  it('when the window ends before the gap, and not when it only moves', () => {
    const stamps = [...uniform(10, 1), ...uniform(10, 1, 40)];
    expect(findings(stamps, [{ step: 'window', to: 9 }])['time/gap']).toMatch(/^window/);
    expect(findings(stamps, [{ step: 'window', from: 3 }])['time/gap']).toBeNull();
  });

  it('when weigh uses a rule for uneven stamps, and not with equal weights', () => {
    const stamps = [0, 1, 2.5, 3.2, 4.9, 5.4, 7];
    expect(findings(stamps, [{ step: 'weigh' }])['time/uneven-spacing']).toMatch(/trapezoid/);
    expect(findings(stamps, [{ step: 'weigh', time: 'equal' }])['time/uneven-spacing']).toBeNull();
    expect(findings(stamps, [])['time/uneven-spacing']).toBeNull();
  });

  it('when frozen copies are dropped, and not when one of them stays', () => {
    const values = movingValues(8);
    values[4] = values[3];
    const fields = [{ values }];
    expect(findings(uniform(8), [{ step: 'order', dropFrozen: true }], { fields })['value/frozen /u']).toMatch(/^order/);
    expect(findings(uniform(8), [{ step: 'order', drop: [{ archive: archiveId(1), indices: [3] }] }], { fields })['value/frozen /u']).toMatch(/^order/);
    expect(findings(uniform(8), [{ step: 'order' }], { fields })['value/frozen /u']).toBeNull();
  });

  it('when every snapshot with a NaN is dropped, and not when one is left', () => {
    const values = movingValues(8);
    values[2] = values[2].map(() => NaN);
    values[5] = [...values[5].slice(1), NaN];
    const drop = (...indices: number[]) => findings(uniform(8), [{ step: 'order', drop: [{ archive: archiveId(1), indices }] }], { fields: [{ values }] })['value/non-finite /u'];
    expect(drop(2, 5)).toMatch(/dropped/);
    expect(drop(2)).toBeNull();
  });

  it('when it leaves the field or the archive out', () => {
    const fields = [{ name: 'u', values: movingValues(6) }, { name: 'p', values: movingValues(6).map(() => [1, 1, 1, 1]) }];
    expect(findings(uniform(6), [], { fields })['value/constant-field /p']).toBe('select leaves p out');
    expect(findings(uniform(6), [], { fields }, ['u', 'p'])['value/constant-field /p']).toBeNull();
    const plan = mustPlan(recipeOf([]), [source(1, uniform(6))]);
    expect(settledBy({ id: 'value/non-finite', path: '/u', evidence: {} }, archiveId(9), plan)).toMatch(/leaves this archive out/);
  });

  it('when its grid differs from archives that the recipe does not take', () => {
    const plan = mustPlan(recipeOf([]), [source(1, uniform(6))]);
    expect(settledBy({ id: 'grid/differs', path: null, evidence: {} }, archiveId(1), plan)).toMatch(/one grid only/);
  });

  it.each(['param/missing', 'value/unit-missing', 'file/outside-link', 'reading/incomplete', 'time/missing'] as const)('never for %s', (id) => {
    const plan = mustPlan(recipeOf([{ step: 'order' }, { step: 'weigh' }]), [source(1, uniform(6))]);
    expect(settledBy({ id, path: null, evidence: {} }, archiveId(1), plan)).toBeNull();
  });
});

describe('findings of a draft itself', () => {
  const own = (stamps: number[], steps: Loose[], more: RecordPlan = {}) => judgePlan(mustPlan(recipeOf(steps), [source(1, stamps, more)])).map(({ id, severity }) => `${id} ${severity}`);

  it('name a gap that the recipe itself tore open', () => {
    const drop = { step: 'order', drop: [{ archive: archiveId(1), indices: [8, 9, 10, 11, 12] }] } as Loose;
    expect(own(uniform(20, 1), [drop, { step: 'weigh' }])).toEqual(['time/gap caution']);
    expect(own(uniform(20, 1), [{ step: 'weigh' }])).toEqual([]);
  });

  it('do not repeat a gap of the archive', () => {
    expect(own([...uniform(10, 1), ...uniform(10, 1, 40)], [{ step: 'weigh' }])).toEqual([]);
  });

  it('name spacing that the recipe made uneven while it weighs equally', () => {
    const drop = { step: 'order', drop: [{ archive: archiveId(1), indices: [3, 9, 13] }] } as Loose;
    expect(own(uniform(20, 1), [drop, { step: 'weigh', time: 'equal' }])).toEqual(['time/uneven-spacing caution']);
    expect(own(uniform(20, 1), [drop, { step: 'weigh' }])).toEqual([]);
  });

  it('caution against equal node weights on an uneven grid', () => {
    const axes = [{ name: 'x' as const, nodes: [0, 1, 3, 7] }];
    expect(own(uniform(10, 1), [{ step: 'weigh', space: 'none' }], { axes })).toEqual(['grid/uneven caution']);
    expect(own(uniform(10, 1), [{ step: 'weigh' }], { axes })).toEqual([]);
    expect(own(uniform(10, 1), [{ step: 'weigh', space: 'none' }])).toEqual([]);
  });
});
