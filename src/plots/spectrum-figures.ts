/** What a spectrum plot draws of singular values: energy by rank, and where the rounding of the correlation route begins. */
export interface SpectrumRow {
  rank: number;
  sigma: number;
  /** sum of sigma^2 up to this rank over the sum of all; never above 1 by rounding */
  energy: number;
  /** at or below the floor: noise, whose digits mean nothing */
  noise: boolean;
}

export function spectrumRows(singularValues: number[], floor: number): SpectrumRow[] {
  const total = singularValues.reduce((sum, sigma) => sum + sigma * sigma, 0);
  let sum = 0;
  return singularValues.map((sigma, k) => {
    sum += sigma * sigma;
    return { rank: k + 1, sigma, energy: total > 0 ? Math.min(1, sum / total) : 0, noise: sigma <= floor };
  });
}

/** Exponents of ten that the axis spans: from the smallest positive value or the floor to the largest value. */
export function decadeSpan(rows: SpectrumRow[], floor: number): [number, number] {
  const first = rows[0]?.sigma || 1;
  // Noise far beneath the floor would only squeeze what can be read.
  const least = rows.reduce((low, row) => (row.sigma > 0 && row.sigma < low ? row.sigma : low), Math.min(floor || first, first));
  const low = Math.floor(Math.log10(Math.max(least, (floor || first * 1e-16) * 1e-3)));
  const high = Math.ceil(Math.log10(first));
  return [Math.min(low, high - 1), high];
}
