/**
 * A saved reading brought to another archive of the same solver: counts and parameter values are this archive's, roles
 * cover its arrays; what each array means stays. What then does not fit, mismatchesOf says.
 */
import type { ArchiveContents, AxisName, Reading } from '#contract/reading.ts';
import { findArray } from '../contents-index.ts';
import { isTemplate, stepsOf } from '../step-groups.ts';
import { sizeOf } from '../stored-array.ts';
import type { Evidence } from './evidence.ts';
import { attributeParameters, parameterAgain } from './parameters.ts';
import { firstOf } from './step-layout.ts';

export function adapt(contents: ArchiveContents, reading: Reading, evidence: Evidence): Reading {
  const countAlong = (name: AxisName): number | null => {
    for (const { path, axes } of reading.fields) {
      const info = isTemplate(path) ? firstOf(contents, path) : findArray(contents, path);
      const at = axes.indexOf(name);
      if (info && at >= 0 && info.shape.length === axes.length) return info.shape[at];
    }
    return null;
  };
  const axes = reading.axes.map((axis) => {
    const coordinates = axis.path === null ? undefined : findArray(contents, axis.path);
    return { ...axis, count: coordinates ? sizeOf(coordinates.shape) : (countAlong(axis.name) ?? axis.count) };
  });

  const again = reading.parameters.map((parameter) => parameterAgain(contents, parameter, evidence)).filter((one) => one !== null);
  const added = attributeParameters(contents).filter(({ from }) => !again.some((one) => one.from === from));

  const inStep = new Set(reading.roles.filter(({ path }) => isTemplate(path)).flatMap(({ path }) => stepsOf(contents, path).map(({ info }) => info.path)));
  const known = new Set(reading.roles.map(({ path }) => path));
  const roles = reading.roles.filter(({ path }) => findArray(contents, path) !== undefined || isTemplate(path.replace(/\/@[^/]*$/, '')) || !path.startsWith('/'));
  for (const { path } of contents.arrays) {
    if (!known.has(path) && !inStep.has(path)) roles.push({ path, role: 'ignored', why: 'the saved reading does not know it' });
  }
  return { ...reading, axes, parameters: [...again, ...added], roles };
}
