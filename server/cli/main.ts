/** Entry of the command `pennyweight`: finds the command, prints help, and turns every end into an exit status. */
import { PennyweightError, statusOf, type Problem } from '#contract/error.ts';
import type { Command } from './command.ts';
import { exitStatus, type ExitStatus } from './exit-status.ts';
import { processTerminal, type Terminal } from './terminal.ts';
import { isWrongUsage } from './usage.ts';

/** Loaded only when called: `check` needs no database and `verify` no HDF5. */
const commands: Record<string, () => Promise<{ command: Command }>> = {
  check: () => import('./commands/check.ts'),
  weights: () => import('./commands/weights.ts'),
  audit: () => import('./commands/audit.ts'),
};

async function overview(): Promise<string> {
  const rows = await Promise.all(
    Object.entries(commands).map(async ([name, load]) => `  ${name.padEnd(9)} ${(await load()).command.summary}`),
  );
  return `Usage: pennyweight COMMAND …

${rows.join('\n')}

"pennyweight COMMAND --help" explains one. Exit status: 0 nothing above a note, 1 a caution, 2 a blocker, 64 wrong usage,
70 internal error.

Example: pennyweight check run.h5`;
}

/** The problem document that the API would answer with. */
function problemOf({ code, message, details }: PennyweightError): Problem {
  return {
    type: `urn:pennyweight:problem:${code}`,
    title: code,
    status: statusOf[code],
    detail: message,
    code,
    details,
  };
}

export async function run(args: string[], terminal: Terminal): Promise<ExitStatus> {
  const [name, ...rest] = args;
  if (name === undefined || name === '--help' || name === '-h') {
    (name === undefined ? terminal.message : terminal.result)(await overview());
    return name === undefined ? exitStatus.usage : exitStatus.sound;
  }
  const load = Object.hasOwn(commands, name) ? commands[name] : null;
  if (!load) {
    terminal.message(`There is no command "${name}"; "pennyweight --help" lists them.`);
    return exitStatus.usage;
  }
  try {
    const { command } = await load();
    if (rest.includes('--help') || rest.includes('-h')) {
      terminal.result(command.help);
      return exitStatus.sound;
    }
    return await command.run(rest, terminal);
  } catch (error) {
    if (isWrongUsage(error)) {
      terminal.message(`${error.message} See "pennyweight ${name} --help".`);
      return exitStatus.usage;
    }
    if (error instanceof PennyweightError && error.code !== 'internal') {
      if (rest.includes('--json')) terminal.result(JSON.stringify(problemOf(error)));
      terminal.message(error.message);
      return exitStatus.blocker;
    }
    terminal.message(`Internal error: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`);
    return exitStatus.internal;
  }
}

/** What pennyweight.js calls. */
export async function main(args: string[]): Promise<void> {
  // A reader that has seen enough ("| head") ends us quietly.
  process.stdout.on('error', (error: NodeJS.ErrnoException) =>
    process.exit(error.code === 'EPIPE' ? exitStatus.sound : exitStatus.internal),
  );
  process.exitCode = await run(args, processTerminal());
}
