import { describe, expect, it } from 'vitest';
import { timeMissing } from '../../../../server/engine/checks/time-missing.ts';
import { judge, makeSubject, movingValues, uniform, type RecordPlan } from './survey-factory.ts';

describe('time/missing', () => {
  it('fires for several snapshots without stamps', () => {
    const found = judge(timeMissing, makeSubject({ fields: [{ values: movingValues(7) }] }));
    expect(found).toHaveLength(1);
    expect(found[0].message).toContain('7 snapshots');
    expect(found[0].remedy).toBeNull();
  });

  it.each<[string, RecordPlan]>([
    ['a time vector', { stamps: uniform(5) }],
    [
      'start and step given by a person',
      { stamps: uniform(5), time: { kind: 'generated', start: 0, step: 0.01, unit: null } },
    ],
    ['a declared ensemble', { time: { kind: 'ensemble' } }],
    ['one snapshot', { fields: [{ values: movingValues(1) }] }],
    ['no snapshot', { fields: [{ values: [] }] }],
    ['no field', { fields: [] }],
    [
      'a time vector that does not fit',
      {
        time: { kind: 'array', path: '/t', unit: 's' },
        mismatches: [{ path: '/t', expected: '5', actual: '4', message: 'does not fit' }],
      },
    ],
  ])('is silent for %s', (_name, plan) => {
    expect(judge(timeMissing, makeSubject(plan))).toEqual([]);
  });
});
