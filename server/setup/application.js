/** What npm start and npm run dev have in common: a prepared machine, a database, the settings of the application. */
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { announce, warn } from './announce.js';
import { ensureDatabase, givenDatabase } from './application-database.js';
import { storage } from './checkout.js';
import { openCluster } from './cluster.js';
import { lastLines, run } from './command.js';
import { ensureDebianPackages } from './debian-packages.js';
import { nextFreePort } from './free-port.js';
import { interruption } from './interruption.js';
import { SetupRefusal } from './refusal.js';
import { keptSecret } from './secret.js';
import { restartAll } from './supervisor.js';

/** The database given by DATABASE_URL, or one in a cluster of our own that is watched and closed with us. */
export async function openApplicationDatabase(command) {
  const given = await givenDatabase();
  await ensureDebianPackages({ required: given === null ? ['postgres'] : [], wanted: ['openblas'], command });
  if (given !== null) {
    announce('database', 'the one of DATABASE_URL');
    return { url: () => given, close: async () => undefined };
  }
  const cluster = await openCluster('postgres');
  try {
    let url = await ensureDatabase(cluster);
    announce('database', `PostgreSQL ${cluster.programs.version} in ${cluster.home.label} on ${new URL(url).host}`);
    const watch = setInterval(async () => {
      try {
        const { revived, moved } = await cluster.revive();
        if (revived)
          warn('database', `had died and was started again; its words: ${cluster.home.folder}/log/postgres.log`);
        if (!moved) return;
        url = await ensureDatabase(cluster);
        restartAll();
      } catch (error) {
        if (!interruption.aborted) warn('database', error.message);
      }
    }, 5000);
    return {
      url: () => url,
      close: () => {
        clearInterval(watch);
        return cluster.close();
      },
    };
  } catch (error) {
    await cluster.close();
    throw error;
  }
}

/** The first free port from PORT (8080) on. */
export async function choosePort(host) {
  const wanted = Number(process.env.PORT || 8080);
  if (!Number.isInteger(wanted) || wanted < 1 || wanted > 65535) {
    throw new SetupRefusal(`PORT is "${process.env.PORT}": give a whole number from 1 to 65535, or unset it for 8080.`);
  }
  const port = await nextFreePort(wanted, host);
  if (port === null)
    throw new SetupRefusal(`No port from ${wanted} on can be opened on ${host}: give another PORT or HOST.`);
  if (port !== wanted) warn('port', `${wanted} is taken, using ${port}.`);
  return port;
}

/** A secret of the environment wins over the one kept in storage/secret. */
export function settings({ databaseUrl, host, port, url }) {
  return {
    ...process.env,
    DATABASE_URL: databaseUrl,
    HOST: host,
    PORT: String(port),
    PENNYWEIGHT_URL: process.env.PENNYWEIGHT_URL || url,
    PENNYWEIGHT_STORAGE: storage,
    PENNYWEIGHT_DEMO: process.env.PENNYWEIGHT_DEMO || '1',
    BETTER_AUTH_SECRET: process.env.BETTER_AUTH_SECRET || keptSecret(join(storage, 'secret')),
  };
}

/** Runs one of the application's own programs to its end; resolves with what it printed. */
export async function runStep(name, args, env) {
  const { code, output } = await run(process.execPath, args, { env });
  if (code !== 0) throw new SetupRefusal(`The step "${name}" failed; its last words:\n${lastLines(output, 20)}`);
  return output;
}

/** The demo's accounts, told again at each start. */
export function demoAccounts(seedOutput, env) {
  if (env.PENNYWEIGHT_DEMO === '0') return '';
  const file = join(storage, 'demo-accounts.txt');
  return existsSync(file) ? readFileSync(file, 'utf8').trimEnd() : seedOutput;
}

/** Waits until the server answers; false when it was interrupted before. */
export async function answers(host, port) {
  const address = ['0.0.0.0', '::'].includes(host) ? '127.0.0.1' : host;
  while (!interruption.aborted) {
    const response = await fetch(`http://${address.includes(':') ? `[${address}]` : address}:${port}/`, {
      signal: AbortSignal.timeout(5000),
      redirect: 'manual',
    }).catch(() => null);
    if (response !== null) {
      await response.body?.cancel();
      return true;
    }
    await wait(150, null, { signal: interruption }).catch(() => undefined);
  }
  return false;
}
