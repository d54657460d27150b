/**
 * One child process that reads one archive: started with nothing but what Node.js needs, watched, and killed by its own
 * process id. Every way it can end gives a typed error to whoever waits.
 */
import { fork, type ChildProcess } from 'node:child_process';
import { createRequire } from 'node:module';
import { extname } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { PennyweightError } from '#contract/error.ts';
import type { Limits } from '../limits.ts';
import { ExchangeFile } from './exchange-file.ts';
import { Guard } from './guard.ts';
import { type OperationName, type Operations, type Reply, type Request } from './protocol.ts';

/** JavaScript objects of the reader: contents of a hundred thousand arrays; data are outside of this heap. */
const heapMegabytes = 320;
const mostOutput = 4096;

interface Waiter {
  millis: number;
  resolve: (answer: unknown) => void;
  reject: (cause: unknown) => void;
  onProgress?: (done: number, total: number) => void;
}

/** Runs from source (.ts) and compiled (.js) alike. */
function startChild(exchange: ExchangeFile): ChildProcess {
  const extension = extname(fileURLToPath(import.meta.url));
  const entry = fileURLToPath(new URL(`./child${extension}`, import.meta.url));
  const loaders =
    extension === '.ts'
      ? ['--import', pathToFileURL(createRequire(import.meta.url).resolve('tsx')).href, '--import', new URL('./untransformed-packages.js', import.meta.url).href]
      : [];
  return fork(entry, [], {
    execArgv: [...loaders, `--max-old-space-size=${heapMegabytes}`],
    // Nothing of the server's environment: no secret, no option for Node.js.
    env: {},
    serialization: 'advanced',
    stdio: ['ignore', 'pipe', 'pipe', 'ipc', exchange.descriptor],
  });
}

export class ReadingProcess {
  readonly exchange = new ExchangeFile();
  readonly #child: ChildProcess;
  readonly #guard: Guard;
  readonly #waiting = new Map<number, Waiter>();
  readonly #name: string;
  readonly #ended: Promise<void>;
  #count = 0;
  #at: string | null = null;
  #output = '';
  #reason: PennyweightError | null = null;

  /** `name`: what to call the archive in an error. */
  constructor(name: string, limits: Limits) {
    this.#name = name;
    this.#child = startChild(this.exchange);
    const { pid } = this.#child;
    this.#guard = new Guard(pid ?? 0, limits.memoryBytes, (bytes) =>
      this.#end(
        this.#death(`needed ${Math.ceil(bytes / 1e6)} MB of memory, and ${Math.ceil(limits.memoryBytes / 1e6)} MB is the limit`, { memoryBytes: bytes }),
      ),
    );
    for (const stream of [this.#child.stdout, this.#child.stderr]) {
      stream?.on('data', (bytes: Buffer) => (this.#output = (this.#output + bytes.toString('latin1')).slice(-mostOutput)));
    }
    this.#child.on('message', (reply: Reply) => this.#take(reply));
    this.#child.on('error', (cause) => this.#end(this.#death(`could not be started: ${cause.message}`, {})));
    this.#ended = new Promise((resolve) => {
      this.#child.once('exit', (code, signal) => {
        this.#end(this.#death(signal ? `was ended by ${signal}` : `ended with status ${code}`, { signal, exitCode: code }));
        resolve();
      });
      this.#child.once('error', () => resolve());
    });
  }

  /** Largest resident memory that was seen, bytes. */
  get peakBytes(): number {
    return this.#guard.peakBytes;
  }

  request<Name extends OperationName>(
    operation: Name,
    take: Operations[Name]['take'],
    millis: number,
    onProgress?: (done: number, total: number) => void,
  ): Promise<Operations[Name]['answer']> {
    if (this.#reason) return Promise.reject(this.#reason);
    const id = ++this.#count;
    return new Promise((resolve, reject) => {
      this.#waiting.set(id, { millis, resolve: resolve as (answer: unknown) => void, reject, onProgress });
      if (this.#waiting.size === 1) this.#startClock();
      this.#child.send({ id, operation, take } as Request);
    });
  }

  async close(): Promise<void> {
    this.#end(new PennyweightError('wrong-state', `${this.#name} was closed; open it again.`, {}));
    await this.#ended;
    this.exchange.close();
  }

  /** The reader answers in turn, so the clock is that of the oldest request. */
  #startClock(): void {
    const [oldest] = this.#waiting.values();
    if (!oldest) {
      this.#guard.finish();
      return;
    }
    this.#guard.start({
      millis: oldest.millis,
      expire: () => this.#end(this.#death(`took longer than ${oldest.millis / 1000} s`, { millis: oldest.millis })),
    });
  }

  #take(reply: Reply): void {
    const waiter = this.#waiting.get(reply.id);
    if (!waiter) return;
    if (reply.kind === 'progress') {
      this.#at = reply.path;
      waiter.onProgress?.(reply.done, reply.total);
      return;
    }
    this.#waiting.delete(reply.id);
    this.#startClock();
    if (reply.kind === 'answer') {
      waiter.resolve(reply.answer);
      return;
    }
    const { fatal, ...details } = reply.details;
    const refusal = new PennyweightError(reply.code, reply.message, details);
    waiter.reject(refusal);
    // After a trap nothing that the library says is to be believed.
    if (fatal) this.#end(refusal);
  }

  #death(what: string, details: Record<string, unknown>): PennyweightError {
    const where = this.#at ? ` at ${this.#at}` : '';
    return new PennyweightError(
      'file-unreadable',
      `${this.#name} could not be read: the process that read it ${what}${where}; compare the file with the original and upload it again.`,
      { file: this.#name, path: this.#at, output: this.#output.trim().slice(-1024) || null, ...details },
    );
  }

  /** Idempotent: the first reason stands. */
  #end(reason: PennyweightError): void {
    if (this.#reason) return;
    this.#reason = reason;
    this.#guard.stop();
    this.#child.kill('SIGKILL');
    for (const { reject } of this.#waiting.values()) reject(reason);
    this.#waiting.clear();
  }
}
