/** Rate and time left from progress readings, smoothed over the last ten seconds so that the figures do not flicker. */
export class TransferRate {
  private readings: { at: number; bytes: number }[] = [];

  /** `at` in milliseconds, `bytes` sent so far. */
  add(at: number, bytes: number): void {
    const last = this.readings[this.readings.length - 1];
    if (last && bytes < last.bytes) this.readings = [];
    this.readings.push({ at, bytes });
    while (this.readings.length > 2 && at - this.readings[0]!.at > 10_000) this.readings.shift();
  }

  reset(): void {
    this.readings = [];
  }

  /** bytes per second; null until two readings lie at least a quarter of a second apart */
  rate(): number | null {
    const first = this.readings[0], last = this.readings[this.readings.length - 1];
    if (!first || !last || last.at - first.at < 250) return null;
    return ((last.bytes - first.bytes) / (last.at - first.at)) * 1000;
  }

  /** seconds until `total` bytes are sent; null when unknown */
  secondsLeft(total: number): number | null {
    const rate = this.rate(), last = this.readings[this.readings.length - 1];
    return rate && last ? Math.max(0, (total - last.bytes) / rate) : null;
  }
}
