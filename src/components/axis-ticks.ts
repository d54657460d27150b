/** Places and words of the ticks of an axis. */

/** About `wanted` round values in [low, high]: steps of 1, 2 or 5 times a power of ten. */
export function linearTicks(low: number, high: number, wanted: number): number[] {
  if (!(high > low) || wanted < 1) return [low];
  const rough = (high - low) / wanted;
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = power * (rough / power > 5 ? 10 : rough / power > 2 ? 5 : rough / power > 1 ? 2 : 1);
  const first = Math.ceil(low / step - 1e-9);
  const last = Math.floor(high / step + 1e-9);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, i) => Number(((first + i) * step).toPrecision(12)));
}

/** Exponents of ten in [low, high] (both positive), thinned to about `wanted`. */
export function decadeTicks(low: number, high: number, wanted: number): number[] {
  const first = Math.ceil(Math.log10(low) - 1e-9);
  const last = Math.floor(Math.log10(high) + 1e-9);
  const every = Math.max(1, Math.ceil((last - first + 1) / Math.max(1, wanted)));
  const exponents: number[] = [];
  for (let exponent = last; exponent >= first; exponent -= every) exponents.unshift(exponent);
  return exponents;
}
