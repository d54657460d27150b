/**
 * Seeds the demo, in demo mode and into an empty database only: makes the people, then plays the story against a server and a worker
 * that are started here for that purpose. Prints the accounts and keeps them in demo-accounts.txt.
 */
import { spawn, type ChildProcess } from 'node:child_process';
import { randomInt } from 'node:crypto';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { createServer, type AddressInfo } from 'node:net';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { abilityFor } from '#contract/access.ts';
import { PennyweightError } from '#contract/error.ts';
import { readConfig } from '../config.ts';
import { openDatabase, type Database } from '../db/database.ts';
import { writeHdf5 } from '../reading/hdf5-writer.ts';
import { anyAccount, makeAccount } from '../services/accounts.ts';
import { recordAudit } from '../services/audit.ts';
import type { Caller } from '../services/context.ts';
import { setRoles } from '../services/roles.ts';
import { demoPeople } from './people.ts';
import { demoRuns } from './scenario.ts';
import { playStory } from './story.ts';

const words = ['anvil', 'basin', 'brass', 'cedar', 'chalk', 'cobalt', 'delta', 'ember', 'flint', 'gauge', 'harbour', 'ledger', 'lichen', 'marble', 'nickel', 'ochre', 'pebble', 'pumice', 'quartz', 'saddle', 'sextant', 'slate', 'spindle', 'tallow', 'timber', 'vellum'];

/** Four words of 26, and a number: made anew for every installation, so that no demo has a known password. */
function newPassphrase(): string {
  return [...Array.from({ length: 4 }, () => words[randomInt(words.length)]), randomInt(100, 1000)].join('-');
}

async function makePeople(db: Database, password: string): Promise<void> {
  await db.transaction(async (tx) => {
    for (const person of demoPeople) {
      const made = await makeAccount(tx, null, { ...person, password });
      if (person.key !== 'administrator') continue;
      const caller: Caller = { user: made, principal: { userId: made.id, roles: [], token: null }, ability: abilityFor({ userId: made.id, roles: [], token: null }), via: 'set-up', requestId: null };
      await setRoles(tx, made.id, null, ['administrator']);
      await recordAudit(tx, caller, { action: 'account.update', objectType: 'account', objectId: made.id, label: made.email, campaignId: null, before: { roles: [] }, after: { roles: ['administrator'] } });
    }
  });
}

async function freePort(): Promise<number> {
  const probe = createServer();
  await new Promise<void>((resolve) => probe.listen(0, '127.0.0.1', resolve));
  const { port } = probe.address() as AddressInfo;
  await new Promise((resolve) => probe.close(resolve));
  return port;
}

/** main and worker beside this file, from source or compiled alike. */
function startPart(name: 'main' | 'worker', env: NodeJS.ProcessEnv): ChildProcess {
  const own = fileURLToPath(import.meta.url), extension = own.slice(own.lastIndexOf('.'));
  const file = fileURLToPath(new URL(`../${name}${extension}`, import.meta.url));
  return spawn(process.execPath, extension === '.ts' ? ['--import', 'tsx', file] : [file], { env, stdio: ['ignore', 'ignore', 'inherit'] });
}

async function ended(part: ChildProcess): Promise<void> {
  if (part.exitCode !== null || part.signalCode !== null) return;
  part.kill('SIGTERM');
  await new Promise((resolve) => part.once('exit', resolve));
}

async function answers(url: string, parts: ChildProcess[]): Promise<void> {
  for (const end = Date.now() + 60_000; Date.now() < end; ) {
    if (parts.some((part) => part.exitCode !== null)) break;
    if (await fetch(`${url}/api/health`).then((answer) => answer.ok, () => false)) return;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  throw new PennyweightError('unavailable', 'The demo could not be seeded: the server did not start. See its message above.');
}

const config = readConfig(process.env);
if (!config.demo) process.exit(0);
const db = openDatabase(config.databaseUrl, { max: 2 });
if (await anyAccount(db)) {
  await db.$client.end();
  process.exit(0);
}
const password = newPassphrase();
await makePeople(db, password);
await db.$client.end();

const port = await freePort(), url = `http://127.0.0.1:${port}`;
const env = { ...process.env, PORT: String(port), HOST: '127.0.0.1', PENNYWEIGHT_URL: url, LOG_LEVEL: 'error' };
const folder = await mkdtemp(join(config.storage, 'demo-'));
const parts = [startPart('main', env), startPart('worker', env)];
try {
  const runs = demoRuns();
  for (const run of runs) await writeHdf5(join(folder, run.fileName), run.arrays, run.attributes);
  await answers(url, parts);
  await playStory(url, password, runs, folder);
} finally {
  await Promise.all(parts.map(ended));
  await rm(folder, { recursive: true, force: true });
}
const lines = [...demoPeople.map((person) => `${person.key.padEnd(14)} ${person.email.padEnd(26)} ${password}`)];
await writeFile(join(config.storage, 'demo-accounts.txt'), `${lines.join('\n')}\n`, { mode: 0o600 });
process.stdout.write(`${lines.join('\n')}\n`);
