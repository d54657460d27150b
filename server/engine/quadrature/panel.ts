/** A composite rule is a sum of panels: formulas on a few neighbouring stamps, each for the integral over a few intervals. */

export interface Panel {
  /** index of the stamp that weights[0] belongs to */
  first: number;
  weights: readonly number[];
  /** the panel stands for the integral from stamps[from] to stamps[to] */
  from: number;
  to: number;
}

/** Weights of length m = stamps.length; 1 for a single stamp, whose record has no panel (see assertStamps). */
export function addPanels(stamps: Float64Array, panels: Iterable<Panel>): Float64Array {
  if (stamps.length === 1) return Float64Array.of(1);
  const total = new Float64Array(stamps.length);
  for (const { first, weights } of panels) weights.forEach((weight, k) => (total[first + k] += weight));
  return total;
}
