/** The built application for browser tests: its web server and its worker on a database and a storage folder of their own. */
import { spawn, type ChildProcess } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { once } from 'node:events';
import { createWriteStream } from 'node:fs';
import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { fileURLToPath } from 'node:url';
import { PennyweightError } from '#contract/error.ts';
import { createTestDatabase } from './database.ts';

const checkout = fileURLToPath(new URL('../..', import.meta.url));

async function freePort(): Promise<number> {
  const probe = createServer().listen(0, '127.0.0.1');
  await once(probe, 'listening');
  const { port } = probe.address() as AddressInfo;
  probe.close();
  await once(probe, 'close');
  return port;
}

type Part = 'web' | 'worker';
const programs: Record<Part, string> = { web: 'dist/server/main.js', worker: 'dist/server/worker.js' };

export interface RunningApplication {
  url: string;
  databaseUrl: string;
  storage: string;
  /** Starts a part that was killed; resolves when it answers. */
  start(part: Part): Promise<void>;
  /** Ends a part without giving it time for anything, as a power cut would. */
  kill(part: Part): Promise<void>;
  /** What a part has written to its log so far. */
  log(part: Part): Promise<string>;
  /** Ends all of it and drops its database and storage; fails when a part does not end by itself. */
  stop(): Promise<void>;
}

/** `demo` seeds the demo first; `environment` adds to the settings. */
export async function startApplication(
  options: { demo?: boolean; environment?: Record<string, string> } = {},
): Promise<RunningApplication> {
  const database = await createTestDatabase();
  const storage = await mkdtemp(join(tmpdir(), 'pennyweight-application-'));
  const port = await freePort();
  const url = `http://127.0.0.1:${port}`;
  const env = {
    ...process.env,
    NODE_ENV: 'production',
    DATABASE_URL: database.url,
    HOST: '127.0.0.1',
    PORT: String(port),
    PENNYWEIGHT_URL: url,
    PENNYWEIGHT_STORAGE: storage,
    PENNYWEIGHT_DEMO: options.demo ? '1' : '0',
    BETTER_AUTH_SECRET: randomBytes(32).toString('base64url'),
    ...options.environment,
  };
  const parts = new Map<Part, ChildProcess>();

  const launch = (name: string, program: string): ChildProcess => {
    const child = spawn(process.execPath, [program], { cwd: checkout, env, stdio: ['ignore', 'pipe', 'pipe'] });
    const log = createWriteStream(join(storage, `${name}.log`), { flags: 'a' });
    child.stdout.pipe(log, { end: false });
    child.stderr.pipe(log, { end: false });
    child.on('close', () => log.end());
    return child;
  };
  const log = (name: string) => readFile(join(storage, `${name}.log`), 'utf8');

  async function answering(child: ChildProcess): Promise<void> {
    for (let attempt = 0; attempt < 300; attempt += 1) {
      if (child.exitCode !== null || child.signalCode !== null) break;
      const response = await fetch(url, { signal: AbortSignal.timeout(5000) }).catch(() => null);
      await response?.body?.cancel();
      if (response) return;
      await wait(100);
    }
    throw new PennyweightError(
      'unavailable',
      `The web server did not come up; its log ends with: ${(await log('web')).slice(-2000)}`,
    );
  }

  async function start(part: Part): Promise<void> {
    const child = launch(part, programs[part]);
    parts.set(part, child);
    if (part === 'web') await answering(child);
  }

  async function end(part: Part, signal: NodeJS.Signals): Promise<boolean> {
    const child = parts.get(part);
    parts.delete(part);
    if (!child || child.exitCode !== null || child.signalCode !== null) return true;
    const closed = once(child, 'close');
    child.kill(signal);
    const inTime = await Promise.race([closed.then(() => true), wait(15_000, false, { ref: false })]);
    if (inTime) return true;
    child.kill('SIGKILL');
    await closed;
    return false;
  }

  async function stop(): Promise<void> {
    const ended = await Promise.all([end('web', 'SIGTERM'), end('worker', 'SIGTERM')]);
    const logs = ended.includes(false) ? await Promise.all([log('web'), log('worker')]) : [];
    await database.drop();
    await rm(storage, { recursive: true, force: true });
    if (logs.length > 0) {
      throw new PennyweightError(
        'internal',
        `The application did not end within 15 s of SIGTERM. ${logs.map((text) => text.slice(-1000)).join('\n')}`,
      );
    }
  }

  try {
    if (options.demo) {
      const [code] = (await once(launch('seed', 'dist/server/demo/seed.js'), 'close')) as [number | null];
      if (code !== 0)
        throw new PennyweightError('internal', `The demo could not be seeded: ${(await log('seed')).slice(-2000)}`);
    }
    await start('web');
    await start('worker');
  } catch (error) {
    await stop();
    throw error;
  }
  return {
    url,
    databaseUrl: database.url,
    storage,
    start,
    kill: async (part) => void (await end(part, 'SIGKILL')),
    log,
    stop,
  };
}
