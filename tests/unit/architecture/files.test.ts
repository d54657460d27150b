/** One thing a file, named for it: what can be seen of that from outside. */
import { basename, dirname } from 'node:path';
import { describe, expect, it } from 'vitest';
import { sourceFiles } from './source-files.ts';

const files = sourceFiles('server', 'src', 'tests');
const forbiddenName = /(^|[-_.])(utils?|helpers?|common|misc|lib|managers?)([-_.]|$)/i;

describe('source files', () => {
  it('are found', () => {
    expect(files.length).toBeGreaterThan(100);
  });

  it('are named in words of the trade', () => {
    const named = files.filter(({ path }) =>
      [basename(path), ...dirname(path).split('/')].some((word) => forbiddenName.test(word)),
    );
    expect(named.map(({ path }) => path)).toEqual([]);
  });

  it('have at most 400 lines, or say why not in a comment "justified: ..."', () => {
    const long = files.filter(({ lines, text }) => lines > 400 && !/justified: \S/.test(text));
    expect(long.map(({ path, lines }) => `${path}: ${lines} lines`)).toEqual([]);
  });

  it('have a median below 100 lines', () => {
    const lengths = sourceFiles('server', 'src')
      .map(({ lines }) => lines)
      .sort((a, b) => a - b);
    expect(lengths[lengths.length >> 1]).toBeLessThan(100);
  });

  it('refuse with the one vocabulary of errors', () => {
    const thrower = new RegExp(`throw new ${'Error'}\\(`);
    expect(files.filter(({ text }) => thrower.test(text)).map(({ path }) => path)).toEqual([]);
  });
});
