/** The walls between the rooms, and that the checker of the walls has really looked. */
import { execFile } from 'node:child_process';
import { cpSync, mkdirSync, mkdtempSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { promisify } from 'node:util';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { checkout, sourceFiles } from './source-files.ts';

interface Report {
  modules: { source: string }[];
  summary: { violations: { rule: { name: string }; from: string; to: string }[] };
}

/** Runs the checker as npm test does; it ends with the number of violations, which are also in the report. */
async function cruise(folder: string): Promise<Report> {
  const program = join(checkout, 'node_modules', 'dependency-cruiser', 'bin', 'dependency-cruise.mjs');
  const args = [program, '--config', '.dependency-cruiser.cjs', '--output-type', 'json', 'server', 'src'];
  const report = await promisify(execFile)(process.execPath, args, { cwd: folder, maxBuffer: 2 ** 28 }).catch(
    (failure: { stdout: string }) => failure,
  );
  return JSON.parse(report.stdout) as Report;
}

const inWords = ({ rule, from, to }: Report['summary']['violations'][number]) => `${rule.name}: ${from} -> ${to}`;

describe('the walls between the rooms', () => {
  let report: Report;
  beforeAll(async () => {
    report = await cruise(checkout);
  }, 60_000);

  it('are not passed the wrong way', () => {
    expect(report.summary.violations.map(inWords)).toEqual([]);
  });

  it('are checked in every file', () => {
    const seen = new Set(report.modules.map((module) => module.source));
    const files = sourceFiles('server', 'src').map((file) => file.path);
    const unseen = files.filter((path) => /(?<!\.d)\.tsx?$/.test(path) && !seen.has(path));
    expect(unseen).toEqual([]);
    expect(files.length).toBeGreaterThan(50);
  });
});

/** One import that each wall must stop: the checker passes in silence when a pattern no longer fits the tree. */
const trespasses: [rule: string, from: string, to: string][] = [
  ['server-engine-imports', 'server/engine/probe.ts', 'server/storage/probe.ts'],
  ['server-reading-imports', 'server/reading/probe.ts', 'server/db/probe.ts'],
  ['server-http-imports', 'server/http/probe.ts', 'server/engine/probe.ts'],
  ['server-jobs-imports', 'server/jobs/probe.ts', 'server/storage/probe.ts'],
  ['server-services-imports', 'server/services/probe.ts', 'server/reading/probe.ts'],
  ['server-db-imports', 'server/db/other.ts', 'server/services/probe.ts'],
  ['repositories-belong-to-services', 'server/access/probe.ts', 'server/db/repositories/probe.ts'],
  ['nobody-imports-http', 'server/cli/probe.ts', 'server/http/probe.ts'],
  ['nobody-imports-the-wiring', 'server/http/other.ts', 'server/app.ts'],
  ['engine-is-pure', 'server/engine/other.ts', 'node:fs'],
  ['h5wasm-stays-in-its-room', 'server/services/other.ts', 'h5wasm'],
  ['koffi-stays-in-its-room', 'server/jobs/other.ts', 'koffi'],
  ['pg-stays-in-its-room', 'server/storage/other.ts', 'pg'],
  ['express-stays-in-its-room', 'server/services/third.ts', 'express'],
  ['pages-know-only-the-contract', 'src/components/probe.tsx', 'server/engine/probe.ts'],
  ['features-are-strangers', 'src/features/one/probe.tsx', 'src/features/two/probe.tsx'],
  ['features-do-not-know-the-app', 'src/features/two/other.tsx', 'src/app/probe.tsx'],
  ['shared-parts-know-no-feature', 'src/beam/probe.tsx', 'src/features/two/probe.tsx'],
  ['no-circle', 'server/mail/one.ts', 'server/mail/two.ts'],
  ['resolvable', 'server/mail/three.ts', 'server/mail/nothing.ts'],
  ['no-development-package-in-the-server', 'server/mail/four.ts', 'vitest'],
];

describe('the checker of the walls', () => {
  const folder = mkdtempSync(join(tmpdir(), 'pennyweight-rooms-'));
  afterAll(() => rmSync(folder, { recursive: true }));

  it('stops each trespass', async () => {
    for (const file of ['.dependency-cruiser.cjs', 'package.json', 'tsconfig.json'])
      cpSync(join(checkout, file), join(folder, file));
    symlinkSync(join(checkout, 'node_modules'), join(folder, 'node_modules'));
    const write = (path: string, text: string) => {
      mkdirSync(dirname(join(folder, path)), { recursive: true });
      writeFileSync(join(folder, path), text);
    };
    const isFile = (to: string) => /\.tsx?$/.test(to);
    for (const [, , to] of trespasses.filter((each) => isFile(each[2]) && !each[2].includes('nothing')))
      write(to, 'export const value = 1;\n');
    for (const [, from, to] of trespasses) {
      const up = '../'.repeat(from.split('/').length - 1);
      write(from, `import * as other from '${isFile(to) ? up + to : to}';\nexport const value = other;\n`);
    }
    write('server/mail/two.ts', `import * as other from './one.ts';\nexport const value = other;\n`);
    const stopped = (await cruise(folder)).summary.violations.map(({ rule, from }) => `${rule.name} ${from}`);
    for (const [rule, from] of trespasses) expect(stopped).toContain(`${rule} ${from}`);
  }, 60_000);
});
