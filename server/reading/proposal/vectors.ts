/** One-dimensional arrays of an archive, and what they may be: time stamps, coordinates, cell edges. */
import type { ArrayInfo, AxisName } from '#contract/reading.ts';
import { isFloating, isReal } from '../element.ts';
import { sizeOf } from '../stored-array.ts';
import { namesAxis, namesTime, namesTimeWeights, namesWeights } from './array-names.ts';
import { isTimeUnit, textAttribute, unitOf } from './array-units.ts';
import type { Evidence } from './evidence.ts';

export interface Coordinate {
  info: ArrayInfo;
  axis: AxisName;
  edges: boolean;
  length: number;
  why: string;
}

export interface TimeVector {
  info: ArrayInfo;
  length: number;
  why: string;
  /** 5 and more: its name or its attributes say so */
  score: number;
}

/** One axis, or two of which one has length 1, as MATLAB writes vectors. */
export function isVector({ shape }: ArrayInfo): boolean {
  return shape.length === 1 || (shape.length === 2 && shape.includes(1));
}

function isIncreasing(values: Float64Array | null): boolean {
  if (!values || values.length < 2) return false;
  for (let i = 1; i < values.length; i++) if (!(values[i] > values[i - 1])) return false;
  return true;
}

function isMonotone(values: Float64Array | null): boolean {
  return isIncreasing(values) || isIncreasing(values && values.map((value) => -value));
}

/** CF conventions 1.11, chapters 4 and 4.4: units, standard_name and axis mark coordinates. */
function markedAxis(info: ArrayInfo): { axis: AxisName; why: string } | null {
  const mark = textAttribute(info, 'axis')?.toUpperCase();
  const standard = textAttribute(info, 'standard_name');
  const unit = unitOf(info);
  if (standard === 'latitude' || /^degrees?_?(north|n)$/i.test(unit ?? '')) return { axis: 'lat', why: 'its attributes mark it as latitude' };
  if (standard === 'longitude' || /^degrees?_?(east|e)$/i.test(unit ?? '')) return { axis: 'lon', why: 'its attributes mark it as longitude' };
  if (mark === 'X' || mark === 'Y' || mark === 'Z') return { axis: mark.toLowerCase() as AxisName, why: `its attribute axis is ${mark}` };
  return null;
}

export function coordinateOf(info: ArrayInfo, evidence: Evidence): Coordinate | null {
  if (!isVector(info) || !isReal(info.dtype)) return null;
  const length = sizeOf(info.shape);
  const marked = markedAxis(info);
  const named = namesAxis(info.path);
  if (!marked && (!named || namesWeights(info.path))) return null;
  const order = isMonotone(evidence.vector(info.path)) ? ', its values are monotone' : '';
  return {
    info,
    axis: marked?.axis ?? named!.axis,
    edges: named?.edges ?? false,
    length,
    why: `${marked?.why ?? 'its name is that of an axis'}, one axis${order}`,
  };
}

export function timeVectorOf(info: ArrayInfo, evidence: Evidence): TimeVector | null {
  if (!isVector(info) || !isReal(info.dtype) || namesTimeWeights(info.path)) return null;
  const reasons: string[] = [];
  let score = 0;
  const add = (points: number, reason: string) => {
    score += points;
    reasons.push(reason);
  };
  const name = namesTime(info.path);
  if (name === 'exact') add(6, 'its name is that of time');
  if (name === 'part') add(3, 'its name speaks of time');
  if (textAttribute(info, 'standard_name') === 'time' || textAttribute(info, 'axis')?.toUpperCase() === 'T') add(6, 'its attributes mark it as time');
  const unit = unitOf(info);
  if (unit && /\ssince\s/i.test(unit)) add(6, `its unit is "${unit}"`);
  else if (isTimeUnit(unit)) add(3, `its unit is ${unit}`);
  if (score === 0) return null;
  if (isIncreasing(evidence.vector(info.path))) add(2, 'its values increase');
  return { info, length: sizeOf(info.shape), score, why: reasons.join(', ') };
}

/** For a vector that nothing names: time only when nothing else can be. */
export function unnamedTimeVector(info: ArrayInfo, evidence: Evidence): TimeVector | null {
  if (!isVector(info) || !isFloating(info.dtype) || namesWeights(info.path) || namesAxis(info.path)) return null;
  const length = sizeOf(info.shape);
  if (!isIncreasing(evidence.vector(info.path))) return null;
  return { info, length, score: 1, why: 'uncertain: no name says so, but it is the only vector whose values increase and whose length fits one axis of a larger array' };
}
