/** Evidence in the one form that every finding has: the first 20 indices, their stamps, and how many in all. */
import type { Evidence } from '#contract/finding.ts';

export const evidenceLength = 20;

/** `stamps` null: no times. Stamps that are not finite have no place in JSON, so `times` is left out when one is met. */
export function evidenceOf(
  indices: ArrayLike<number>,
  stamps: Float64Array | null,
  members: Record<string, unknown> = {},
): Evidence {
  const first = Array.from({ length: Math.min(indices.length, evidenceLength) }, (_, i) => indices[i]);
  const times = stamps ? first.map((index) => stamps[index]) : [];
  const known = times.length > 0 && times.every(Number.isFinite);
  return { indices: first, ...(known ? { times } : {}), count: indices.length, ...members };
}
