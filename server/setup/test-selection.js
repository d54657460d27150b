/** Which parts of npm test a command line asks for. */
import { existsSync, readdirSync } from 'node:fs';
import { join, relative } from 'node:path';
import { checkout } from './checkout.js';

const optionsWithValue = new Set([
  '-t',
  '--testNamePattern',
  '--project',
  '--reporter',
  '--bail',
  '--retry',
  '--testTimeout',
]);

/** The words that are filters of file names and not options or their values. */
export function fileFilters(args) {
  return args.filter((arg, i) => !arg.startsWith('-') && !optionsWithValue.has(args[i - 1]));
}

function testFiles(folder) {
  if (!existsSync(folder)) return [];
  return readdirSync(folder, { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile() && /\.test\.tsx?$/.test(entry.name))
    .map((entry) => relative(checkout, join(entry.parentPath ?? entry.path, entry.name)));
}

/** Everything without filters; with them only the tests whose path holds one of them, as Vitest sees it. */
export function selectTests(args) {
  const filters = fileFilters(args).map((filter) => relative(checkout, join(checkout, filter)));
  const browser = testFiles(join(checkout, 'tests', 'browser'));
  return {
    checks: filters.length === 0,
    browser: filters.length === 0 || browser.some((file) => filters.some((filter) => file.includes(filter))),
  };
}
