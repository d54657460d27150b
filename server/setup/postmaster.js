/** The running server of a cluster: seen by its postmaster.pid, started and stopped by pg_ctl. */
import { existsSync, readFileSync, renameSync, rmSync, statSync } from 'node:fs';
import { basename, join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { makeDatabaseFolder, runForDatabase } from './cluster-home.js';
import { lastLines } from './command.js';
import { isFree, randomFreePort } from './free-port.js';
import { commandLine } from './process-identity.js';
import { SetupRefusal } from './refusal.js';
import { writePrivately } from './secret.js';

const largestLog = 10 * 1024 * 1024;

// Only for tests: a crash may lose everything, which nobody will miss (PostgreSQL manual, "Non-Durable Settings").
const nonDurable = [
  'fsync=off',
  'synchronous_commit=off',
  'full_page_writes=off',
  'autovacuum=off',
  'max_connections=150',
];

/** Lines of postmaster.pid: 1 process, 2 data folder, 4 port, 8 state (src/include/utils/pidfile.h). */
function readPidFile(data) {
  try {
    const lines = readFileSync(join(data, 'postmaster.pid'), 'utf8').split('\n');
    return { pid: Number(lines[0]), port: Number(lines[3]), ready: lines[7]?.trim() === 'ready' };
  } catch {
    return null;
  }
}

/** Whether the process is surely not the server of `data`: gone, another program, or the server of another folder. */
function isForeign(pid, data) {
  const words = commandLine(pid);
  if (words === null || words.length === 0) return true;
  if (basename(words[0]) !== 'postgres') return true;
  const folder = words[words.indexOf('-D') + 1];
  // A folder that is gone may be ours under an older name: then the server must not be declared dead.
  if (!words.includes('-D') || !existsSync(folder)) return false;
  return statSync(folder).ino !== statSync(data).ino;
}

/** The port of the running server; null when none runs. */
export async function runningPort(home) {
  const data = join(home.folder, 'data');
  for (let attempt = 0; attempt < 600; attempt += 1) {
    const state = readPidFile(data);
    if (state === null || isForeign(state.pid, data)) return null;
    if (state.ready) return state.port;
    await wait(100);
  }
  throw new SetupRefusal(
    `The PostgreSQL of ${home.folder} has been starting for a minute; see ${join(home.folder, 'log', 'postgres.log')}.`,
  );
}

/** PostgreSQL itself sees that the process of a stale file is dead, but not that its number now belongs to another. */
function removeStalePidFile(data) {
  const state = readPidFile(data);
  if (state !== null && commandLine(state.pid) !== null) rmSync(join(data, 'postmaster.pid'), { force: true });
}

function rememberedPort(home) {
  try {
    return Number(readFileSync(join(home.folder, 'port'), 'utf8'));
  } catch {
    return null;
  }
}

async function choosePort(home) {
  const port = rememberedPort(home);
  return port !== null && (await isFree(port)) ? port : randomFreePort();
}

async function prepareLog(home) {
  const folder = join(home.folder, 'log');
  await makeDatabaseFolder(home, folder);
  const file = join(folder, 'postgres.log');
  if (existsSync(file) && statSync(file).size > largestLog) renameSync(file, `${file}.old`);
  return file;
}

/** Starts the server on a port that is free and resolves with it. */
export async function startServer(home, programs, { durable }) {
  const data = join(home.folder, 'data');
  const log = await prepareLog(home);
  removeStalePidFile(data);
  let output = '';
  for (let attempt = 0; attempt < 5; attempt += 1) {
    const port = await choosePort(home);
    const settings = [
      `port=${port}`,
      'listen_addresses=127.0.0.1',
      'unix_socket_directories=',
      ...(durable ? [] : nonDurable),
    ];
    const words = settings.map((setting) => `-c ${setting}`).join(' ');
    const args = ['-D', data, '-l', log, '-w', '-t', '120', '-s', '-o', words, 'start'];
    // Not interruptible: a server that nobody holds yet would be left behind.
    const result = await runForDatabase(home, join(programs.folder, 'pg_ctl'), args, { last: true });
    if (result.code === 0) {
      writePrivately(join(home.folder, 'port'), String(port));
      return port;
    }
    output = result.output;
    // Only a port that another program took in this very moment is worth another try.
    if (await isFree(port)) break;
  }
  throw new SetupRefusal(
    `PostgreSQL did not start; the cause is at the end of ${log}:\n${output}\n${lastLines(readFileSync(log, 'utf8'), 8)}`,
  );
}

/** Ends the server and all connections to it; transactions that are under way are rolled back. */
export async function stopServer(home, programs) {
  const data = join(home.folder, 'data');
  const { code, output } = await runForDatabase(
    home,
    join(programs.folder, 'pg_ctl'),
    ['-D', data, '-m', 'fast', '-w', '-t', '120', '-s', 'stop'],
    { last: true },
  );
  if (code !== 0 && readPidFile(data) !== null) {
    throw new SetupRefusal(`PostgreSQL in ${home.folder} did not stop: ${output}`);
  }
}
