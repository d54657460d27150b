/** Whether a reading fits an archive, and what exactly differs when it does not. Pure: looks at the contents alone. */
import type { ArchiveContents, ArrayInfo, AxisName, FieldReading, Reading } from '#contract/reading.ts';
import type { Survey } from '../engine/survey.ts';
import { unreadable } from './archive.ts';
import { findArray } from './contents-index.ts';
import { isTemplate, stepsOf } from './step-groups.ts';
import { sizeOf } from './stored-array.ts';

export type Mismatch = Survey['mismatches'][number];

const shapeText = (shape: readonly number[]) => `(${shape.join(', ')})`;

export function mismatchesOf(contents: ArchiveContents, reading: Reading): Mismatch[] {
  const mismatches: Mismatch[] = [];
  const differ = (path: string, expected: string, actual: string, message: string) => mismatches.push({ path, expected, actual, message });

  /** The array of a role, when it is there and can be read. */
  function need(path: string, role: string): ArrayInfo | null {
    const info = findArray(contents, path);
    if (!info) {
      differ(path, 'an array', 'nothing', `${path}, read as ${role}, is not in the archive.`);
      return null;
    }
    const reason = unreadable(contents, info);
    if (reason) {
      differ(path, 'plain numbers', info.dtype, `${path}, read as ${role}, cannot be read: ${reason}.`);
      return null;
    }
    return info;
  }
  function needCount(path: string, role: string, expected: number, what: string): void {
    const info = need(path, role);
    if (info && sizeOf(info.shape) !== expected) {
      differ(path, `${expected} values`, shapeText(info.shape), `${path}, read as ${role}, has shape ${shapeText(info.shape)}, and ${what} needs ${expected} values.`);
    }
  }

  const counts = new Map<AxisName, { count: number; path: string }>();
  for (const axis of reading.axes) if (axis.name !== 'time' && axis.name !== 'component') counts.set(axis.name, { count: axis.count, path: axis.path ?? 'the reading' });
  let snapshots: { count: number; path: string } | null = null;
  let nodes: number | null = null;

  if (reading.fields.length === 0) differ('/', 'a field', 'none', 'The reading names no field: choose at least one array as a field.');
  for (const field of reading.fields) {
    const info = fieldInfo(contents, field, need, differ);
    if (!info) continue;
    const { shape } = info;
    if (field.axes.length !== shape.length) {
      differ(field.path, `${field.axes.length} axes (${field.axes.join(', ')})`, shapeText(shape), `${field.path} has shape ${shapeText(shape)}, and the reading names ${field.axes.length} axes.`);
      continue;
    }
    const twice = field.axes.find((name, i) => field.axes.indexOf(name) !== i);
    if (twice) {
      differ(field.path, 'each axis once', field.axes.join(', '), `${field.path} has the axis ${twice} twice in the reading.`);
      continue;
    }
    const timeAt = field.axes.indexOf('time');
    const template = isTemplate(field.path);
    if (template && timeAt >= 0) {
      differ(field.path, 'no time axis', field.axes.join(', '), `${field.path} is one dataset a step, so none of its axes can be time.`);
      continue;
    }
    const count = template ? stepsOf(contents, field.path).length : timeAt < 0 ? 1 : shape[timeAt];
    if (snapshots && snapshots.count !== count) {
      differ(field.path, `${snapshots.count} snapshots`, `${count} snapshots`, `${field.path} has ${count} snapshots, and ${snapshots.path} has ${snapshots.count}.`);
    }
    snapshots ??= { count, path: field.path };
    let fieldNodes = 1;
    field.axes.forEach((name, i) => {
      if (name === 'time' || name === 'component') return;
      fieldNodes *= shape[i];
      const known = counts.get(name);
      if (known && known.count !== shape[i]) {
        differ(field.path, `${known.count} along ${name}`, shapeText(shape), `${field.path} has ${shape[i]} values along ${name}, and ${known.path} gives ${known.count}.`);
      }
      if (!known) counts.set(name, { count: shape[i], path: field.path });
    });
    nodes ??= fieldNodes;
  }

  if (reading.time?.kind === 'array' && snapshots) needCount(reading.time.path, 'time', snapshots.count, snapshots.path);
  if (reading.time?.kind.startsWith('step-') && !reading.fields.some(({ path }) => isTemplate(path))) {
    differ('/', 'a field with {step}', 'none', 'The time is read from step groups, and no field has a path with {step}.');
  }
  for (const axis of reading.axes) {
    if (axis.path !== null) needCount(axis.path, `coordinates along ${axis.name}`, axis.count, `the axis ${axis.name}`);
    if (axis.edges !== null) needCount(axis.edges, `cell edges along ${axis.name}`, axis.count + 1, `the axis ${axis.name}`);
  }
  if (reading.spaceWeights && nodes !== null) needCount(reading.spaceWeights.path, 'space weights', nodes, 'the grid');
  if (reading.timeWeights && snapshots) needCount(reading.timeWeights.path, 'time weights', snapshots.count, 'the record');
  return mismatches;
}

function fieldInfo(
  contents: ArchiveContents,
  { path }: FieldReading,
  need: (path: string, role: string) => ArrayInfo | null,
  differ: (path: string, expected: string, actual: string, message: string) => void,
): ArrayInfo | null {
  if (!isTemplate(path)) return need(path, 'a field');
  const steps = stepsOf(contents, path);
  if (steps.length === 0) {
    differ(path, 'groups with a number in their name', 'none', `No group of the archive fits ${path}.`);
    return null;
  }
  const [first] = steps;
  const info = need(first.info.path, 'a field');
  if (!info) return null;
  const other = steps.find((step) => step.info.shape.join() !== info.shape.join() || step.info.dtype !== info.dtype || unreadable(contents, step.info));
  if (other) {
    differ(
      other.info.path,
      `${info.dtype} ${shapeText(info.shape)}`,
      `${other.info.dtype} ${shapeText(other.info.shape)}`,
      `${other.info.path} is ${other.info.dtype} ${shapeText(other.info.shape)}, and ${info.path} of the first step is ${info.dtype} ${shapeText(info.shape)}.`,
    );
    return null;
  }
  return info;
}
