/**
 * One group per step: a field's path is a template with '{step}' for the step group's name ('/steps/{step}/u'). The steps
 * are ordered by the number at the end of their names, not as text: 'step_10' comes after 'step_9'.
 */
import type { ArchiveContents, ArrayInfo } from '#contract/reading.ts';

export interface Step {
  /** name of the step's group */
  name: string;
  /** the number at its end */
  number: number;
  /** path of the step's group */
  group: string;
  info: ArrayInfo;
}

export function isTemplate(path: string): boolean {
  return path.split('/').includes('{step}');
}

/** The number at the end of a name: 'step_000120' is 120, 't=1.5e-3' is 0.0015; null without one. A minus counts only at the start. */
export function numberInName(name: string): number | null {
  const match = /(^[-+])?\d+(?:\.\d+)?(?:[eE][-+]?\d+)?$/.exec(name);
  const value = match ? Number(match[0]) : NaN;
  return Number.isFinite(value) ? value : null;
}

/** The part of a step name before its number: 'step_' of 'step_000120'; null without a number. */
export function stepPrefix(name: string): string | null {
  return numberInName(name) === null ? null : name.replace(/(^[-+])?\d+(?:\.\d+)?(?:[eE][-+]?\d+)?$/, '');
}

/** The steps of a template, by ascending number. */
export function stepsOf(contents: ArchiveContents, template: string): Step[] {
  const parts = template.split('/');
  const position = parts.indexOf('{step}');
  const before = parts.slice(0, position).join('/');
  const after = parts.slice(position + 1).join('/');
  const steps: Step[] = [];
  for (const info of contents.arrays) {
    if (!info.path.startsWith(`${before}/`) || !info.path.endsWith(`/${after}`)) continue;
    const name = info.path.slice(before.length + 1, info.path.length - after.length - 1);
    const number = name.includes('/') ? null : numberInName(name);
    if (number !== null) steps.push({ name, number, group: `${before}/${name}`, info });
  }
  return steps.sort((a, b) => a.number - b.number || (a.name < b.name ? -1 : 1));
}
