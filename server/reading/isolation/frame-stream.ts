/** Frames of the reading process, one at a time: while nobody takes one, the pipe fills up and the sender waits. */
import type { Readable } from 'node:stream';
import { headerBytes, readHeader, type FrameHeader } from './frame.ts';

export interface Frame extends FrameHeader {
  values: Float64Array;
}

export class FrameStream {
  readonly #pipe: Readable;
  readonly #ready: Frame[] = [];
  #waiting: { resolve: (frame: Frame) => void; reject: (cause: unknown) => void } | null = null;
  #failure: Error | null = null;
  readonly #head = new Uint8Array(headerBytes);
  #headFilled = 0;
  #frame: Frame | null = null;
  #body = new Uint8Array(0);
  #bodyFilled = 0;

  /** `onNonsense`: the pipe gave bytes that are no frame. */
  constructor(pipe: Readable, onNonsense: () => void) {
    this.#pipe = pipe;
    pipe.on('data', (bytes: Buffer) => {
      if (!this.#add(bytes)) onNonsense();
    });
    pipe.on('error', () => onNonsense());
    pipe.pause();
  }

  /** Nobody takes frames, so the sender may be waiting for us. */
  get held(): boolean {
    return this.#waiting === null;
  }

  next(): Promise<Frame> {
    const frame = this.#ready.shift();
    if (frame) return Promise.resolve(frame);
    if (this.#failure) return Promise.reject(this.#failure);
    return new Promise((resolve, reject) => {
      this.#waiting = { resolve, reject };
      this.#pipe.resume();
    });
  }

  /** The sender is gone: whoever waits gets `cause`. */
  fail(cause: Error): void {
    this.#failure = cause;
    this.#waiting?.reject(cause);
    this.#waiting = null;
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
        const values = new Float64Array(header.count * header.nodes);
        this.#frame = { ...header, values };
        this.#body = new Uint8Array(values.buffer);
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
    const waiting = this.#waiting;
    this.#waiting = null;
    this.#pipe.pause();
    if (waiting) waiting.resolve(frame);
    else this.#ready.push(frame);
  }
}
