/**
 * One request at a time for each upload. While the holder is receiving, another is refused (423): two windows that send the
 * same file must not drive each other out. A holder that has been silent for a while hangs on a dead connection and is asked
 * to let go, as the protocol recommends for its lockers.
 */
import { PennyweightError } from '#contract/error.ts';
import type { Lock, Locker, RequestRelease } from '@tus/server';

interface Holder {
  lastSign: number;
  requestRelease: RequestRelease;
  released: Promise<void>;
  release(): void;
}

export class ReceivingLock implements Locker {
  readonly #holders = new Map<string, Holder>();
  readonly #silence: number;
  readonly #patience: number;

  /** `silence`: milliseconds without a byte after which a holder counts as dead; `patience`: how long it may take to let go. */
  constructor({ silence = 10_000, patience = 5_000 }: { silence?: number; patience?: number } = {}) {
    this.#silence = silence;
    this.#patience = patience;
  }

  /** The holder is alive. */
  sign(id: string): void {
    const holder = this.#holders.get(id);
    if (holder) holder.lastSign = Date.now();
  }

  holds(id: string): boolean {
    return this.#holders.has(id);
  }

  /** Refuses what would pull the file away from under its holder. */
  mustBeFree(id: string): void {
    if (this.holds(id)) throw locked(id);
  }

  newLock(id: string): Lock {
    let mine: Holder | null = null;
    return {
      lock: async (_signal, requestRelease) => {
        for (let holder = this.#holders.get(id); holder; holder = this.#holders.get(id)) await this.#takeFrom(id, holder);
        let release = (): void => undefined;
        const released = new Promise<void>((resolve) => (release = resolve));
        mine = { lastSign: Date.now(), requestRelease, released, release };
        this.#holders.set(id, mine);
      },
      unlock: async () => {
        if (mine && this.#holders.get(id) === mine) this.#holders.delete(id);
        mine?.release();
      },
    };
  }

  async #takeFrom(id: string, holder: Holder): Promise<void> {
    if (Date.now() - holder.lastSign < this.#silence) throw locked(id);
    await holder.requestRelease();
    let timer: NodeJS.Timeout | undefined;
    const tooLong = new Promise<false>((resolve) => (timer = setTimeout(() => resolve(false), this.#patience)));
    const free = await Promise.race([holder.released.then(() => true), tooLong]);
    clearTimeout(timer);
    if (!free) throw locked(id);
  }
}

function locked(id: string): PennyweightError {
  return new PennyweightError('upload-locked', 'This file is being received by another connection right now, perhaps from another window: use that one, or try again in some seconds.', { file: id });
}
