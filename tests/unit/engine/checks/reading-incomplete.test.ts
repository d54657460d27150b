import { describe, expect, it } from 'vitest';
import type { CampaignDemands } from '../../../../server/engine/checks/check.ts';
import { readingIncomplete } from '../../../../server/engine/checks/reading-incomplete.ts';
import { judge, makeSubject, movingValues, uniform, type RecordPlan } from './survey-factory.ts';

const wants = (...names: string[]): CampaignDemands => ({
  parameters: [],
  fields: names.map((name) => ({ name, unit: null, min: null, max: null, required: true })),
});
const none: CampaignDemands = { fields: [], parameters: [] };
const twoFields: RecordPlan = {
  stamps: uniform(5),
  fields: [{ values: movingValues(5) }, { name: 'h', values: movingValues(1), axes: ['x'] }],
};

describe('reading/incomplete', () => {
  it.each<[string, RecordPlan, CampaignDemands, string]>([
    ['no field', { fields: [] }, none, 'No array of the archive is assigned as a field'],
    ['a required field that is not assigned', {}, wants('u', 'p'), 'needs the field p'],
    ['a required field by another name', {}, wants('U'), 'needs the field U'],
    ['a field without a time axis in a record of five', twoFields, none, 'No axis of /h is assigned to time'],
    ['two time axes', { fields: [{ values: movingValues(3), axes: ['time', 'time'] }] }, none, 'names 2 axes'],
    [
      'an axis that is not described',
      { fields: [{ values: movingValues(3), axes: ['time', 'y', 'x'] }] },
      none,
      'does not describe the axis y',
    ],
    ['a time axis of length 0', { fields: [{ values: [] }] }, none, 'holds no snapshot'],
    [
      'a space axis of length 0',
      { fields: [{ values: [[], []] }], axes: [{ name: 'x', nodes: [] }] },
      none,
      'holds no value',
    ],
  ])('fires for %s', (_name, plan, demands, words) => {
    const found = judge(readingIncomplete, makeSubject(plan, { demands }));
    expect(found).toHaveLength(1);
    expect(found[0].message).toContain(words);
  });

  it.each<[string, RecordPlan, CampaignDemands]>([
    ['a complete reading', { stamps: uniform(5) }, wants('u')],
    [
      'a field that the campaign lists but does not require',
      {},
      { parameters: [], fields: [{ name: 'p', unit: null, min: null, max: null, required: false }] },
    ],
    [
      'one snapshot without a time axis',
      { layout: 'single-snapshot', fields: [{ values: movingValues(1), axes: ['x'] }] },
      none,
    ],
    [
      'one group a step',
      { layout: 'group-per-step', fields: [{ path: '/{step}/u', values: movingValues(5), axes: ['x'] }] },
      none,
    ],
    [
      'components, which need no coordinates',
      { fields: [{ values: movingValues(5), axes: ['time', 'x', 'component'] }] },
      none,
    ],
    [
      'a field that does not fit',
      {
        fields: [{ values: movingValues(3), axes: ['time', 'time'] }],
        mismatches: [{ path: '/u', expected: '', actual: '', message: 'twice' }],
      },
      none,
    ],
    [
      'no field because it is a link out of the archive',
      { fields: [], contents: { outsideLinks: [{ path: '/u', kind: 'external-link', target: 'o.h5:/u' }] } },
      none,
    ],
    [
      'values at one point',
      { stamps: uniform(5), axes: [], fields: [{ values: movingValues(5, 1), axes: ['time'] }] },
      none,
    ],
  ])('is silent for %s', (_name, plan, demands) => {
    expect(judge(readingIncomplete, makeSubject(plan, { demands }))).toEqual([]);
  });
});
