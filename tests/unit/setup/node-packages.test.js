import { describe, expect, it } from 'vitest';
import { packagesFit } from '../../../server/setup/node-packages.js';

const locked = {
  '': { version: '1.0.0' },
  'node_modules/a': { version: '1.2.3' },
  'node_modules/other-platform': { version: '4.0.0', optional: true },
};

describe('installed packages', () => {
  it.each([
    [
      'all there',
      { 'node_modules/a': { version: '1.2.3' }, 'node_modules/other-platform': { version: '4.0.0' } },
      true,
    ],
    ['but for an optional one', { 'node_modules/a': { version: '1.2.3' } }, true],
    ['none', {}, false],
    ['another version', { 'node_modules/a': { version: '1.2.4' } }, false],
    [
      'another version of an optional one',
      { 'node_modules/a': { version: '1.2.3' }, 'node_modules/other-platform': { version: '3.9.0' } },
      false,
    ],
    [
      'one that is no longer wanted',
      { 'node_modules/a': { version: '1.2.3' }, 'node_modules/gone': { version: '1.0.0' } },
      false,
    ],
    ['never or half installed', null, false],
  ])('%s', (_, installed, current) => {
    expect(packagesFit(locked, installed)).toBe(current);
  });

  it('need not hold what the lock itself calls extraneous', () => {
    expect(packagesFit({ 'node_modules/left': { version: '1.0.0', extraneous: true } }, {})).toBe(true);
  });
});
