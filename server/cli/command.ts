/** The form of a command. One file a command in commands/; main.ts is the only other place that names it. */
import type { ExitStatus } from './exit-status.ts';
import type { Terminal } from './terminal.ts';

export interface Command {
  /** one line for the list of commands */
  summary: string;
  /** what --help prints: usage, options, an example */
  help: string;
  run(args: string[], terminal: Terminal): Promise<ExitStatus>;
}
