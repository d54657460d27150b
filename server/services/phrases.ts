/** Quantities in sentences for people. */

/** 1536 -> '1.5 KiB' (IEC 80000-13 prefixes) */
export function bytesPhrase(bytes: number): string {
  const units = ['bytes', 'KiB', 'MiB', 'GiB', 'TiB'];
  let value = bytes, unit = 0;
  while (value >= 1024 && unit < units.length - 1) {
    value /= 1024;
    unit++;
  }
  return `${unit === 0 ? value : Number(value.toPrecision(3))} ${units[unit]}`;
}
