import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { flatArray } from '../../../server/reading/flat-array.ts';
import { sizeOf } from '../../../server/reading/stored-array.ts';
import { folderForTests } from './bytes-on-disk.ts';

const folder = folderForTests();

describe('an array in one piece', () => {
  it('gives any box as the index arithmetic of C order says', () => {
    const values = Float32Array.from({ length: 30_000 }, (_, i) => i);
    const file = folder.open('flat.bin', Buffer.concat([Buffer.alloc(12), Buffer.from(values.buffer)]));
    const axis = fc.integer({ min: 1, max: 30 }).chain((size) => fc.tuple(fc.constant(size), fc.nat(size - 1)).chain(([all, start]) => fc.tuple(fc.constant(all), fc.constant(start), fc.integer({ min: 1, max: all - start }))));
    fc.assert(
      fc.property(fc.array(axis, { minLength: 1, maxLength: 3 }), (axes) => {
        const [shape, start, count] = [0, 1, 2].map((part) => axes.map((one) => one[part]));
        const box = flatArray({ path: '/u', file, offset: 12, shape, dtype: 'float32', itemBytes: 4, bigEndian: false }).readBox(start, count);
        const found = new Float32Array(box.slice().buffer);
        const expected = Array.from({ length: sizeOf(count) }, (_, k) => {
          let rest = k;
          let element = 0;
          let stride = 1;
          for (let i = shape.length - 1; i >= 0; i--) {
            element += (start[i] + (rest % count[i])) * stride;
            rest = Math.floor(rest / count[i]);
            stride *= shape[i];
          }
          return element;
        });
        expect([...found]).toEqual(expected);
      }),
      { numRuns: 150, seed: 4 },
    );
  });

  it('reads runs that lie far apart one by one, and big-endian numbers turned round', () => {
    const values = Float64Array.from({ length: 40_000 }, (_, i) => i);
    const bytes = Buffer.from(values.buffer.slice(0)).swap64();
    const place = { path: '/u', file: folder.open('far.bin', bytes), offset: 0, shape: [4, 10_000], dtype: 'float64' as const, itemBytes: 8, bigEndian: true };
    const box = flatArray(place).readBox([1, 9990], [3, 2]);
    expect([...new Float64Array(box.slice().buffer)]).toEqual([19990, 19991, 29990, 29991, 39990, 39991]);
  });

  it('that ends too soon is refused with both lengths', () => {
    const place = { path: '/u', file: folder.open('short.bin', new Uint8Array(70)), offset: 10, shape: [10], dtype: 'float64' as const, itemBytes: 8, bigEndian: false };
    expect(() => flatArray(place).readBox([0], [10])).toThrow(expect.objectContaining({ code: 'file-unreadable', details: { file: 'short.bin', expected: 90, actual: 70 } }));
  });
});
