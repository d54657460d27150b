/**
 * Only one process of this checkout at a time. A socket in Linux's abstract namespace is the lock: taking it is atomic
 * and the kernel gives it back when its process dies, so there is no lock file to go stale (unix(7)).
 */
import { connect, createServer } from 'node:net';
import { setTimeout as wait } from 'node:timers/promises';
import { checkoutId } from './checkout.js';
import { SetupRefusal } from './refusal.js';

function address(purpose) {
  return `\0pennyweight-${checkoutId()}-${purpose}`;
}

/** Takes the lock and tells whoever asks what `describe` returns; null when another process has it. */
export function claim(purpose, describe = () => '') {
  return new Promise((resolve, reject) => {
    const server = createServer((caller) => {
      caller.on('error', () => undefined);
      caller.end(describe());
    });
    server.once('error', (error) => (error.code === 'EADDRINUSE' ? resolve(null) : reject(error)));
    server.listen(address(purpose), () => {
      server.unref();
      resolve({ release: () => new Promise((done) => server.close(() => done())) });
    });
  });
}

/** What the holder of the lock says of itself. */
export function askHolder(purpose) {
  return new Promise((resolve) => {
    let answer = '';
    const caller = connect(address(purpose));
    caller.setEncoding('utf8').on('data', (text) => {
      answer += text;
    });
    caller.on('error', () => resolve(answer));
    caller.on('close', () => resolve(answer));
  });
}

/** Does the work when nobody else is doing it, waiting up to five minutes. */
export async function exclusively(purpose, work) {
  const patience = Date.now() + 300_000;
  let lock = await claim(purpose);
  while (lock === null) {
    if (Date.now() > patience) {
      throw new SetupRefusal(
        `Another process of this checkout has been busy with "${purpose}" for five minutes: end it and try again.`,
      );
    }
    await wait(100);
    lock = await claim(purpose);
  }
  try {
    return await work();
  } finally {
    await lock.release();
  }
}
