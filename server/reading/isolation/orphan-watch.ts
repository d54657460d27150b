/**
 * Ends the reading process when the process that started it is gone. A thread of its own sees to that, as a hostile file
 * may keep the main thread busy for ever.
 */
import { Worker } from 'node:worker_threads';

/** Plain text, so that the thread needs no loader and little memory. */
const watch = `
  const parent = process.ppid;
  setInterval(() => { if (process.ppid !== parent) process.kill(process.pid, 'SIGKILL'); }, 1000);
`;

export function endWithParent(): void {
  new Worker(watch, { eval: true, execArgv: [], resourceLimits: { maxOldGenerationSizeMb: 8 } }).unref();
}
