import { describe, expect, it } from 'vitest';
import type { ElementType } from '#contract/reading.ts';
import { convertInto, elementBytes, numbersOf, swapBytes } from '../../../server/reading/element.ts';

const bytesOf = (array: ArrayBufferView) => new Uint8Array(array.buffer, array.byteOffset, array.byteLength);
const converted = (bytes: Uint8Array, dtype: ElementType) => {
  const count = bytes.length / elementBytes[dtype];
  const values = new Float64Array(count + 2).fill(-1);
  convertInto(values, 1, bytes, dtype, count);
  expect([values[0], values[count + 1]]).toEqual([-1, -1]);
  return [...values.subarray(1, count + 1)];
};

describe('elements as doubles', () => {
  it('of half precision: the corners of IEEE 754 binary16', () => {
    const bits = Uint16Array.of(0x0000, 0x8000, 0x3c00, 0xc000, 0x7bff, 0x0001, 0x0400, 0x03ff, 0x7c00, 0xfc00, 0x3555);
    expect(converted(bytesOf(bits), 'float16')).toEqual([0, -0, 1, -2, 65504, 2 ** -24, 2 ** -14, 1023 * 2 ** -24, Infinity, -Infinity, 0.333251953125]);
    expect(converted(bytesOf(Uint16Array.of(0x7e00)), 'float16')).toEqual([NaN]);
  });

  it('of 64-bit integers round to the nearest double', () => {
    const values = [0n, -1n, 2n ** 53n + 1n, -(2n ** 63n), 2n ** 63n - 1n, 1234567890123456789n];
    expect(converted(bytesOf(BigInt64Array.from(values)), 'int64')).toEqual(values.map(Number));
    const large = [2n ** 64n - 1n, 2n ** 63n + 12345n];
    expect(converted(bytesOf(BigUint64Array.from(large)), 'uint64')).toEqual(large.map(Number));
  });

  it.each<[ElementType, ArrayBufferView, number[]]>([
    ['float32', Float32Array.of(1.5, NaN), [1.5, NaN]],
    ['float64', Float64Array.of(1e300, -0), [1e300, -0]],
    ['int8', Int8Array.of(-128, 127), [-128, 127]],
    ['uint8', Uint8Array.of(0, 255), [0, 255]],
    ['int16', Int16Array.of(-32768), [-32768]],
    ['uint16', Uint16Array.of(65535), [65535]],
    ['int32', Int32Array.of(-(2 ** 31)), [-(2 ** 31)]],
    ['uint32', Uint32Array.of(2 ** 32 - 1), [2 ** 32 - 1]],
    ['bool', Uint8Array.of(0, 1, 7), [0, 1, 1]],
  ])('of %s', (dtype, array, values) => {
    expect(converted(bytesOf(array), dtype)).toEqual(values);
    expect([...numbersOf(bytesOf(array), dtype, values.length)]).toEqual(values);
  });

  it('at an odd place in memory are read all the same', () => {
    const bytes = new Uint8Array(25);
    bytes.set(bytesOf(Float64Array.of(1, 2, 3)), 1);
    expect([...numbersOf(bytes.subarray(1), 'float64', 3)]).toEqual([1, 2, 3]);
    expect(converted(bytes.subarray(1), 'int64')).toEqual([1, 2, 3].map((value) => Number(new BigInt64Array(Float64Array.of(value).buffer)[0])));
  });

  it.each([2, 4, 8])('of %i bytes are turned round', (size) => {
    const bytes = Uint8Array.from({ length: 2 * size }, (_, i) => i);
    swapBytes(bytes, size);
    expect([...bytes]).toEqual([...Array.from({ length: size }, (_, i) => size - 1 - i), ...Array.from({ length: size }, (_, i) => 2 * size - 1 - i)]);
  });
});
