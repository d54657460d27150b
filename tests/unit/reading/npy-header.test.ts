import { describe, expect, it } from 'vitest';
import { readNpyHeader } from '../../../server/reading/npy/npy-header.ts';
import { folderForTests, npy } from './bytes-on-disk.ts';

const folder = folderForTests();
const headerOf = (header: string, bytes = 0, version: 1 | 2 | 3 = 1) => readNpyHeader(folder.open('a.npy', npy(header, new Uint8Array(bytes), version)));
const header = (descr: string, shape = '(2, 3)', fortran = 'False') => `{'descr': ${descr}, 'fortran_order': ${fortran}, 'shape': ${shape}, }`;

describe('an NPY header', () => {
  it.each([1, 2, 3] as const)('of version %i.0 is read', (version) => {
    const text = header("'<f4'");
    expect(headerOf(text, 24, version)).toEqual({
      dtype: 'float32', byteOrder: 'little', itemBytes: 4, fortran: false, shape: [2, 3], offset: (version === 1 ? 10 : 12) + text.length + 1,
    });
  });

  it.each([
    ["'>f8'", 'float64', 'big', 8], ["'=f8'", 'float64', 'little', 8], ["'<f2'", 'float16', 'little', 2], ["'|b1'", 'bool', 'none', 1],
    ["'|i1'", 'int8', 'none', 1], ["'<u2'", 'uint16', 'little', 2], ["'>i8'", 'int64', 'big', 8], ["'<c8'", 'complex64', 'little', 8],
    ["'>c16'", 'complex128', 'big', 16], ["'<U5'", 'string', 'none', 20], ["'<M8[ns]'", 'other', 'little', 8], ["'<f16'", 'other', 'little', 16],
  ])('of type %s is %s', (descr, dtype, byteOrder, itemBytes) => {
    expect(headerOf(header(descr), 6 * itemBytes)).toMatchObject({ dtype, byteOrder, itemBytes });
  });

  it('of Fortran order, of a scalar, and of an empty array are read', () => {
    expect(headerOf(header("'<f4'", '(2, 3)', 'True'), 24)).toMatchObject({ fortran: true, shape: [2, 3] });
    expect(headerOf(header("'<f4'", '()'), 4).shape).toEqual([]);
    expect(headerOf(header("'<f4'", '(0, 1000000)')).shape).toEqual([0, 1000000]);
  });

  it.each([
    [header("'|O'"), /pickled Python objects, which are never loaded/],
    [header("[('a', '<f4'), ('b', '<i4')]"), /records with named parts/],
    [header("'<f4'", '(-1, 3)'), /impossible shape/],
    [header("'<f4'", '(2.5, 3)'), /header/],
    [header("'<f4'", '[2, 3]').replace('False', '0'), /values of the wrong kind/],
    ["{'descr': '<f4', 'shape': (2, 3), }", /without exactly descr, fortran_order and shape/],
    [header("'<f4'").replace('}', "'more': 1}"), /without exactly/],
    ['()', /without exactly/],
    [header("'<f4'", `(${'1, '.repeat(40)})`), /impossible shape/],
    [header("''"), /element type/],
  ])('%s is refused', (text, sentence) => {
    expect(() => headerOf(text, 100)).toThrow(expect.objectContaining({ code: 'file-unreadable', message: expect.stringMatching(sentence) }));
  });

  it.each([
    ['(1000000, 1000000)', 4e12],
    ['(3,)', 12],
    ['(9007199254740991, 9007199254740991)', 4 * 9007199254740991 ** 2],
  ])('of a shape %s larger than the file is refused with both sizes before anything is allocated', (shape, bytes) => {
    const text = header("'<f4'", shape);
    const offset = 10 + text.length + 1;
    expect(() => headerOf(text, 8)).toThrow(
      expect.objectContaining({ details: { file: 'a.npy', expected: bytes + offset, actual: 8 + offset }, message: expect.stringContaining('is cut off') }),
    );
  });

  it('that claims to be longer than the file, or than any header, is refused', () => {
    const cut = npy(header("'<f4'")).subarray(0, 30);
    expect(() => readNpyHeader(folder.open('cut.npy', cut))).toThrow(/30 are there/);
    const long = npy(header("'<f4'"), new Uint8Array(0), 2);
    new DataView(long.buffer, long.byteOffset).setUint32(8, 2 ** 31, true);
    expect(() => readNpyHeader(folder.open('long.npy', long))).toThrow(/claims a header of 2147483648 bytes/);
    const future = npy(header("'<f4'"), new Uint8Array(24));
    future[6] = 4;
    expect(() => readNpyHeader(folder.open('future.npy', future))).toThrow(/version 4\.0/);
  });
});
