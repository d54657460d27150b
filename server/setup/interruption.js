/** One signal for the whole process: aborted by Ctrl+C, SIGTERM or a closed terminal. */
const controller = new AbortController();

export const interruption = controller.signal;

/**
 * Answers the signals instead of dying from them. npm and the terminal both pass Ctrl+C on, so it arrives twice. An npm
 * that was killed passes nothing on: then we are handed to another parent.
 */
export function listenForInterruption() {
  for (const name of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(name, () => controller.abort(name));
  if (!process.env.npm_lifecycle_event) return;
  const parent = process.ppid;
  setInterval(() => {
    if (process.ppid !== parent) controller.abort('the end of npm');
  }, 1000).unref();
}

/** Ends the wait of whoever waits for `interruption`, for a reason of our own. */
export function interrupt(reason) {
  controller.abort(reason);
}

export function interrupted() {
  if (interruption.aborted) return Promise.resolve();
  return new Promise((resolve) => interruption.addEventListener('abort', () => resolve(), { once: true }));
}
