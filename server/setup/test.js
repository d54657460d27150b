/** npm test: the same set-up as npm start with a cluster of its own, then every check and every test. */
import { rmSync } from 'node:fs';
import { join } from 'node:path';
import { announce, seconds } from './announce.js';
import { ensureBuilt } from './build.js';
import { checkout, logs, prepareStorage } from './checkout.js';
import { openCluster } from './cluster.js';
import { run } from './command.js';
import { ensureDebianPackages } from './debian-packages.js';
import { interruption, listenForInterruption } from './interruption.js';
import { ensureNodePackages } from './node-packages.js';
import { checkNodeVersion } from './node-version.js';
import { explain } from './refusal.js';
import { selectTests } from './test-selection.js';
import { countCheck, countRun, isGreen, lastLine, newTally } from './test-tally.js';

const program = (...path) => join(checkout, 'node_modules', ...path);
const checks = {
  types: [program('typescript7', 'bin', 'tsc'), '-p', 'tsconfig.json', '--noEmit'],
  lint: [program('eslint', 'bin', 'eslint.js'), '.', '--max-warnings', '0'],
  rooms: [
    program('dependency-cruiser', 'bin', 'dependency-cruise.mjs'),
    '--config',
    '.dependency-cruiser.cjs',
    'server',
    'src',
  ],
};
// A run that hangs must end and be counted as failed before the machine's own limit ends everything without a word.
const deadline = 30 * 60_000;

const args = process.argv.slice(2);
const tally = newTally();

async function check(name, work) {
  const begun = performance.now();
  const { code, output } = await work().catch((error) => {
    if (interruption.aborted) throw error;
    return { code: 1, output: explain(error) };
  });
  countCheck(tally, code === 0);
  announce(name, code === 0 ? `passed in ${seconds(begun)}` : `FAILED\n${output}\n`);
}

const checkProgram = (name) => check(name, () => run(process.execPath, checks[name]));
const checkBuild = () =>
  check('build', async () => {
    await ensureBuilt();
    return { code: 0, output: '' };
  });

async function runTests(name, projects) {
  const reportFile = join(logs, `tests-${name}.json`);
  rmSync(reportFile, { force: true });
  const { code } = await run(
    process.execPath,
    [
      ...[program('vitest', 'vitest.mjs'), 'run', ...projects.map((project) => `--project=${project}`)],
      ...['--passWithNoTests', '--reporter=default', '--reporter=json', `--outputFile.json=${reportFile}`, ...args],
    ],
    { show: true, deadline },
  );
  countRun(tally, { code, reportFile });
}

async function testEverything() {
  checkNodeVersion();
  listenForInterruption();
  prepareStorage();
  await ensureNodePackages();
  await ensureDebianPackages({
    required: ['postgres', 'openblas', 'chromium', 'fonts', 'python'],
    command: 'npm test',
  });
  const selected = selectTests(args);
  const cluster = await openCluster('test-postgres', { durable: false });
  try {
    const first = async () => {
      if (selected.checks) await checkProgram('types');
      if (selected.browser) await checkBuild();
    };
    const second = async () => {
      if (!selected.checks) return;
      await checkProgram('rooms');
      await checkProgram('lint');
    };
    await Promise.all([first(), second()]);
    await runTests('code', ['unit', 'reference', 'api', 'web']);
    if (selected.browser) await runTests('browser', ['browser']);
  } finally {
    await cluster.close();
  }
}

try {
  await testEverything();
} catch (error) {
  process.stderr.write(`\n${interruption.aborted ? `stopped by ${interruption.reason}` : explain(error)}\n`);
  tally.failed += 1;
}
process.exitCode = isGreen(tally) ? 0 : 1;
process.stdout.write(`\n${lastLine(tally)}\n`);
