/**
 * The reading process: the only place where bytes from outside are parsed. It is forked by reading-process.ts with an
 * empty environment, answers one request after another, and is killed without regret.
 */
import { Socket } from 'node:net';
import { setImmediate as breathe } from 'node:timers/promises';
import { PennyweightError } from '#contract/error.ts';
import { writeHeader, type FrameHeader } from './frame.ts';
import { operations, type Surroundings } from './operations.ts';
import { endWithParent } from './orphan-watch.ts';
import { frameDescriptor, type Reply, type Request } from './protocol.ts';

const handlers = operations();
let work: Promise<void> = Promise.resolve();

function reply(message: Reply): void {
  process.send?.(message);
}

const pipe = new Socket({ fd: frameDescriptor, readable: false });

/** Done when the other side has taken the bytes, but for what the pipe itself holds. */
function write(bytes: Uint8Array): Promise<void> {
  return new Promise((resolve, reject) => pipe.write(bytes, (cause) => (cause ? reject(cause) : resolve())));
}

async function sendFrame(header: FrameHeader, values: Float64Array): Promise<void> {
  await write(writeHeader(header));
  await write(new Uint8Array(values.buffer, values.byteOffset, values.byteLength));
}

async function answer({ id, operation, take }: Request): Promise<void> {
  const around: Surroundings = {
    sendFrame,
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
