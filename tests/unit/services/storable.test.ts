import { describe, expect, it } from 'vitest';
import { canonicalJson } from '../../../server/services/canonical-json.ts';
import { storable } from '../../../server/services/storable.ts';

describe('text from outside', () => {
  it('loses what PostgreSQL cannot store, at any depth, and nothing else', () => {
    expect(storable({ 'a\0': ['x\0y', { deep: '\ud800' }], kept: 'μ 😀 \\u0000', n: 1, none: null })).toEqual({ 'a\ufffd': ['x\ufffdy', { deep: '\ufffd' }], kept: 'μ 😀 \\u0000', n: 1, none: null });
  });

  it('leaves numbers, null and flags as they are', () => {
    expect([storable(3.5), storable(null), storable(false), storable([])]).toEqual([3.5, null, false, []]);
  });
});

describe('canonical JSON', () => {
  it('does not depend on the order of keys, but on that of lists', () => {
    expect(canonicalJson({ b: [{ y: 1, x: 2 }], a: 1 })).toBe(canonicalJson({ a: 1, b: [{ x: 2, y: 1 }] }));
    expect(canonicalJson([1, 2])).not.toBe(canonicalJson([2, 1]));
  });

  it('is the same after a way through JSON', () => {
    const value = { times: [0.1, NaN, -0], text: 'ü', none: null };
    expect(canonicalJson(JSON.parse(JSON.stringify(value)))).toBe(canonicalJson(value));
  });
});
