/** The web server or the worker in a process of its own, from source, so that a test can kill it as a power cut would. */
import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { createServer, type AddressInfo } from 'node:net';
import { fileURLToPath } from 'node:url';
import { PennyweightError } from '#contract/error.ts';
import type { Config } from '../../server/config.ts';

const checkout = fileURLToPath(new URL('../..', import.meta.url));
const ready = { main: 'listening', worker: 'working' };

export interface ServerProcess {
  url: string;
  /** SIGKILL: no time for anything. */
  kill(): Promise<void>;
  /** SIGTERM: ends in its own order; resolves with the exit code. */
  stop(): Promise<number | null>;
}

export async function freePort(): Promise<number> {
  const probe = createServer().listen(0, '127.0.0.1');
  await once(probe, 'listening');
  const { port } = probe.address() as AddressInfo;
  probe.close();
  await once(probe, 'close');
  return port;
}

const alive = new Set<ChildProcess>();

/** For afterAll: a test that failed half-way leaves no process behind. */
export async function endProcesses(): Promise<void> {
  await Promise.all([...alive].map(async (child) => {
    const ended = once(child, 'exit');
    child.kill('SIGKILL');
    await ended;
  }));
}

/** Resolves when it is at work. */
export async function startProcess(part: 'main' | 'worker', config: Config, port = 0): Promise<ServerProcess> {
  const url = `http://127.0.0.1:${port}`;
  const child = spawn(process.execPath, ['--import', 'tsx', `server/${part}.ts`], {
    cwd: checkout, stdio: ['ignore', 'pipe', 'pipe'],
    env: {
      PATH: process.env.PATH, DATABASE_URL: config.databaseUrl, PENNYWEIGHT_STORAGE: config.storage, PENNYWEIGHT_URL: url, PORT: String(port), HOST: '127.0.0.1',
      BETTER_AUTH_SECRET: config.secret, LOG_LEVEL: 'info',
    },
  });
  let words = '';
  const ended = once(child, 'exit') as Promise<[number | null]>;
  alive.add(child);
  void ended.then(() => alive.delete(child));
  await new Promise<void>((resolve, reject) => {
    const listen = (part_: Buffer) => {
      words = (words + part_.toString()).slice(-20_000);
      if (words.includes(`"msg":"${ready[part]}"`)) resolve();
    };
    child.stdout.on('data', listen);
    child.stderr.on('data', listen);
    void ended.then(([code]) => reject(new PennyweightError('unavailable', `server/${part}.ts ended with ${code}: ${words.slice(-3000)}`)));
  });
  return {
    url,
    async kill() {
      child.kill('SIGKILL');
      await ended;
    },
    async stop() {
      child.kill('SIGTERM');
      return (await ended)[0];
    },
  };
}
