import { describe, expect, it } from 'vitest';
import { readingShapeMismatch } from '../../../../server/engine/checks/reading-shape-mismatch.ts';
import { judge, makeSubject, movingValues, uniform, type RecordPlan } from './survey-factory.ts';

const mismatch = { path: '/u', expected: '[11, 4]', actual: '[10, 4]', message: '/u has shape [10, 4], the time vector has 11 stamps; correct the reading.' };

describe('reading/shape-mismatch', () => {
  it.each<[string, RecordPlan, string]>([
    ['what the reading found not to fit', { mismatches: [mismatch] }, '/u'],
    ['more stamps than snapshots', { stamps: uniform(6), fields: [{ values: movingValues(5) }] }, '/t'],
    ['fewer stamps than snapshots', { stamps: uniform(4), fields: [{ values: movingValues(5) }] }, '/t'],
    ['fields of different lengths', { stamps: uniform(5), fields: [{ values: movingValues(5) }, { name: 'p', values: movingValues(4) }] }, '/p'],
    ['coordinates longer than the axis', { axes: [{ name: 'x', nodes: uniform(5), count: 4 }] }, '/x'],
  ])('fires once for %s', (_name, plan, path) => {
    expect(judge(readingShapeMismatch, makeSubject(plan)).map((found) => found.path)).toEqual([path]);
  });

  it.each<[string, RecordPlan]>([
    ['shapes that fit', { stamps: uniform(5) }],
    ['one snapshot and one stamp', { stamps: [0], fields: [{ values: movingValues(1) }] }],
    ['axes of length 0 with as many coordinates', { fields: [{ values: [] }], axes: [{ name: 'x', nodes: [] }] }],
    ['axes without coordinates', { axes: [{ name: 'x', nodes: null, count: 4 }] }],
    ['no field', { stamps: uniform(5), fields: [] }],
  ])('is silent for %s', (_name, plan) => {
    expect(judge(readingShapeMismatch, makeSubject(plan))).toEqual([]);
  });
});
