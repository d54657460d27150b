/** Parameters of the run: single numbers, in datasets and in attributes of the root. */
import type { ArchiveContents, ArrayInfo, Reading } from '#contract/reading.ts';
import { findGroup } from '../contents-index.ts';
import { isReal } from '../element.ts';
import { sizeOf } from '../stored-array.ts';
import { baseName } from './array-names.ts';
import { unitOf } from './array-units.ts';
import type { Evidence } from './evidence.ts';

type Parameter = Reading['parameters'][number];

/** Bookkeeping of libraries and writers, no parameter of a run. */
const bookkeeping = /^(_|CLASS$|NAME$|TITLE$|VERSION$|version|format|conventions|created|date|seed$|MATLAB|H5)/i;

export function isSingle(info: ArrayInfo): boolean {
  return sizeOf(info.shape) === 1 && info.shape.length <= 2;
}

export function datasetParameter(info: ArrayInfo, evidence: Evidence): Parameter | null {
  if (!isSingle(info) || !isReal(info.dtype)) return null;
  const value = evidence.vector(info.path)?.[0];
  if (value === undefined || !Number.isFinite(value)) return null;
  return { name: baseName(info.path), value, unit: unitOf(info), from: info.path };
}

/** '/@Re' is the attribute Re of the root. */
export function attributeParameters(contents: ArchiveContents): Parameter[] {
  const attributes = findGroup(contents, '/')?.attributes ?? {};
  return Object.entries(attributes).flatMap(([name, value]): Parameter[] => {
    if (typeof value !== 'number' || bookkeeping.test(name)) return [];
    const unit = attributes[`${name}_units`] ?? attributes[`${name}_unit`];
    return [{ name, value, unit: typeof unit === 'string' ? unit : null, from: `/@${name}` }];
  });
}

/** The parameter again, by where it was read from; null where it is gone. */
export function parameterAgain(contents: ArchiveContents, parameter: Parameter, evidence: Evidence): Parameter | null {
  if (!parameter.from.startsWith('/@')) {
    const value = evidence.vector(parameter.from);
    return value?.length === 1 && Number.isFinite(value[0]) ? { ...parameter, value: value[0] } : null;
  }
  const value = findGroup(contents, '/')?.attributes[parameter.from.slice(2)];
  return typeof value === 'number' ? { ...parameter, value } : null;
}
