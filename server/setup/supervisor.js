/** Keeps the application's processes running until the set-up ends, and finds those that a killed set-up left behind. */
import { spawn } from 'node:child_process';
import { createWriteStream, existsSync, readFileSync, renameSync, rmSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { warn } from './announce.js';
import { checkout, logs, storage } from './checkout.js';
import { lastLines } from './command.js';
import { interrupt, interruption } from './interruption.js';
import { identify, isAlive } from './process-identity.js';
import { writePrivately } from './secret.js';

const register = join(storage, 'processes.json');
const largestLog = 20 * 1024 * 1024;
const steadyAfter = 60_000;
const mostQuickDeaths = 6;
const patience = 20_000;

const running = new Map();

function remember() {
  writePrivately(register, JSON.stringify([...running.values()].map(({ identity }) => identity)));
}

/** `pid` of a process, or minus that for it and all it started: each is the leader of its own group. */
function signal(pid, name) {
  try {
    process.kill(pid, name);
  } catch {
    // Gone already.
  }
}

/** First asks the leaders alone, which end their own children in their own order; then ends what is left by force. */
async function end(identities) {
  for (const { pid } of identities) signal(pid, 'SIGTERM');
  const deadline = Date.now() + patience;
  while (identities.some(isAlive) && Date.now() < deadline) await wait(50);
  for (const { pid } of identities) signal(-pid, 'SIGKILL');
}

/** Ends the processes of a previous run whose set-up was killed; told from later ones with the same number. */
export async function endOrphans() {
  if (!existsSync(register)) return;
  const orphans = JSON.parse(readFileSync(register, 'utf8')).filter(isAlive);
  if (orphans.length > 0) {
    warn('processes', `ending ${orphans.length} left behind by a run that was killed.`);
    await end(orphans);
  }
  rmSync(register, { force: true });
}

function openLog(name) {
  const file = join(logs, `${name}.log`);
  if (existsSync(file) && statSync(file).size > largestLog) renameSync(file, `${file}.old`);
  return createWriteStream(file, { flags: 'a' });
}

/** Starts the process once; resolves when it has ended. */
function runOnce({ name, args, env, echo }) {
  return new Promise((resolve) => {
    const log = openLog(name);
    // detached: Ctrl+C in the terminal reaches only us, so each process gets one signal and its time to finish.
    const child = spawn(process.execPath, args, {
      cwd: checkout,
      env: env(),
      stdio: ['ignore', 'pipe', 'pipe'],
      detached: true,
    });
    let tail = '';
    const record = (text, terminal) => {
      log.write(text);
      terminal?.write(text);
      tail = `${tail}${text}`.slice(-4000);
    };
    child.stdout.setEncoding('utf8').on('data', (text) => record(text, echo ? process.stdout : null));
    child.stderr.setEncoding('utf8').on('data', (text) => record(text, process.stderr));
    child.on('spawn', () => {
      running.set(name, { identity: identify(child.pid) });
      remember();
    });
    const finish = (reason) => {
      running.delete(name);
      remember();
      log.end();
      resolve({ reason, tail });
    };
    child.on('error', (error) => finish(error.message));
    // What it leaves behind would hold its output open, and with it the end of its run.
    child.on('exit', () => signal(-child.pid, 'SIGKILL'));
    child.on('close', (code, by) => finish(by === null ? `exit code ${code}` : by));
  });
}

/**
 * Runs the process again whenever it dies, after 1, 2, 4, ... 30 seconds; gives up after six deaths in a row, each within
 * a minute of its start, since then it will not mend itself. `env` is asked anew for each start.
 */
export async function keepRunning(task) {
  let quickDeaths = 0;
  while (!interruption.aborted) {
    const begun = Date.now();
    const { reason, tail } = await runOnce(task);
    if (interruption.aborted) return;
    quickDeaths = Date.now() - begun < steadyAfter ? quickDeaths + 1 : 1;
    if (quickDeaths >= mostQuickDeaths) {
      warn(
        task.name,
        `died ${quickDeaths} times in a row (${reason}); giving up. Its last words:\n${lastLines(tail.trimEnd())}`,
      );
      interrupt('gave up');
      return;
    }
    const pause = Math.min(2 ** (quickDeaths - 1), 30);
    warn(task.name, `died (${reason}); starting it again in ${pause} s. Its words: ${join(logs, `${task.name}.log`)}`);
    await wait(pause * 1000, null, { signal: interruption }).catch(() => undefined);
  }
}

/** Ends all of them, waiting for their own clean-up before it uses force. */
export async function endAll() {
  await end([...running.values()].map(({ identity }) => identity));
}

/** Ends them so that keepRunning starts them anew, for example on another database address. */
export function restartAll() {
  for (const { identity } of running.values()) signal(identity.pid, 'SIGTERM');
}
