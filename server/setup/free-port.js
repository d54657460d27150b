/** Ports on which nobody listens. Between the look and the use another program can still take one: callers try again. */
import { randomInt } from 'node:crypto';
import { createServer } from 'node:net';

export function isFree(port, host = '127.0.0.1') {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => resolve(false));
    probe.listen({ port, host, exclusive: true }, () => probe.close(() => resolve(true)));
  });
}

/** The first free port from `first` on. */
export async function nextFreePort(first, host) {
  for (let port = first; port <= 65535; port += 1) {
    if (await isFree(port, host)) return port;
  }
  return null;
}

/** A random free port below the range that Linux gives to outgoing connections (32768 on), which could take it later. */
export async function randomFreePort() {
  for (;;) {
    const port = randomInt(20000, 30000);
    if (await isFree(port)) return port;
  }
}
