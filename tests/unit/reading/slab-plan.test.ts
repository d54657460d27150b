import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { contiguousRuns, refuseLargeChunks, slabs, slabSizes } from '../../../server/reading/slab-plan.ts';
import { sizeOf } from '../../../server/reading/stored-array.ts';

const axes = fc.array(fc.record({ size: fc.integer({ min: 1, max: 9 }), chunk: fc.integer({ min: 1, max: 12 }) }), { minLength: 1, maxLength: 4 });

describe('boxes over an array', () => {
  it('cover every element once, and split no chunk', () => {
    fc.assert(
      fc.property(axes, fc.integer({ min: 1, max: 2000 }), fc.boolean(), (axis, budget, chunked) => {
        const shape = axis.map(({ size }) => size);
        const chunk = chunked ? axis.map(({ chunk: size }) => size) : null;
        const sizes = slabSizes(shape, chunk, budget);
        const least = sizeOf(shape.map((size, i) => Math.min(size, chunk?.[i] ?? 1)));
        expect(sizeOf(sizes)).toBeLessThanOrEqual(Math.max(budget, least));
        const seen = new Uint8Array(sizeOf(shape));
        for (const box of slabs(shape, sizes, shape.map((_, i) => i))) {
          let expected = 0;
          for (const { node, at, length } of contiguousRuns(box, shape)) {
            expect(at).toBe(expected);
            expected += length;
            for (let i = 0; i < length; i++) seen[node + i]++;
          }
          expect(expected).toBe(sizeOf(box.count));
          box.start.forEach((start, i) => {
            const step = chunk?.[i] ?? 1;
            expect(start % step === 0, 'a box begins with a chunk').toBe(true);
            const end = start + box.count[i];
            expect(end === shape[i] || end % step === 0, 'a box ends with a chunk').toBe(true);
          });
        }
        expect(seen.every((times) => times === 1)).toBe(true);
      }),
      { numRuns: 300, seed: 1 },
    );
  });

  it('grow along the fastest axis first', () => {
    expect(slabSizes([100, 10, 20], null, 20)).toEqual([1, 1, 20]);
    expect(slabSizes([100, 10, 20], null, 600)).toEqual([3, 10, 20]);
    // time last in frames: whole frames, as many as fit
    expect(slabSizes([10, 20, 100], [10, 20, 1], 1000)).toEqual([10, 20, 5]);
  });

  it('of an array with an empty axis are none', () => {
    expect([...slabs([3, 0], [3, 1], [0, 1])]).toEqual([]);
  });

  it('of a chunk over the limit are refused, of one at the limit are not', () => {
    expect(() => refuseLargeChunks('/u', [1024, 1024], 4, 2 ** 22 - 1)).toThrow(expect.objectContaining({ code: 'limit-exceeded' }));
    expect(() => refuseLargeChunks('/u', [1024, 1024], 4, 2 ** 22)).not.toThrow();
    expect(() => refuseLargeChunks('/u', null, 8, 1)).not.toThrow();
  });
});
