/**
 * Watches the reading process from outside: its resident memory (a worker's or a heap's limit does not bind WebAssembly)
 * and the time of the request at hand. What it finds is told once.
 */
import { readFileSync } from 'node:fs';

export interface Deadline {
  millis: number;
  expire(): void;
}

const tick = 100;

/** Resident bytes of a process (proc(5), VmRSS); null where the system does not tell. */
function residentBytes(pid: number): number | null {
  try {
    const match = /^VmRSS:\s+(\d+) kB$/m.exec(readFileSync(`/proc/${pid}/status`, 'latin1'));
    return match ? Number(match[1]) * 1024 : null;
  } catch {
    return null;
  }
}

export class Guard {
  readonly #timer: NodeJS.Timeout;
  #deadline: Deadline | null = null;
  #spent = 0;
  #last = performance.now();
  peakBytes = 0;

  constructor(pid: number, memoryBytes: number, onMemory: (bytes: number) => void) {
    this.#timer = setInterval(() => {
      const bytes = residentBytes(pid) ?? 0;
      this.peakBytes = Math.max(this.peakBytes, bytes);
      if (bytes > memoryBytes) onMemory(bytes);
      this.#countTime();
    }, tick);
  }

  start(deadline: Deadline): void {
    this.#deadline = deadline;
    this.#spent = 0;
    this.#last = performance.now();
  }

  finish(): void {
    this.#deadline = null;
  }

  stop(): void {
    clearInterval(this.#timer);
  }

  #countTime(): void {
    const now = performance.now();
    // A sleeping laptop or a busy event loop is not the reader's time: no tick counts for more than a second.
    if (this.#deadline) this.#spent += Math.min(1000, now - this.#last);
    this.#last = now;
    if (this.#deadline && this.#spent > this.#deadline.millis) {
      const { expire } = this.#deadline;
      this.#deadline = null;
      expire();
    }
  }
}
