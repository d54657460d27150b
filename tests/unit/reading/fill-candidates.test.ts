import { describe, expect, it } from 'vitest';
import type { ArrayInfo } from '#contract/reading.ts';
import { fillCandidates } from '../../../server/reading/survey/fill-candidates.ts';

const candidates = (dtype: ArrayInfo['dtype'], fillValue: number | null = null, attributes: ArrayInfo['attributes'] = {}) => fillCandidates({ dtype, fillValue, attributes });
const valuesOf = (...parameters: Parameters<typeof candidates>) => candidates(...parameters).map(({ value }) => value);

describe('fill candidates', () => {
  it('are what the type stores of a constant', () => {
    expect(valuesOf('float32')).toContain(Math.fround(9.969209968386869e36));
    expect(valuesOf('float32')).not.toContain(1e20);
    expect(valuesOf('float64')).toEqual(expect.arrayContaining([1e20, 9.969209968386869e36, -9999]));
    expect(valuesOf('int16')).toEqual([-9999, -999, -32767]);
    expect(valuesOf('uint8')).toEqual([]);
    expect(valuesOf('float16')).toEqual([-999]);
  });

  it('include declared values, once', () => {
    expect(candidates('float32', 1e20, { missing_value: [1e20, 7], _FillValue: -1 }).filter(({ declared }) => declared)).toEqual([
      { value: Math.fround(1e20), declared: true },
      { value: -1, declared: true },
      { value: 7, declared: true },
    ]);
  });

  it('never include zero, nor what is no number', () => {
    expect(candidates('float64', 0, { _FillValue: 0, missing_value: 'NaN' }).filter(({ declared }) => declared)).toEqual([]);
  });
});
