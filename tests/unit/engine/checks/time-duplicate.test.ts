import { describe, expect, it } from 'vitest';
import { orderStep } from '#contract/recipe.ts';
import { timeDuplicate } from '../../../../server/engine/checks/time-duplicate.ts';
import { judge, makeSubject, movingValues, uniform } from './survey-factory.ts';

describe('time/duplicate', () => {
  it('names the later of two equal stamps and offers to drop it', () => {
    const [found, ...more] = judge(timeDuplicate, makeSubject({ stamps: [0, 1, 1, 2] }));
    expect(more).toEqual([]);
    expect(found.evidence).toMatchObject({ indices: [2], times: [1], count: 1, fieldsDiffer: 1 });
    expect(orderStep.parse({ step: found.remedy!.step, ...found.remedy!.parameters }).dropDuplicates).toBe(true);
  });

  it('takes neighbours for equal that differ by rounding, and lists what to drop', () => {
    const [found] = judge(timeDuplicate, makeSubject({ stamps: [0, 0.1, 0.3, 0.1 + 0.2, 0.4] }));
    expect(found.evidence).toMatchObject({ indices: [3], count: 1 });
    expect(found.remedy!.parameters.drop).toMatchObject([{ indices: [3] }]);
  });

  it('says so when the snapshots differ at equal stamps, and not when they are copies', () => {
    const values = movingValues(4);
    const copies = judge(
      timeDuplicate,
      makeSubject({ stamps: [0, 1, 1, 2], fields: [{ values: [values[0], values[1], values[1], values[2]] }] }),
    );
    expect(copies[0].message).not.toContain('rounded too coarsely');
    const different = judge(timeDuplicate, makeSubject({ stamps: [0, 1, 1, 2], fields: [{ values }] }));
    expect(different[0].message).toContain('in 1 of them the fields differ');
  });

  it('finds stamps that float32 cannot tell apart: 0.002 s steps at 1e5 s', () => {
    const stamps = Float32Array.from(uniform(40, 0.002, 1e5));
    expect(judge(timeDuplicate, makeSubject({ stamps, stampType: 'float32' }))[0].evidence.count).toBeGreaterThan(20);
  });

  it.each<[string, ArrayLike<number>]>([
    ['distinct stamps', uniform(30)],
    ['stamps that are close, by more than rounding', [1, 1 + 1e-12, 2]],
    ['the overlap of a restart', [0, 1, 2, 3, 2, 3, 4]],
    ['float32 stamps of 1e5 s with 0.01 s steps', Float32Array.from(uniform(200, 0.01, 1e5))],
    ['several stamps that are no numbers', [0, NaN, NaN, 3]],
    ['one stamp', [1]],
    ['no stamp', []],
  ])('is silent for %s', (_name, stamps) => {
    expect(judge(timeDuplicate, makeSubject({ stamps }))).toEqual([]);
  });
});
