/** The small arrays of a reading: time stamps, coordinates, cell edges, weights. */
import { PennyweightError } from '#contract/error.ts';
import type { ArrayInfo, ElementType, Reading, TimeSource } from '#contract/reading.ts';
import type { Survey, SurveyAxis } from '../engine/survey.ts';
import { readVector, type Archive } from './archive.ts';
import { arrayInfo, findArray, findGroup } from './contents-index.ts';
import { isTemplate, stepsOf, type Step } from './step-groups.ts';

export type ReadingVectors = Pick<Survey, 'stamps' | 'stampType' | 'stampPath' | 'axes' | 'spaceWeights' | 'timeWeights'>;

type Stamps = Pick<Survey, 'stamps' | 'stampType' | 'stampPath'>;

const none: Stamps = { stamps: null, stampType: null, stampPath: null };

export function readVectors(archive: Archive, reading: Reading): ReadingVectors {
  return {
    ...stampsOf(archive, reading),
    axes: reading.axes.filter(({ name }) => name !== 'time').map((axis): SurveyAxis => ({
      name: axis.name,
      path: axis.path,
      unit: axis.unit,
      count: axis.count,
      nodes: axis.path === null ? null : readVector(archive, axis.path),
      edges: axis.edges === null ? null : readVector(archive, axis.edges),
      dtype: axis.path === null ? null : arrayInfo(archive.contents, axis.path).dtype,
      periodic: axis.periodic,
    })),
    spaceWeights: reading.spaceWeights && readVector(archive, reading.spaceWeights.path),
    timeWeights: reading.timeWeights && readVector(archive, reading.timeWeights.path),
  };
}

function stampsOf(archive: Archive, reading: Reading): Stamps {
  const { time } = reading;
  if (!time) return none;
  switch (time.kind) {
    case 'ensemble':
      return none;
    case 'array':
      return { stamps: readVector(archive, time.path), stampType: arrayInfo(archive.contents, time.path).dtype, stampPath: time.path };
    case 'generated': {
      const count = snapshotsOf(archive, reading);
      return { stamps: Float64Array.from({ length: count }, (_, j) => time.start + j * time.step), stampType: 'float64', stampPath: null };
    }
    default:
      return stepStamps(archive, reading, time);
  }
}

/** Snapshots of the first field. */
export function snapshotsOf(archive: Archive, reading: Reading): number {
  const [field] = reading.fields;
  if (!field) return 0;
  if (isTemplate(field.path)) return stepsOf(archive.contents, field.path).length;
  const at = field.axes.indexOf('time');
  return at < 0 ? 1 : arrayInfo(archive.contents, field.path).shape[at];
}

function stepStamps(archive: Archive, reading: Reading, time: Extract<TimeSource, { kind: 'step-attribute' | 'step-dataset' | 'step-name' }>): Stamps {
  const template = reading.fields.find(({ path }) => isTemplate(path))?.path;
  if (!template) {
    throw new PennyweightError('reading-mismatch', 'the reading takes the time from step groups, and no field has a path with {step}; correct the reading.');
  }
  const steps = stepsOf(archive.contents, template);
  const groupTemplate = template.slice(0, template.indexOf('{step}') + '{step}'.length);
  if (time.kind === 'step-name') return { stamps: Float64Array.from(steps, ({ number }) => number), stampType: 'string', stampPath: groupTemplate };
  if (time.kind === 'step-attribute') {
    const values = steps.map((step) => ({ step, value: attributeOf(archive, step, time.name) }));
    const written = values.every(({ value }) => typeof value === 'string');
    const stamps = Float64Array.from(values, ({ step, value }) => stamp(step, `attribute ${time.name}`, Number(value ?? NaN)));
    return { stamps, stampType: written ? 'string' : 'float64', stampPath: `${groupTemplate}/@${time.name}` };
  }
  const infos: ArrayInfo[] = [];
  const stamps = Float64Array.from(steps, (step) => {
    const path = `${step.group}/${time.name}`;
    const info = findArray(archive.contents, path);
    if (!info) throw new PennyweightError('reading-mismatch', `${step.group} has no dataset ${time.name} with its time; correct the reading.`, { path });
    infos.push(info);
    const values = readVector(archive, path);
    return stamp(step, `dataset ${time.name}`, values.length === 1 ? values[0] : NaN);
  });
  const dtype: ElementType = infos[0]?.dtype ?? 'float64';
  return { stamps, stampType: dtype, stampPath: `${groupTemplate}/${time.name}` };
}

function attributeOf(archive: Archive, step: Step, name: string): unknown {
  return findGroup(archive.contents, step.group)?.attributes[name];
}

function stamp(step: Step, where: string, value: number): number {
  if (!Number.isNaN(value)) return value;
  throw new PennyweightError('reading-mismatch', `${where} of ${step.group} is no single number, and the time of that step is read from it; correct the reading.`, {
    path: step.group,
  });
}
