/** Snapshots gathered by the pixel column they fall on: what is drawn grows with the width of the strip, not with the record. */

export interface View {
  /** positions at the left and the right edge */
  from: number;
  to: number;
}

export interface PixelBins {
  count: Uint32Array;
  /** largest and smallest weight on the column; 0 where there is none */
  high: Float64Array;
  low: Float64Array;
}

/** The column of a position; it may lie outside 0 … pixels - 1. */
export function pixelOf(position: number, view: View, pixels: number): number {
  return Math.round(((position - view.from) / (view.to - view.from)) * (pixels - 1));
}

export function binByPixel(position: Float64Array, weights: ArrayLike<number> | null, view: View, pixels: number): PixelBins {
  const bins: PixelBins = { count: new Uint32Array(pixels), high: new Float64Array(pixels), low: new Float64Array(pixels) };
  for (let j = 0; j < position.length; j += 1) {
    const x = pixelOf(position[j], view, pixels);
    if (x < 0 || x >= pixels) continue;
    const weight = weights ? weights[j] : 1;
    bins.high[x] = bins.count[x] === 0 ? weight : Math.max(bins.high[x], weight);
    bins.low[x] = bins.count[x] === 0 ? weight : Math.min(bins.low[x], weight);
    bins.count[x] += 1;
  }
  return bins;
}

/** The snapshot nearest to a position, the first of several; -1 for none. A record can step back, so all are looked at. */
export function nearestTo(position: Float64Array, wanted: number): number {
  let best = -1;
  let least = Infinity;
  for (let j = 0; j < position.length; j += 1) {
    const distance = Math.abs(position[j] - wanted);
    if (distance < least) {
      least = distance;
      best = j;
    }
  }
  return best;
}
