/** Runs the real command in a process of its own, on real files in a temporary folder. */
import { execFile, execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { run } from '../../../server/cli/main.ts';

export interface Run {
  status: number;
  out: string;
  err: string;
}

const launcher = 'server/cli/pennyweight.js';

export function pennyweight(...args: string[]): Promise<Run> {
  return new Promise((resolve) => {
    execFile(process.execPath, [launcher, ...args], { maxBuffer: 64 * 2 ** 20 }, (error, out, err) =>
      resolve({ status: error ? Number(error.code) : 0, out, err }),
    );
  });
}

/** The same without a process of its own, for what ends before any archive is read: a tenth of the time. */
export async function runHere(...args: string[]): Promise<Run> {
  let out = '';
  let err = '';
  const status = await run(args, {
    result: (text) => (out += `${text}\n`),
    message: (text) => (err += `${text}\n`),
    progress: () => undefined,
  });
  return { status, out, err };
}

/** The one JSON object of standard output; anything beside it fails. */
export function jsonOf(run: Run): unknown {
  return JSON.parse(run.out);
}

export interface Expected {
  sha256: string;
  bytes: number;
  min: number;
  max: number;
  mean: number;
  norm: number[];
  simpson: number[];
  singular_values: number[];
  spaceSum: number;
}

/** Writes the archives of records.py; `at` names a file among them. */
export function makeArchives(): { at: (name: string) => string; expected: Expected; remove: () => void } {
  const folder = mkdtempSync(join(tmpdir(), 'pennyweight-cli-'));
  const expected = JSON.parse(
    execFileSync('/usr/bin/python3', ['tests/unit/cli/records.py', folder], { encoding: 'utf8' }),
  ) as Expected;
  return { at: (name) => join(folder, name), expected, remove: () => rmSync(folder, { recursive: true, force: true }) };
}
