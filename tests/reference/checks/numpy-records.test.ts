/** Evenness and gaps of stamps that NumPy made, printed and read back: by how they were made, and by NumPy's own medians. */
import { execFileSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import type { ElementType } from '#contract/reading.ts';
import { evennessOf } from '../../../server/engine/checks/evenness.ts';
import { findGaps } from '../../../server/engine/checks/time-gap.ts';

interface NumpyRecord {
  stamps: number[];
  dtype: ElementType;
  verdict: string;
  gaps: number[];
}

const records = JSON.parse(
  execFileSync('/usr/bin/python3', ['tests/reference/checks/numpy_records.py'], { encoding: 'utf8' }),
) as Record<string, NumpyRecord>;

describe('stamps made by NumPy', () => {
  it.each(Object.entries(records))('%s', (_name, { stamps, dtype, verdict, gaps }) => {
    const array = Float64Array.from(stamps);
    expect(evennessOf(array, dtype).verdict).toBe(verdict);
    expect(findGaps(array, 3, 2.1, 0.25).map(({ position }) => position)).toEqual(gaps);
  });

  it('covers gaps as well', () => {
    expect(records['outputs lost'].gaps).toHaveLength(2);
  });
});
