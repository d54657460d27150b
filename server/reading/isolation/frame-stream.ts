/** Frames of the reading process by plan. While nobody waits for one, the pipe fills up and the sender waits. */
import type { Readable } from 'node:stream';
import { headerBytes, readHeader, type FrameHeader } from './frame.ts';

export interface Frame extends FrameHeader {
  values: Float64Array;
}

interface Waiter {
  resolve: (frame: Frame) => void;
  reject: (cause: unknown) => void;
}

export class FrameStream {
  readonly #pipe: Readable;
  readonly #ready: Frame[] = [];
  readonly #waiting = new Map<number, Waiter>();
  readonly #head = new Uint8Array(headerBytes);
  #headFilled = 0;
  #frame: Frame | null = null;
  #body: Uint8Array = new Uint8Array(0);
  #bodyFilled = 0;
  #spare: Float64Array | null = null;

  /** `onNonsense`: the pipe gave bytes that are no frame. */
  constructor(pipe: Readable, onNonsense: () => void) {
    this.#pipe = pipe;
    pipe.on('data', (bytes: Buffer) => {
      if (!this.#add(bytes)) onNonsense();
    });
    pipe.on('error', onNonsense);
    pipe.pause();
  }

  /** Nobody waits for a frame, so the sender may be waiting for us. */
  get held(): boolean {
    return this.#waiting.size === 0;
  }

  next(plan: number): Promise<Frame> {
    const at = this.#ready.findIndex((frame) => frame.plan === plan);
    if (at >= 0) return Promise.resolve(this.#ready.splice(at, 1)[0]);
    return new Promise((resolve, reject) => {
      this.#waiting.set(plan, { resolve, reject });
      this.#pipe.resume();
    });
  }

  /** Values that nobody needs any more: the next block of that length is written into them. */
  giveBack(values: Float64Array): void {
    this.#spare = values;
  }

  /** No frame will come for `plan` (or for any): whoever waits gets `cause`. */
  fail(cause: unknown, plan?: number): void {
    for (const [waited, { reject }] of [...this.#waiting]) {
      if (plan !== undefined && plan !== waited) continue;
      this.#waiting.delete(waited);
      reject(cause);
    }
  }

  #add(bytes: Uint8Array): boolean {
    let at = 0;
    while (at < bytes.length) {
      if (!this.#frame) {
        const many = Math.min(headerBytes - this.#headFilled, bytes.length - at);
        this.#head.set(bytes.subarray(at, at + many), this.#headFilled);
        this.#headFilled += many;
        at += many;
        if (this.#headFilled < headerBytes) return true;
        const header = readHeader(this.#head);
        if (!header) return false;
        const length = header.count * header.nodes;
        this.#frame = { ...header, values: this.#spare?.length === length ? this.#spare : new Float64Array(length) };
        this.#spare = null;
        this.#body = new Uint8Array(this.#frame.values.buffer);
        this.#bodyFilled = 0;
      }
      const many = Math.min(this.#body.length - this.#bodyFilled, bytes.length - at);
      this.#body.set(bytes.subarray(at, at + many), this.#bodyFilled);
      this.#bodyFilled += many;
      at += many;
      if (this.#bodyFilled === this.#body.length) this.#finish(this.#frame);
    }
    return true;
  }

  #finish(frame: Frame): void {
    this.#frame = null;
    this.#headFilled = 0;
    const waiter = this.#waiting.get(frame.plan);
    this.#waiting.delete(frame.plan);
    if (this.held) this.#pipe.pause();
    if (waiter) waiter.resolve(frame);
    else this.#ready.push(frame);
  }
}
