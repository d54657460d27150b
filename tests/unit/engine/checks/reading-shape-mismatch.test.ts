import { describe, expect, it } from 'vitest';
import { readingShapeMismatch } from '../../../../server/engine/checks/reading-shape-mismatch.ts';
import { judge, makeSubject, movingValues, uniform, type RecordPlan } from './survey-factory.ts';

const mismatch = {
  path: '/u',
  expected: '[11, 4]',
  actual: '[10, 4]',
  message: '/u has shape [10, 4], the time vector has 11 stamps; correct the reading.',
};

describe('reading/shape-mismatch', () => {
  it.each<[string, RecordPlan, string]>([
    ['what the reading found not to fit', { mismatches: [mismatch] }, '/u'],
    ['more stamps than snapshots', { stamps: uniform(6), fields: [{ values: movingValues(5) }] }, '/t'],
    ['fewer stamps than snapshots', { stamps: uniform(4), fields: [{ values: movingValues(5) }] }, '/t'],
    [
      'fields of different lengths',
      { stamps: uniform(5), fields: [{ values: movingValues(5) }, { name: 'p', values: movingValues(4) }] },
      '/p',
    ],
    ['coordinates longer than the axis', { axes: [{ name: 'x', nodes: uniform(5), count: 4 }] }, '/x'],
  ])('fires once for %s', (_name, plan, path) => {
    expect(judge(readingShapeMismatch, makeSubject(plan)).map((found) => found.path)).toEqual([path]);
  });

  it('adds what to do to a message that does not say so', () => {
    const told = judge(
      readingShapeMismatch,
      makeSubject({ mismatches: [{ ...mismatch, message: '/u has shape (10, 4).' }] }),
    );
    expect(told[0].message).toBe('/u has shape (10, 4); correct the reading.');
  });

  it.each<[string, RecordPlan]>([
    ['a field that is damaged', { mismatches: [mismatch], contents: { damaged: [{ path: '/u', reason: 'cut off' }] } }],
    [
      'a field whose data lie outside',
      {
        mismatches: [mismatch],
        contents: { outsideLinks: [{ path: '/u', kind: 'external-storage', target: 'raw.bin' }] },
      },
    ],
    ['a reading without a field', { fields: [], mismatches: [{ ...mismatch, path: '/' }] }],
    ['shapes that fit', { stamps: uniform(5) }],
    ['one snapshot and one stamp', { stamps: [0], fields: [{ values: movingValues(1) }] }],
    ['axes of length 0 with as many coordinates', { fields: [{ values: [] }], axes: [{ name: 'x', nodes: [] }] }],
    ['axes without coordinates', { axes: [{ name: 'x', nodes: null, count: 4 }] }],
    ['no field', { stamps: uniform(5), fields: [] }],
  ])('is silent for %s', (_name, plan) => {
    expect(judge(readingShapeMismatch, makeSubject(plan))).toEqual([]);
  });
});
