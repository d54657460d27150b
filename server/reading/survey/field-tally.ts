/**
 * Collects one field's statistics block by block. Blocks without a non-finite value take the fast loop only; the others
 * are gone through again with care. Sums are made block by block, so rounding grows with the number of blocks, not of
 * nodes.
 */
import { emptyTally, tallyDouble, tallySingle } from './block-tally.ts';
import type { FillCandidate } from './fill-candidates.ts';

/** Values, and the 32-bit words of their stored bits: one word a value in single precision, two in double. */
export type Values =
  | { single: true; values: Float32Array; words: Int32Array }
  | { single: false; values: Float64Array; words: Int32Array };

/** Elements of one block: small enough for the first cache level together with the snapshot before. */
const blockLength = 2048;
/** Squares beyond 1e308 overflow: such values are squared at this scale. */
const scale = 2 ** -600;

/** Roots of sums of squares, one a snapshot, that do not overflow before the root itself does. */
class RootOfSquares {
  readonly #plain: Float64Array;
  readonly #scaled: Float64Array;

  constructor(count: number) {
    this.#plain = new Float64Array(count);
    this.#scaled = new Float64Array(count);
  }

  addSquares(j: number, squares: number): void {
    this.#plain[j] += squares;
  }

  add(j: number, value: number): void {
    const square = value * value;
    if (square < Infinity) this.#plain[j] += square;
    else this.#scaled[j] += (value * scale) ** 2;
  }

  root(j: number): number {
    return this.#scaled[j] === 0 ? Math.sqrt(this.#plain[j]) : Math.sqrt(this.#scaled[j] + this.#plain[j] * scale * scale) / scale;
  }
}

export interface FillCount extends FillCandidate {
  counts: Float64Array;
  firstSnapshot: number;
  firstNode: number;
}

export class FieldTally {
  readonly snapshots: number;
  readonly min: Float64Array;
  readonly max: Float64Array;
  readonly sum: Float64Array;
  readonly nonFinite: Float64Array;
  readonly firstNonFinite: Float64Array;
  readonly fill = new Map<number, FillCount>();
  readonly #squares: RootOfSquares;
  readonly #steps: RootOfSquares;
  readonly #mixA: Int32Array;
  readonly #mixB: Int32Array;
  readonly #candidates: FillCandidate[];
  readonly #block = emptyTally();

  constructor(snapshots: number, candidates: FillCandidate[]) {
    this.snapshots = snapshots;
    this.#candidates = candidates;
    const column = (value: number) => new Float64Array(snapshots).fill(value);
    this.min = column(Infinity);
    this.max = column(-Infinity);
    this.sum = column(0);
    this.nonFinite = column(0);
    this.firstNonFinite = column(-1);
    this.#squares = new RootOfSquares(snapshots);
    this.#steps = new RootOfSquares(snapshots);
    this.#mixA = new Int32Array(snapshots);
    this.#mixB = new Int32Array(snapshots);
  }

  /** `count` values of snapshot `j` from `at` on, the first being node `node`; `before` holds the same nodes of snapshot j - 1. */
  add(j: number, now: Values, at: number, before: Values, beforeAt: number, count: number, node: number, changed: Uint8Array, changedAt: number): void {
    const block = this.#block;
    for (let done = 0; done < count; done += blockLength) {
      const many = Math.min(blockLength, count - done);
      const from = at + done;
      const beforeFrom = beforeAt + done;
      if (now.single && before.single) {
        tallySingle(now.values, now.words, from, before.values, before.words, beforeFrom, many, node + done, changed, changedAt + done, block);
      } else if (!now.single && !before.single) {
        tallyDouble(now.values, now.words, from, before.values, before.words, beforeFrom, many, node + done, changed, changedAt + done, block);
      }
      this.#mixA[j] += block.mixA;
      this.#mixB[j] += block.mixB;
      for (const candidate of this.#candidates) {
        if (candidate.value >= block.min && candidate.value <= block.max) this.#countFill(candidate, j, now.values, from, many, node + done);
      }
      if (Number.isFinite(block.squares) && Number.isFinite(block.step)) {
        this.sum[j] += block.sum;
        this.#squares.addSquares(j, block.squares);
        this.#steps.addSquares(j, block.step);
        if (block.min < this.min[j]) this.min[j] = block.min;
        if (block.max > this.max[j]) this.max[j] = block.max;
      } else {
        this.#addCarefully(j, now.values, from, before.values, beforeFrom, many, node + done);
      }
    }
  }

  #addCarefully(j: number, values: ArrayLike<number>, at: number, before: ArrayLike<number>, beforeAt: number, count: number, node: number): void {
    for (let i = 0; i < count; i++) {
      const value = values[at + i];
      if (!Number.isFinite(value)) {
        this.nonFinite[j]++;
        const first = this.firstNonFinite[j];
        if (first < 0 || node + i < first) this.firstNonFinite[j] = node + i;
        continue;
      }
      this.sum[j] += value;
      this.#squares.add(j, value);
      if (value < this.min[j]) this.min[j] = value;
      if (value > this.max[j]) this.max[j] = value;
      const difference = value - before[beforeAt + i];
      if (Number.isFinite(difference)) this.#steps.add(j, difference);
    }
  }

  #countFill(candidate: FillCandidate, j: number, values: ArrayLike<number>, at: number, count: number, node: number): void {
    let met = 0;
    let first = -1;
    for (let i = 0; i < count; i++) {
      if (values[at + i] !== candidate.value) continue;
      if (met++ === 0) first = node + i;
    }
    if (met === 0) return;
    let entry = this.fill.get(candidate.value);
    if (!entry) {
      entry = { ...candidate, counts: new Float64Array(this.snapshots), firstSnapshot: j, firstNode: first };
      this.fill.set(candidate.value, entry);
    }
    entry.counts[j] += met;
    if (j < entry.firstSnapshot || (j === entry.firstSnapshot && first < entry.firstNode)) {
      entry.firstSnapshot = j;
      entry.firstNode = first;
    }
  }

  /** Euclidean norm over the finite values. */
  norm(j: number): number {
    return this.#squares.root(j);
  }

  /** Euclidean norm of the difference to the snapshot before, where both are finite. */
  stepChange(j: number): number {
    return this.#steps.root(j);
  }

  hash(j: number): string {
    const word = (value: number) => (value >>> 0).toString(16).padStart(8, '0');
    return word(this.#mixA[j]) + word(this.#mixB[j]);
  }
}
