import { describe, expect, it } from 'vitest';
import type { CampaignDemands } from '../../../../server/engine/checks/check.ts';
import { paramMissing } from '../../../../server/engine/checks/param-missing.ts';
import { judge, makeSubject } from './survey-factory.ts';

const demands: CampaignDemands = {
  fields: [],
  parameters: [
    { name: 'Re', unit: null, min: 100, max: 1000 },
    { name: 'U0', unit: 'm/s', min: null, max: null },
  ],
};

describe('param/missing', () => {
  it('names each parameter without a value', () => {
    const found = judge(paramMissing, makeSubject({}, { demands, parameters: { U0: 2 } }));
    expect(found.map((judgement) => judgement.evidence.parameter)).toEqual(['Re']);
    expect(found[0].message).toContain('between 100 and 1000');
  });

  it.each([
    ['a value that is no number', { Re: NaN, U0: 1 }],
    ['a name in other letters', { re: 100, U0: 1 }],
  ])('fires for %s', (_name, parameters) => {
    expect(judge(paramMissing, makeSubject({}, { demands, parameters }))).toHaveLength(1);
  });

  it('takes 0 for a value, and does not mistake what every object has for one', () => {
    expect(judge(paramMissing, makeSubject({}, { demands, parameters: { Re: 0, U0: 0 } }))).toEqual([]);
    const inherited = { fields: [], parameters: [{ name: 'constructor', unit: null, min: null, max: null }] };
    expect(judge(paramMissing, makeSubject({}, { demands: inherited }))).toHaveLength(1);
  });

  it('is silent without demands, and while the archive is unreadable', () => {
    expect(judge(paramMissing, makeSubject())).toEqual([]);
    expect(judge(paramMissing, makeSubject(null, { demands }))).toEqual([]);
  });
});
