import { describe, expect, it } from 'vitest';
import { parseLiteral } from '../../../server/reading/npy/python-literal.ts';

describe('a Python literal', () => {
  it.each([
    ["{'descr': '<f8', 'fortran_order': False, 'shape': (3, 4), }", new Map<string, unknown>([['descr', '<f8'], ['fortran_order', false], ['shape', [3, 4]]])],
    ['{"a": (5,), \'b\': (), }', new Map<string, unknown>([['a', [5]], ['b', []]])],
    ['(3L, 4L)', [3, 4]],
    ['(5)', 5],
    ['[1, [2, (3,)], None, True]', [1, [2, [3]], null, true]],
    [`'it\\'s'`, "it's"],
    ['-7', -7],
    ['  {}  \n', new Map()],
  ])('%s', (text, value) => {
    expect(parseLiteral(text)).toEqual(value);
  });

  it.each([
    '', '{', '{1: 2}', "{'a': 1, 'a': 2}", "{'a' 1}", '(1, 2', '[1 2]', "'open", '__import__("os")', '1+1', '{} {}', 'True or False', '1.5', '0x10', "b'x'",
    `'\\x41'`, '['.repeat(40), '9'.repeat(30),
  ])('refuses %s', (text) => {
    expect(() => parseLiteral(text)).toThrow(expect.objectContaining({ code: 'file-unreadable', message: expect.stringContaining('is expected') }));
  });
});
