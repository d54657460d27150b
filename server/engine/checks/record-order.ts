/**
 * How the stamps of a record run: forward, back to time already covered (a restart), back to time not covered (out of
 * order), or not at all (duplicates). Every place is judged once, so that no two checks speak of the same cause.
 *
 * A jump back at index j is a *restart* when the record before it had sampled the place that it returns to. Up to five
 * stamps from j on vote: a stamp is "sampled" when it equals an earlier stamp, or lies in an interval of the earlier chain
 * that is no wider than 1.75 x the wider of its two adjacent intervals. A stamp that was merely swapped falls into a hole
 * of twice the usual spacing, as do stamps sorted as text (1, 10, 11, 2): those are out of order, and sorting mends them
 * where dropping a segment would lose data. A single stamp that goes back and returns beyond the earlier end by one leap
 * over stamps, wider than 1.75 x the interval that follows, is a stray, and so out of order.
 * There is no restart, and the record is out of order throughout, when more than a third of the steps go back (half do in a
 * random order), or when all stamps are distinct and sorting spaces them evenly (within 1.5 : 1; a restart doubles the
 * density of its overlap).
 * A restart explains the stamps of both segments in the overlap, so equal stamps there are no duplicates.
 * Neighbours count as equal when they are so to rounding, forward or back: at most 8 units of round-off of the stored type
 * apart and below a thousandth of the intervals around them (a checkpoint whose time was computed anew).
 * Method: common practice, no source; 1.75 lies between 1.5 (a growing step, at the end of a chain) and 2 (a swap).
 */
export interface Restart {
  /** first snapshot after the jump back */
  index: number;
  /** stamp before the jump, and stamp that it returns to */
  from: number;
  to: number;
  /** earlier snapshots at or after `to`, which the later segment covers again */
  overlapped: number;
  /** whether the later segment gets as far as the earlier one did */
  overtakes: boolean;
}

export interface RecordOrder {
  /** stamps that are NaN or infinite */
  undefinedStamps: number[];
  /** jumps back to time not covered before: indices j with t[j] < t[j-1] */
  backward: number[];
  restarts: Restart[];
  /** later index of two equal stamps */
  duplicates: number[];
  /** those of them that are equal to rounding only */
  nearlyEqual: number[];
  /** snapshots that remain, in strictly increasing order of time: restarts keep the later segment, duplicates the first */
  kept: number[];
}

const holeRatio = 1.75;
const shuffledShare = 1 / 3;
const evenRatio = 1.5;
const votes = 5;
const equalUnits = 8;
const equalShare = 1e-3;

/** First position in the ascending `chain` whose stamp is >= `value`. */
function lowerBound(chain: number[], t: Float64Array, value: number): number {
  let low = 0;
  let high = chain.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (t[chain[middle]] < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

function sampled(chain: number[], t: Float64Array, value: number): boolean {
  const at = lowerBound(chain, t, value);
  if (at === chain.length) return false;
  if (t[chain[at]] === value) return true;
  if (at === 0) return false;
  const hole = t[chain[at]] - t[chain[at - 1]];
  const before = at >= 2 ? t[chain[at - 1]] - t[chain[at - 2]] : 0;
  const after = at + 1 < chain.length ? t[chain[at + 1]] - t[chain[at]] : 0;
  return hole <= holeRatio * Math.max(before, after);
}

function isRestart(chain: number[], t: Float64Array, finite: number[], position: number): boolean {
  const start = t[finite[position]];
  const top = t[chain[chain.length - 1]];
  if (start < t[chain[0]]) return false;
  const next = position + 1 < finite.length ? t[finite[position + 1]] : null;
  if (next !== null && next > top) {
    const at = lowerBound(chain, t, start);
    const leaped = chain.length - at - (t[chain[at]] === start ? 1 : 0);
    const usual =
      position + 2 < finite.length ? t[finite[position + 2]] - next : at > 0 ? t[chain[at]] - t[chain[at - 1]] : 0;
    if (leaped >= 1 && next - start > holeRatio * usual) return false;
  }
  let balance = 0;
  let first = false;
  for (let k = 0; k < votes && position + k < finite.length; k++) {
    const value = t[finite[position + k]];
    if (value > top || (k > 0 && value < t[finite[position + k - 1]])) break;
    const yes = sampled(chain, t, value);
    if (k === 0) first = yes;
    balance += yes ? 1 : -1;
  }
  return balance > 0 || (balance === 0 && first);
}

function sortsEvenly(t: Float64Array, indices: number[]): boolean {
  const sorted = Float64Array.from(indices, (j) => t[j]).sort();
  let least = Infinity;
  let most = 0;
  for (let i = 1; i < sorted.length; i++) {
    least = Math.min(least, sorted[i] - sorted[i - 1]);
    most = Math.max(most, sorted[i] - sorted[i - 1]);
  }
  return least > 0 && most <= evenRatio * least;
}

/** Whether the stamp at `position` repeats the one before it to rounding, but not exactly. */
function nearlyRepeats(t: Float64Array, finite: number[], position: number, unit: number): boolean {
  const [before, here] = [t[finite[position - 1]], t[finite[position]]];
  const apart = Math.abs(here - before);
  if (apart === 0 || apart > equalUnits * unit * Math.max(Math.abs(before), Math.abs(here))) return false;
  const around = Math.max(
    position >= 2 ? before - t[finite[position - 2]] : 0,
    position + 1 < finite.length ? t[finite[position + 1]] - here : 0,
  );
  return apart <= equalShare * around;
}

/**
 * Order of the stamps `t` [m]; `unit` is the round-off of their stored type, 0 to compare exactly. O(m log m).
 * Empty and one-stamp records are in order.
 */
export function describeOrder(t: Float64Array, unit = 0): RecordOrder {
  const finite: number[] = [];
  const undefinedStamps: number[] = [];
  for (let j = 0; j < t.length; j++) (Number.isFinite(t[j]) ? finite : undefinedStamps).push(j);

  let jumps = 0;
  const duplicates = new Set<number>();
  const nearlyEqual: number[] = [];
  for (let i = 1; i < finite.length; i++) {
    if (nearlyRepeats(t, finite, i, unit)) nearlyEqual.push(finite[i]);
    else if (t[finite[i]] < t[finite[i - 1]]) jumps++;
    else if (t[finite[i]] === t[finite[i - 1]]) duplicates.add(finite[i]);
  }
  for (const j of nearlyEqual) duplicates.add(j);
  const distinct = duplicates.size === 0 ? finite : finite.filter((j) => !duplicates.has(j));
  const shuffled = jumps > 0 && (jumps > shuffledShare * finite.length || sortsEvenly(t, distinct));

  const backward: number[] = [];
  const restarts: Restart[] = [];
  const aside: number[] = [];
  let chain: number[] = [];
  for (let i = 0; i < finite.length; i++) {
    const j = finite[i];
    if (duplicates.has(j)) continue;
    if (i > 0 && t[j] < t[finite[i - 1]]) {
      if (!shuffled && isRestart(chain, t, finite, i)) {
        const keep = lowerBound(chain, t, t[j]);
        const top = t[chain[chain.length - 1]];
        let end = i;
        while (end + 1 < finite.length && t[finite[end + 1]] >= t[finite[end]] && t[finite[end]] < top) end++;
        restarts.push({
          index: j,
          from: t[finite[i - 1]],
          to: t[j],
          overlapped: chain.length - keep,
          overtakes: t[finite[end]] >= top,
        });
        chain.length = keep;
      } else {
        backward.push(j);
        const next = i + 1 < finite.length ? t[finite[i + 1]] : null;
        if (next !== null && next > t[chain[chain.length - 1]]) {
          aside.push(j);
          continue;
        }
        for (const index of chain) aside.push(index);
        chain = [];
      }
    }
    chain.push(j);
  }

  const sorted = aside.length === 0 ? chain : aside.concat(chain).sort((a, b) => t[a] - t[b] || a - b);
  const kept: number[] = [];
  for (const j of sorted) {
    if (kept.length > 0 && t[kept[kept.length - 1]] === t[j]) duplicates.add(j);
    else kept.push(j);
  }
  return { undefinedStamps, backward, restarts, duplicates: [...duplicates].sort((a, b) => a - b), nearlyEqual, kept };
}
