import { describe, expect, it } from 'vitest';
import { valueUnitMissing } from '../../../../server/engine/checks/value-unit-missing.ts';
import { judge, makeSubject, movingValues } from './survey-factory.ts';

const values = movingValues(3);

describe('value/unit-missing', () => {
  it('names each field without a unit', () => {
    const fields = [
      { values, unit: null },
      { name: 'v', values, unit: ' ' },
      { name: 'p', values, unit: 'Pa' },
    ];
    expect(judge(valueUnitMissing, makeSubject({ fields })).map((found) => found.path)).toEqual(['/u', '/v']);
  });

  it('says which unit the campaign expects', () => {
    const demands = { parameters: [], fields: [{ name: 'u', unit: 'm s-1', min: null, max: null, required: true }] };
    expect(
      judge(valueUnitMissing, makeSubject({ fields: [{ values, unit: null }] }, { demands }))[0].message,
    ).toContain('expects m s-1');
  });

  it.each(['1', '-', 'm/s', 'degC'])('takes "%s" for a unit', (unit) => {
    expect(judge(valueUnitMissing, makeSubject({ fields: [{ values, unit }] }))).toEqual([]);
  });

  it('is silent without a field', () => {
    expect(judge(valueUnitMissing, makeSubject({ fields: [] }))).toEqual([]);
  });
});
