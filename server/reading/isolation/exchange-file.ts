/**
 * A file without a name that both processes have open: the reader writes a block of snapshots, the server reads it. It
 * stays in the page cache. Measured for 32 MiB: 4 ms through the file, 40 ms through a pipe of child_process, which comes
 * in parts of 64 KiB.
 */
import { closeSync, constants, openSync, readSync, unlinkSync } from 'node:fs';
import { randomUUID } from 'node:crypto';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { PennyweightError } from '#contract/error.ts';

export class ExchangeFile {
  readonly descriptor: number;
  #open = true;

  constructor() {
    const path = join(tmpdir(), `pennyweight-${randomUUID()}`);
    this.descriptor = openSync(path, constants.O_RDWR | constants.O_CREAT | constants.O_EXCL, 0o600);
    unlinkSync(path);
  }

  /** Fills `values` with what the reader wrote at `position`. */
  read(values: Float64Array, position: number): void {
    const bytes = new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
    for (let at = 0; at < bytes.length; ) {
      const got = readSync(this.descriptor, bytes, at, bytes.length - at, position + at);
      if (got === 0) {
        throw new PennyweightError('internal', 'a block of snapshots is shorter than announced; read it again.', { expected: bytes.length, actual: at });
      }
      at += got;
    }
  }

  close(): void {
    if (!this.#open) return;
    this.#open = false;
    closeSync(this.descriptor);
  }
}
