import { describe, expect, it } from 'vitest';
import { npyFile, npyHeader } from '../../../../server/engine/release/npy.ts';

const text = (bytes: Uint8Array) => String.fromCharCode(...bytes);

describe('an NPY header', () => {
  it.each([
    ['a vector', npyHeader('float64', [5]), "{'descr': '<f8', 'fortran_order': False, 'shape': (5,), }"],
    ['a matrix in Fortran order', npyHeader('float32', [3, 4], true), "{'descr': '<f4', 'fortran_order': True, 'shape': (3, 4), }"],
    ['codes of one byte', npyHeader('int8', [0]), "{'descr': '|i1', 'fortran_order': False, 'shape': (0,), }"],
  ])('of %s follows NEP 1', (_, bytes, dictionary) => {
    // NEP 1: \x93NUMPY, version, little-endian length of the header, a dictionary padded with spaces and ended by a line feed.
    expect(text(bytes.subarray(0, 8))).toBe('\x93NUMPY\x01\x00');
    expect(bytes[8] + 256 * bytes[9]).toBe(bytes.length - 10);
    expect(bytes.length % 64).toBe(0);
    expect(text(bytes.subarray(10))).toMatch(/\n$/);
    expect(text(bytes.subarray(10)).trimEnd()).toBe(dictionary);
  });

  it('grows by whole blocks for long shapes', () => {
    expect(npyHeader('float64', [10 ** 15, 10 ** 15, 10 ** 15]).length).toBe(128);
  });
});

describe('an NPY file', () => {
  it('holds the values as they lie in memory after the header', () => {
    const values = Float64Array.of(1, -2, Math.PI), bytes = npyFile(values);
    expect(new Float64Array(bytes.slice(-24).buffer)).toEqual(values);
  });

  it('takes a part of a larger buffer for what it is', () => {
    const part = Int32Array.of(1, 2, 3, 4).subarray(1, 3);
    expect(new Int32Array(npyFile(part).slice(-8).buffer)).toEqual(Int32Array.of(2, 3));
  });
});
