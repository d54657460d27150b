/** Numbers in sentences: as many digits as the stored type holds and no more, with the unit where one is known. */
import type { ElementType } from '#contract/reading.ts';
import type { Survey } from '../survey.ts';

/** `digits` significant digits without trailing zeros: 0.1 and not 0.1000000015 for a float32. */
export function plainNumber(value: number, digits = 6): string {
  if (!Number.isFinite(value)) return Number.isNaN(value) ? 'not a number' : value > 0 ? 'infinity' : '-infinity';
  const rounded = Number(value.toPrecision(digits));
  return Math.abs(rounded) < 1e15 ? String(rounded) : rounded.toExponential().replace('e+', 'e');
}

/** Significant decimal digits worth printing of a stored type: 24 and 11 significand bits hold 7 and 4 (IEEE 754-2019, table 3.1). */
export function printedDigits(type: ElementType | null): number {
  if (type === 'float16') return 4;
  return type === 'float32' || type === 'complex64' ? 7 : 12;
}

export function withUnit(text: string, unit: string | null): string {
  return unit ? `${text} ${unit}` : text;
}

/** The unit of a duration: CF writes "seconds since 2001-01-01", of which "seconds" counts here. */
export function timeUnit(survey: Survey): string | null {
  const time = survey.reading.time;
  if (!time || time.kind === 'ensemble' || !time.unit) return null;
  return time.unit.split(/\s+since\s+/i)[0].trim() || null;
}

export function stampText(survey: Survey, value: number): string {
  return withUnit(plainNumber(value, printedDigits(survey.stampType)), timeUnit(survey));
}

/** "snapshot 17 (t = 0.17 s)"; indices count from 0 as in the evidence. */
export function snapshotText(survey: Survey, index: number): string {
  const stamps = survey.stamps;
  if (!stamps || index >= stamps.length) return `snapshot ${index}`;
  return `snapshot ${index} (t = ${stampText(survey, stamps[index])})`;
}

export function counted(count: number, one: string, many = `${one}s`): string {
  return `${count} ${count === 1 ? one : many}`;
}

/** "the snapshot", "the 3 snapshots" */
export function theCounted(count: number, one: string, many = `${one}s`): string {
  return count === 1 ? `the ${one}` : `the ${count} ${many}`;
}
