/** Adds up what was tested: checks of our own (types, lint, ...) and the tests in Vitest's JSON reports. */
import { readFileSync } from 'node:fs';

export function newTally() {
  return { passed: 0, failed: 0, skipped: 0 };
}

export function countCheck(tally, succeeded) {
  if (succeeded) tally.passed += 1;
  else tally.failed += 1;
}

/** A file that failed without a failed test (it did not load, or a hook failed) counts as one failure. */
export function countReport(tally, report) {
  tally.passed += report.numPassedTests;
  tally.failed += report.numFailedTests;
  tally.skipped += report.numPendingTests + report.numTodoTests;
  for (const { status, assertionResults } of report.testResults) {
    if (status === 'failed' && !assertionResults.some((test) => test.status === 'failed')) tally.failed += 1;
  }
}

function readReport(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return null;
  }
}

/** Adds a run of Vitest; a run that failed without a counted failure (crash, unhandled error, no report) is one. */
export function countRun(tally, { code, reportFile }) {
  const report = readReport(reportFile);
  const before = tally.failed;
  if (report !== null) countReport(tally, report);
  if ((code !== 0 && tally.failed === before) || report === null) tally.failed += 1;
}

/** The last line of npm test. */
export function lastLine({ passed, failed, skipped }) {
  return `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`;
}

export function isGreen({ passed, failed }) {
  return failed === 0 && passed > 0;
}
