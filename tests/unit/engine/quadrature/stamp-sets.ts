/** Stamps to try rules on: seeded, so that a failure can be repeated. */

export function randomNumbers(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 4294967296;
  };
}

export const uniform = (m: number, from = 0, to = 1) => Float64Array.from({ length: m }, (_, j) => from + ((to - from) * j) / Math.max(1, m - 1));

/** Intervals between 1 and `ratio`, at random. */
export function uneven(m: number, seed: number, ratio = 3): Float64Array {
  const random = randomNumbers(seed), stamps = new Float64Array(m);
  for (let j = 1; j < m; j++) stamps[j] = stamps[j - 1] + 1 + (ratio - 1) * random();
  return stamps;
}
