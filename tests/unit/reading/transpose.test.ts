import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { timeFirst } from '../../../server/reading/transpose.ts';

describe('turning a box to time first', () => {
  it('puts every element where [time][before][after] has it, bit for bit', () => {
    const sizes = fc.tuple(fc.integer({ min: 1, max: 70 }), fc.integer({ min: 1, max: 70 }), fc.constantFrom(1, 2, 3, 40), fc.constantFrom(1, 2, 4, 8));
    fc.assert(
      fc.property(sizes, ([before, times, after, itemBytes]) => {
        const bytes = Uint8Array.from({ length: before * times * after * itemBytes }, (_, i) => (i * 2654435761) >>> 24);
        const turned = timeFirst(bytes, itemBytes, before, times, after, new Uint8Array(bytes.length + 8));
        expect(turned.length).toBe(bytes.length);
        for (let a = 0; a < before; a++) {
          for (let t = 0; t < times; t++) {
            const run = after * itemBytes;
            const from = (a * times + t) * run;
            const to = (t * before + a) * run;
            if (Buffer.compare(bytes.subarray(from, from + run), turned.subarray(to, to + run)) !== 0) expect.unreachable(`node ${a}, time ${t}`);
          }
        }
      }),
      { numRuns: 60, seed: 2 },
    );
  });

  it('keeps the bits of whole numbers that are NaN as doubles', () => {
    const values = BigInt64Array.of(-1n, -2n, 0x7ff0000000000001n, 4n);
    const turned = timeFirst(new Uint8Array(values.buffer), 8, 2, 2, 1, new Uint8Array(32));
    expect([...new BigInt64Array(turned.buffer)]).toEqual([-1n, 0x7ff0000000000001n, -2n, 4n]);
  });
});
