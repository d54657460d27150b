/** Runs another program to its end. */
import { spawn } from 'node:child_process';
import { checkout } from './checkout.js';
import { interruption } from './interruption.js';

/**
 * Resolves with the exit code and all the program wrote; rejects only when it could not be started or when the set-up
 * is interrupted. `show` passes its output straight to the terminal; `last` ignores an interruption (clean-up work).
 */
export function run(program, args, options = {}) {
  const { cwd = checkout, env = process.env, input = '', show = false, last = false, deadline = 0 } = options;
  return new Promise((resolve, reject) => {
    const child = spawn(program, args, {
      cwd,
      env,
      stdio: show ? ['ignore', 'inherit', 'inherit'] : ['pipe', 'pipe', 'pipe'],
      signal: last ? undefined : interruption,
      timeout: deadline,
    });
    let output = '';
    for (const stream of [child.stdout, child.stderr]) {
      stream?.setEncoding('utf8').on('data', (text) => {
        output += text;
      });
    }
    // A program that ends without reading its input breaks the pipe; its exit code tells what happened.
    child.stdin?.on('error', () => undefined);
    child.stdin?.end(input);
    child.on('error', reject);
    child.on('close', (code, signal) => resolve({ code: code ?? 1, signal, output: output.trimEnd() }));
  });
}

/** Whether the program exists and ends well. */
export async function succeeds(program, args, options) {
  try {
    return (await run(program, args, options)).code === 0;
  } catch (error) {
    if (interruption.aborted) throw error;
    return false;
  }
}

export function lastLines(text, count = 15) {
  return text.split('\n').slice(-count).join('\n');
}
