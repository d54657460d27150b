import { describe, expect, it } from 'vitest';
import { lookup3 } from '../../../server/reading/hdf5/structure/checksum.ts';

describe('lookup3', () => {
  // The values that driver5() of lookup3.c (B. Jenkins, 2006) gives for hashlittle with initial value 0.
  it.each([
    ['', 0xdeadbeef],
    ['Four score and seven years ago', 0x17770551],
  ])('of %j is that of its author', (text, value) => {
    expect(lookup3(new TextEncoder().encode(text))).toBe(value);
  });
});
