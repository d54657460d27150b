/** Numbers for people: engineering-friendly precision, never 0.30000000000000004. */

/** Up to `digits` significant digits; large and small numbers in powers of ten: 6.02e23 -> '6.02e23', 0.1 + 0.2 -> '0.3'. */
export function quantityText(value: number, digits = 6): string {
  if (!Number.isFinite(value)) return Number.isNaN(value) ? 'not a number' : value > 0 ? 'infinite' : '-infinite';
  if (value === 0) return '0';
  const size = Math.abs(value);
  if (size >= 1e7 || size < 1e-4) return value.toExponential(Math.min(digits, 4) - 1).replace(/\.?0+e/, 'e').replace('e+', 'e');
  return String(Number(value.toPrecision(digits)));
}

export function percentText(share: number): string {
  return `${Number((share * 100).toPrecision(3))} %`;
}

const units = ['B', 'KiB', 'MiB', 'GiB', 'TiB', 'PiB'];

/** IEC 80000-13 prefixes: 1536 -> '1.5 KiB' */
export function bytesText(bytes: number): string {
  let value = bytes, unit = 0;
  while (value >= 1024 && unit < units.length - 1) {
    value /= 1024;
    unit++;
  }
  return `${Number(value.toPrecision(3))} ${units[unit]}`;
}

export function rateText(rate: number, unit: string): string {
  return unit === 'bytes' ? `${bytesText(rate)}/s` : `${quantityText(rate, 3)} ${unit}/s`;
}

/** 3725 s -> '1 h 2 min' */
export function durationText(seconds: number): string {
  const s = Math.max(0, Math.round(seconds));
  if (s < 60) return `${s} s`;
  if (s < 3600) return `${Math.floor(s / 60)} min ${s % 60} s`;
  return `${Math.floor(s / 3600)} h ${Math.floor((s % 3600) / 60)} min`;
}
