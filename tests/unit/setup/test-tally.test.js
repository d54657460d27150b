import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { fileFilters, selectTests } from '../../../server/setup/test-selection.js';
import { countCheck, countRun, isGreen, lastLine, newTally } from '../../../server/setup/test-tally.js';

const folder = mkdtempSync(join(tmpdir(), 'pennyweight-tally-'));
afterAll(() => rmSync(folder, { recursive: true }));

function report(passed, failed, testResults = [], rest = {}) {
  return { numPassedTests: passed, numFailedTests: failed, numPendingTests: 0, numTodoTests: 0, testResults, ...rest };
}

function tallyOf(content, code) {
  const reportFile = join(folder, 'report.json');
  writeFileSync(reportFile, typeof content === 'string' ? content : JSON.stringify(content));
  const tally = newTally();
  countRun(tally, { code, reportFile });
  return tally;
}

const unloadable = { status: 'failed', assertionResults: [] };
const failing = { status: 'failed', assertionResults: [{ status: 'failed' }, { status: 'passed' }] };

describe('the tally of a run', () => {
  it.each([
    ['all passed', report(3, 0), 0, [3, 0]],
    ['one failed', report(3, 1, [failing]), 1, [3, 1]],
    ['a file that did not load', report(3, 0, [unloadable]), 1, [3, 1]],
    ['both', report(3, 1, [failing, unloadable]), 1, [3, 2]],
    ['an unhandled error after all had passed', report(3, 0), 1, [3, 1]],
    ['a torn report', '{"numPassed', 0, [0, 1]],
    ['a crash', '', 134, [0, 1]],
  ])('%s', (_, content, code, [passed, failed]) => {
    expect(tallyOf(content, code)).toMatchObject({ passed, failed });
  });

  it('is not green when nothing ran', () => {
    expect(isGreen(tallyOf(report(0, 0), 0))).toBe(false);
    expect(isGreen(tallyOf(report(1, 0), 0))).toBe(true);
  });

  it('ends with one plain line', () => {
    const tally = tallyOf(report(3, 1, [failing], { numPendingTests: 2 }), 1);
    countCheck(tally, true);
    countCheck(tally, false);
    expect(lastLine(tally)).toBe('4 passed, 2 failed, 2 skipped');
    expect(lastLine(newTally())).toBe('0 passed, 0 failed');
  });
});

describe('the selection', () => {
  it('is everything without a filter', () => {
    expect(selectTests([])).toEqual({ checks: true, browser: true });
    expect(selectTests(['--bail', '1'])).toEqual({ checks: true, browser: true });
  });

  it('leaves out what no filter names', () => {
    expect(selectTests(['tests/unit/setup'])).toEqual({ checks: false, browser: false });
    expect(selectTests(['./tests/unit/setup'])).toEqual({ checks: false, browser: false });
  });

  it("does not take an option's value for a filter", () => {
    expect(fileFilters(['-t', 'a name', 'tests/unit', '--reporter=dot'])).toEqual(['tests/unit']);
  });
});
