/** Units as the archive's attributes state them. */
import type { ArrayInfo, AttributeValue } from '#contract/reading.ts';

const unitNames = ['units', 'unit', 'Units', 'Unit', 'UNITS', 'UNIT'];
const unspecified = /^(|n\/?a|none|unknown|null|\?|-)$/i;

function textOf(value: AttributeValue | undefined): string | null {
  const text = Array.isArray(value) ? value[0] : value;
  return typeof text === 'string' ? text.trim() : null;
}

export function unitOf({ attributes }: Pick<ArrayInfo, 'attributes'>): string | null {
  for (const name of unitNames) {
    const text = textOf(attributes[name]);
    if (text !== null) return unspecified.test(text) ? null : text;
  }
  return null;
}

/** CF conventions 4.4: a unit of time, alone or with "since" and a date. */
export function isTimeUnit(unit: string | null): boolean {
  return unit !== null && /^(s|sec|secs|seconds?|ms|milliseconds?|us|µs|microseconds?|ns|min|minutes?|h|hr|hrs|hours?|d|days?|a|yr|years?|months?)(\s+since\s.+)?$/i.test(unit.trim());
}

export function textAttribute({ attributes }: Pick<ArrayInfo, 'attributes'>, name: string): string | null {
  return textOf(attributes[name]);
}
