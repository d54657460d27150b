/** split: train, validation, test; by whole runs, or by blocks of time with snapshots left out where two parts meet. Seeded. */
import type { SplitPart } from '#contract/recipe.ts';
import { counted, recordRanges, type RecordState } from './record-state.ts';
import { refuse, type Step } from './step.ts';

/** Mulberry32 (T. Ettinger, public domain, from memory): a 32-bit generator, the same on every machine. */
function generator(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t = (t + Math.imul(t ^ (t >>> 7), t | 61)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** Fisher-Yates (R. Durstenfeld, CACM 7 (1964) 420). */
function shuffled(count: number, seed: number): number[] {
  const random = generator(seed), items = Array.from({ length: count }, (_, i) => i);
  for (let i = count - 1; i > 0; i--) {
    const k = Math.floor(random() * (i + 1));
    [items[i], items[k]] = [items[k], items[i]];
  }
  return items;
}

const parts = ['train', 'validation', 'test'] as const;

/** Largest-remainder shares of `count` items; every part that is asked for gets one when there are enough. */
function shareOut(count: number, shares: readonly number[]): number[] {
  const exact = shares.map((share) => share * count), whole = exact.map(Math.floor);
  for (let left = count - whole.reduce((a, b) => a + b, 0); left > 0; left--) {
    const k = exact.map((each, i) => each - whole[i]).reduce((best, rest, i, all) => (rest > all[best] ? i : best), 0);
    whole[k]++;
  }
  shares.forEach((share, i) => {
    const richest = whole.indexOf(Math.max(...whole));
    if (share > 0 && whole[i] === 0 && whole[richest] > 1) {
      whole[richest]--;
      whole[i]++;
    }
  });
  return whole;
}

function assign(count: number, shares: readonly number[], seed: number, what: string): SplitPart[] {
  const counts = shareOut(count, shares);
  const empty = parts.find((_, i) => shares[i] > 0 && counts[i] === 0);
  if (empty) refuse(`The ${empty} part would be empty: ${counted(count, what)} cannot be shared out among ${shares.filter((share) => share > 0).length} parts.`, { part: empty });
  const assigned = new Array<SplitPart>(count);
  let next = 0;
  const pick = shuffled(count, seed);
  parts.forEach((part, i) => { for (let k = 0; k < counts[i]; k++) assigned[pick[next++]] = part; });
  return assigned;
}

export const split: Step<'split'> = {
  name: 'split',
  rank: 3,
  apply(state: RecordState, { by, shares, blocks, guard, seed }) {
    const total = shares.reduce((a, b) => a + b, 0);
    if (Math.abs(total - 1) > 1e-9) refuse(`The shares of train, validation and test add up to ${Number(total.toPrecision(6))} instead of 1.`, { total });
    const ranges = recordRanges(state);
    state.split = new Array<SplitPart>(state.columns.length).fill('train');
    if (by === 'run') {
      const assigned = assign(ranges.length, shares, seed, 'run');
      ranges.forEach(({ from, to }, r) => state.split.fill(assigned[r], from, to));
    } else {
      const cuts = ranges.flatMap(({ source, from, to }) => {
        if (to - from < blocks) refuse(`Run ${state.sources[source].run} has ${counted(to - from, 'snapshot')}, fewer than the ${blocks} blocks it is to be cut into.`, { run: state.sources[source].run });
        return Array.from({ length: blocks }, (_, b) => ({ source, from: from + Math.floor((b * (to - from)) / blocks), to: from + Math.floor(((b + 1) * (to - from)) / blocks) }));
      });
      const assigned = assign(cuts.length, shares, seed, 'block');
      cuts.forEach(({ from, to }, b) => state.split.fill(assigned[b], from, to));
      // The guard band is taken from the beginning of the later block where two parts of one record meet.
      cuts.forEach(({ source, from, to }, b) => {
        if (b > 0 && cuts[b - 1].source === source && assigned[b - 1] !== assigned[b]) state.split.fill('guard', from, Math.min(from + guard, to));
      });
    }
    const count = (part: SplitPart) => state.split.filter((each) => each === part).length;
    const lost = parts.find((part, i) => shares[i] > 0 && count(part) === 0);
    if (lost) refuse(`The ${lost} part is empty: the guard band of ${counted(guard, 'snapshot')} leaves nothing of its blocks.`, { part: lost });
    return `Train ${count('train')}, validation ${count('validation')}, test ${count('test')} columns${count('guard') > 0 ? `, ${count('guard')} left out between them` : ''}.`;
  },
};
