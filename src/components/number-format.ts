/** Numbers for people: engineering-friendly precision, never 0.30000000000000004. The exact value is for copying. */

/** Up to `digits` significant digits; large and small numbers in powers of ten: 6.02e23 -> '6.02e23', 0.1 + 0.2 -> '0.3'. */
export function quantityText(value: number | null | undefined, digits = 6): string {
  if (value === null || value === undefined) return '-';
  if (!Number.isFinite(value)) return Number.isNaN(value) ? 'not a number' : value > 0 ? 'infinite' : '-infinite';
  if (value === 0) return '0';
  const size = Math.abs(value);
  if (Number.isInteger(value) && size < 1e9) return String(value);
  if (size >= 1e6 || size < 1e-4) {
    const [mantissa, exponent] = value.toExponential(Math.max(0, digits - 1)).split('e');
    return `${Number(mantissa)}e${exponent.replace('+', '')}`;
  }
  return String(Number(value.toPrecision(digits)));
}

/** A share between 0 and 1. What is not quite all is never rounded up to 100 %, what is not quite nothing never down to 0 %. */
export function percentText(share: number | null | undefined, digits = 1): string {
  if (share === null || share === undefined || !Number.isFinite(share)) return '-';
  const percent = share * 100;
  const least = 10 ** -digits;
  if (percent > 0 && percent < least) return `< ${least} %`;
  if (percent < 100 && percent > 100 - least) return `> ${(100 - least).toFixed(digits)} %`;
  return `${Number(percent.toFixed(digits))} %`;
}

const units = ['B', 'KiB', 'MiB', 'GiB', 'TiB', 'PiB'];

/** IEC 80000-13 prefixes, three significant digits: 1536 -> '1.5 KiB' */
export function bytesText(bytes: number): string {
  if (!Number.isFinite(bytes) || bytes < 0) return '-';
  let value = bytes;
  let unit = 0;
  while (value >= 999.5 && unit < units.length - 1 && !(unit === 0 && value < 1024)) {
    value /= 1024;
    unit++;
  }
  return `${unit === 0 ? value : Number(value.toPrecision(3))} ${units[unit]}`;
}

export function rateText(rate: number | null | undefined, unit: string): string {
  if (rate === null || rate === undefined || !Number.isFinite(rate)) return '';
  return unit === 'bytes' ? `${bytesText(rate)}/s` : `${quantityText(rate, 3)} ${unit}/s`;
}

/** In two units at most: 3725 s -> '1 h 2 min' */
export function durationText(seconds: number | null | undefined): string {
  if (seconds === null || seconds === undefined || !Number.isFinite(seconds) || seconds < 0) return '';
  if (seconds < 1) return 'under 1 s';
  const s = Math.round(seconds);
  if (s < 60) return `${s} s`;
  const [large, small, names] = s < 3600 ? [Math.floor(s / 60), s % 60, ['min', 's']] : s < 86400 ? [Math.floor(s / 3600), Math.floor((s % 3600) / 60), ['h', 'min']] : [Math.floor(s / 86400), Math.floor((s % 86400) / 3600), ['d', 'h']];
  return small === 0 ? `${large} ${names[0]}` : `${large} ${names[0]} ${small} ${names[1]}`;
}
