/**
 * The reading process: the only place where bytes from outside are parsed. It is forked by reading-process.ts with an
 * empty environment, answers one request after another, and is killed without regret.
 */
import { writeSync } from 'node:fs';
import { setImmediate as breathe } from 'node:timers/promises';
import { PennyweightError } from '#contract/error.ts';
import { operations, type Surroundings } from './operations.ts';
import { endWithParent } from './orphan-watch.ts';
import { exchangeDescriptor, type Reply, type Request } from './protocol.ts';

const handlers = operations();
let work: Promise<void> = Promise.resolve();

function reply(message: Reply): void {
  process.send?.(message);
}

function writeBlock(values: Float64Array, position: number): void {
  const bytes = new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
  for (let at = 0; at < bytes.length; ) at += writeSync(exchangeDescriptor, bytes, at, bytes.length - at, position + at);
}

async function answer({ id, operation, take }: Request): Promise<void> {
  const around: Surroundings = {
    writeBlock,
    async report(done, total, path) {
      reply({ id, kind: 'progress', done, total, path });
      await breathe();
    },
  };
  try {
    // The request's type ties operation and take together, which the compiler does not follow through an index.
    const handle = handlers[operation] as (taken: unknown, around: Surroundings) => unknown;
    reply({ id, kind: 'answer', answer: await handle(take, around) });
  } catch (cause) {
    if (cause instanceof PennyweightError) {
      reply({ id, kind: 'refusal', code: cause.code, message: cause.message, details: cause.details });
    } else {
      const message = cause instanceof Error ? cause.message : String(cause);
      reply({ id, kind: 'refusal', code: 'file-unreadable', message: `the archive could not be read (${message}); compare it with the original and upload it again.`, details: { fatal: true } });
    }
  }
}

process.on('message', (request: Request) => {
  work = work.then(() => answer(request));
});
process.on('disconnect', () => process.exit());
endWithParent();
