/** Layout "one group per step": the fields of one step stand in a group of their own, numbered in its name. */
import type { ArchiveContents, ArrayInfo, TimeSource } from '#contract/reading.ts';
import { findArray, findGroup } from '../contents-index.ts';
import { stepPrefix, stepsOf, type Step } from '../step-groups.ts';
import { sizeOf } from '../stored-array.ts';
import { namesTime } from './array-names.ts';
import { unitOf } from './array-units.ts';
import { isVector, timeVectorOf } from './vectors.ts';
import type { Evidence } from './evidence.ts';

export interface StepArray {
  template: string;
  /** the array in the first step */
  info: ArrayInfo;
  steps: number;
}

export interface StepLayout {
  /** path of the step groups with {step} */
  groups: string;
  steps: Step[];
  arrays: StepArray[];
  time: { source: TimeSource; why: string; path: string };
  /** whether a path of the contents stands in a step group */
  owns(path: string): boolean;
}

/** Families of numbered groups: same parent, same name before the number. */
function families(contents: ArchiveContents): Map<string, { before: string; prefix: string; names: Set<string> }> {
  const found = new Map<string, { before: string; prefix: string; names: Set<string> }>();
  for (const { path } of contents.arrays) {
    const parts = path.split('/');
    for (let i = 1; i < parts.length - 1; i++) {
      const prefix = stepPrefix(parts[i]);
      if (prefix === null) continue;
      const before = parts.slice(0, i).join('/');
      const key = `${before}/${prefix}`;
      const family = found.get(key) ?? { before, prefix, names: new Set<string>() };
      family.names.add(parts[i]);
      found.set(key, family);
    }
  }
  return found;
}

export function stepLayoutOf(contents: ArchiveContents, evidence: Evidence): StepLayout | null {
  const [family] = [...families(contents).values()].filter(({ names }) => names.size >= 2).sort((a, b) => b.names.size - a.names.size);
  if (!family) return null;
  const groups = `${family.before}/{step}`;
  const firstName = [...family.names][0];
  const root = `${family.before}/${firstName}/`;
  const arrays: StepArray[] = [];
  let steps: Step[] = [];
  for (const info of contents.arrays) {
    if (!info.path.startsWith(root)) continue;
    const template = `${groups}/${info.path.slice(root.length)}`;
    const found = stepsOf(contents, template);
    arrays.push({ template, info: found[0].info, steps: found.length });
    if (found.length > steps.length) steps = found;
  }
  // A group with time stamps of its own is a whole run, not a step.
  const run = arrays.some(({ info }) => isVector(info) && sizeOf(info.shape) > 1 && (timeVectorOf(info, evidence)?.score ?? 0) >= 5);
  const fielded = arrays.some(({ info, steps: count }) => count === steps.length && sizeOf(info.shape) > 1);
  if (run || !fielded || steps.length < 2) return null;
  const owned = new Set(steps.map(({ group }) => group));
  return {
    groups,
    steps,
    arrays,
    time: timeOfSteps(contents, groups, steps, arrays),
    owns(path) {
      const part = path.startsWith(`${family.before}/`) ? path.slice(family.before.length + 1).split('/')[0] : '';
      return owned.has(`${family.before}/${part}`);
    },
  };
}

function timeOfSteps(contents: ArchiveContents, groups: string, steps: Step[], arrays: StepArray[]): StepLayout['time'] {
  const attributes = findGroup(contents, steps[0].group)?.attributes ?? {};
  const inAll = (name: string) => steps.every(({ group }) => {
    const value = findGroup(contents, group)?.attributes[name];
    return value !== undefined && !Array.isArray(value) && value !== '' && Number.isFinite(Number(value));
  });
  const attribute = Object.keys(attributes).find((name) => namesTime(name) === 'exact' && inAll(name));
  if (attribute) {
    const unit = attributes[`${attribute}_units`] ?? attributes[`${attribute}_unit`];
    return {
      source: { kind: 'step-attribute', name: attribute, unit: typeof unit === 'string' ? unit : null },
      path: `${groups}/@${attribute}`,
      why: `every step group has a number in its attribute ${attribute}`,
    };
  }
  const scalar = arrays.find(({ template, info, steps: count }) => count === steps.length && sizeOf(info.shape) === 1 && namesTime(template) === 'exact');
  if (scalar) {
    return {
      source: { kind: 'step-dataset', name: scalar.template.slice(groups.length + 1), unit: unitOf(scalar.info) },
      path: scalar.template,
      why: 'every step group has one number of that name',
    };
  }
  const whole = steps.every(({ number }) => Number.isInteger(number));
  return {
    source: { kind: 'step-name', unit: null },
    path: groups,
    why: whole
      ? 'uncertain: no step group tells its time, so the whole number in its name stands for it: a count of steps rather than a time'
      : 'no step group tells its time otherwise, so the number in its name is taken',
  };
}

/** The array of the first step stands for all of a template. */
export function firstOf(contents: ArchiveContents, template: string): ArrayInfo | undefined {
  const [step] = stepsOf(contents, template);
  return step ? findArray(contents, step.info.path) : undefined;
}
