/** The web server as a process: it says when it listens, and ends cleanly when it is told to. */
import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../setup/database.ts';

let database: TestDatabase;
let storage: string;
beforeAll(async () => {
  database = await createTestDatabase();
  storage = await mkdtemp(join(tmpdir(), 'pennyweight-main-'));
});
afterAll(async () => {
  await database.drop();
  await rm(storage, { recursive: true, force: true });
});

const secret = 'a-secret-for-sessions-of-this-test-only';
const settings = () => ({ ...process.env, DATABASE_URL: database.url, PENNYWEIGHT_STORAGE: storage, PENNYWEIGHT_DEMO: '1', BETTER_AUTH_SECRET: secret, HOST: '127.0.0.1', PORT: '0', LOG_LEVEL: 'info', NODE_ENV: 'production' });

function start(env: NodeJS.ProcessEnv) {
  const child: ChildProcess = spawn(process.execPath, ['--import', 'tsx', 'server/main.ts'], { env, stdio: ['ignore', 'pipe', 'pipe'] });
  const output = { text: '' };
  for (const stream of [child.stdout!, child.stderr!]) stream.setEncoding('utf8').on('data', (text: string) => (output.text += text));
  started.push(child);
  return { child, output };
}

const started: ChildProcess[] = [];
afterEach(() => started.splice(0).forEach((child) => child.kill('SIGKILL')));

it.each(['SIGTERM', 'SIGINT'] as const)('listens, answers, and ends with status 0 on %s', async (signal) => {
  const { child, output } = start(settings());
  const closed = once(child, 'close');
  while (!output.text.includes('"listening"') && child.exitCode === null) await new Promise((resolve) => setTimeout(resolve, 50));
  const lines = output.text.trim().split('\n').map((line) => JSON.parse(line) as { msg: string; port: number });
  const { port } = lines.find((line) => line.msg === 'listening')!;
  // A connection that is kept open must not hold the end up.
  expect(await (await fetch(`http://127.0.0.1:${port}/api/health`)).json()).toMatchObject({ ok: true, demo: true });
  child.kill(signal);
  expect(await closed).toEqual([0, null]);
  expect(output.text).not.toContain(secret);
});

it('refuses to start on settings that are not complete, in one sentence', async () => {
  const { child, output } = start({ ...settings(), BETTER_AUTH_SECRET: 'short' });
  const [code] = (await once(child, 'close')) as [number];
  expect(code).not.toBe(0);
  expect(output.text).toContain('BETTER_AUTH_SECRET');
  expect(output.text).not.toContain(database.url);
});
