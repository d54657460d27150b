/**
 * The reading that an archive suggests by itself. Pure: contents and the values of small arrays in, a reading with a
 * reason for every array out. What is a guess says "uncertain".
 */
import type { ArchiveContents, ArrayInfo, AxisName, Reading } from '#contract/reading.ts';
import { unreadable } from '../archive.ts';
import { isTemplate } from '../step-groups.ts';
import { sizeOf } from '../stored-array.ts';
import { namesConnectivity, namesMask, namesPoints, namesTimeWeights, namesWeights } from './array-names.ts';
import { unitOf } from './array-units.ts';
import { labelsOf } from './axis-labels.ts';
import type { Evidence } from './evidence.ts';
import { fieldNames, onOneGrid, type FieldCandidate } from './field-candidates.ts';
import { attributeParameters, datasetParameter, isSingle } from './parameters.ts';
import { RoleBook } from './role-book.ts';
import { spaceAxesOf } from './space-axes.ts';
import { stepLayoutOf, type StepLayout } from './step-layout.ts';
import { timeAxisOf } from './time-axis.ts';
import { coordinateOf, isVector, timeVectorOf, unnamedTimeVector, type Coordinate, type TimeVector } from './vectors.ts';

export function propose(contents: ArchiveContents, evidence: Evidence): Reading {
  const roles = new RoleBook();
  const steps = stepLayoutOf(contents, evidence);
  const single = contents.arrays.filter(({ path }) => !steps?.owns(path));
  const readable = single.filter((info) => {
    const reason = unreadable(contents, info);
    const text = typeof info.attributes.NAME === 'string' && info.attributes.NAME.startsWith('This is a netCDF dimension') ? 'a dimension of netCDF without values' : null;
    if (reason ?? text) roles.give(info.path, 'ignored', reason ?? text!);
    return !reason && !text;
  });

  const coordinates = coordinatesOf(steps ? [...readable, ...steps.arrays.map(({ info }) => info).filter((info) => !unreadable(contents, info))] : readable, evidence);
  const time = steps ? null : chooseTime(readable, coordinates, evidence);
  const candidates = steps ? stepCandidates(contents, steps, coordinates) : recordCandidates(readable, time, coordinates, evidence);
  const { chosen, left } = onOneGrid(candidates);
  const names = fieldNames(chosen.map(({ path }) => path));
  const fields = chosen.map(({ path, info, axes, why }, i) => ({ path, name: names[i], unit: unitOf(info), axes, why }));

  if (steps) roles.give(steps.time.path, 'time', steps.time.why);
  const used = time && (chosen.length === 0 || chosen.some(({ snapshots }) => snapshots === time.length) || time.score >= 5) ? time : null;
  if (used) roles.give(used.info.path, 'time', used.why);
  for (const { path, why } of fields) roles.give(path, 'field', why);
  const axes = readingAxes(chosen, coordinates, roles, steps);
  const weights = weightsOf(readable, chosen, roles);
  const parameters = [...attributeParameters(contents)];
  for (const info of readable) {
    const parameter = roles.has(info.path) ? null : datasetParameter(info, evidence);
    if (!parameter) continue;
    parameters.push(parameter);
    roles.give(info.path, 'parameter', 'a single number');
  }
  for (const { candidate, why } of left) roles.give(candidate.path, 'ignored', why);
  giveRest(readable, coordinates, roles);
  for (const { template, info } of steps?.arrays ?? []) {
    roles.give(template, 'ignored', unreadable(contents, info) ?? (isSingle(info) ? 'one number a step' : 'its shape or number of steps differs from that of the fields'));
  }
  return {
    layout: layoutOf(chosen),
    time: steps && chosen.length > 0 ? steps.time.source : used ? { kind: 'array', path: used.info.path, unit: unitOf(used.info) } : null,
    fields,
    axes,
    ...weights,
    parameters,
    roles: roles.list(),
  };
}

/** One coordinate an axis and length: the one nearest to the root. */
function coordinatesOf(arrays: ArrayInfo[], evidence: Evidence): Coordinate[] {
  const found = arrays.map((info) => coordinateOf(info, evidence)).filter((one) => one !== null);
  found.sort((a, b) => a.info.path.split('/').length - b.info.path.split('/').length);
  return found.filter((one, i) => found.findIndex((other) => other.axis === one.axis && other.edges === one.edges && other.length === one.length) === i);
}

function chooseTime(arrays: ArrayInfo[], coordinates: Coordinate[], evidence: Evidence): TimeVector | null {
  const lengths = new Set(arrays.filter(({ shape }) => shape.length >= 2).flatMap(({ shape }) => shape));
  const fits = ({ length }: TimeVector) => (lengths.has(length) ? 3 : 0);
  const named = arrays.map((info) => timeVectorOf(info, evidence)).filter((one) => one !== null && one.score + fits(one) >= 5) as TimeVector[];
  const [best] = named.sort((a, b) => b.score + fits(b) - a.score - fits(a) || a.info.path.length - b.info.path.length);
  if (best) return best;
  const taken = new Set(coordinates.map(({ length }) => length));
  const unnamed = arrays
    .map((info) => unnamedTimeVector(info, evidence))
    .filter((one): one is TimeVector => one !== null && one.length > 1 && lengths.has(one.length) && !taken.has(one.length));
  return unnamed.length === 1 ? unnamed[0] : null;
}

function recordCandidates(arrays: ArrayInfo[], time: TimeVector | null, coordinates: Coordinate[], evidence: Evidence): FieldCandidate[] {
  const known = new Map<string, AxisName>(coordinates.map(({ info, axis }) => [info.path, axis]));
  if (time) known.set(time.info.path, 'time');
  const candidates: FieldCandidate[] = [];
  for (const info of arrays) {
    if (info === time?.info || info.dtype === 'bool' || !mayBeField(info, coordinates)) continue;
    const labels = labelsOf(info, known);
    const timeAxis = timeAxisOf(info, labels, time, coordinates, evidence);
    if (!timeAxis && time && time.length > 1) continue;
    const space = spaceAxesOf(info, labels, timeAxis?.axis ?? -1, coordinates);
    if (!space) continue;
    const why = [timeAxis?.why ?? 'one snapshot: no axis is time', space.why].filter(Boolean).join('; ');
    candidates.push({ path: info.path, info, axes: space.names, snapshots: timeAxis ? info.shape[timeAxis.axis] : 1, why });
  }
  return candidates;
}

/** More than one axis of more than one value, and no other role by its name. */
function mayBeField(info: ArrayInfo, coordinates: Coordinate[]): boolean {
  if (coordinates.some((one) => one.info === info) || isSingle(info)) return false;
  if (namesWeights(info.path) && isVector(info)) return false;
  const whole = !info.dtype.startsWith('float');
  if (whole && (namesConnectivity(info.path) || namesMask(info.path))) return false;
  if (namesPoints(info.path) && info.shape.length === 2 && (info.shape[1] === 2 || info.shape[1] === 3)) return false;
  return info.shape.length >= 2;
}

function stepCandidates(contents: ArchiveContents, steps: StepLayout, coordinates: Coordinate[]): FieldCandidate[] {
  const known = new Map<string, AxisName>(coordinates.map(({ info, axis }) => [info.path, axis]));
  return steps.arrays.flatMap(({ template, info, steps: count }): FieldCandidate[] => {
    const other = isSingle(info) || info.dtype === 'bool' || unreadable(contents, info) !== null || count < steps.steps.length;
    if (other || coordinates.some((one) => one.info.path === info.path) || (namesWeights(info.path) && isVector(info))) return [];
    const space = spaceAxesOf(info, labelsOf(info, known), -1, coordinates);
    return space ? [{ path: template, info, axes: space.names, snapshots: count, why: [`the same array in ${count} numbered groups`, space.why].filter(Boolean).join('; ') }] : [];
  });
}

function readingAxes(chosen: FieldCandidate[], coordinates: Coordinate[], roles: RoleBook, steps: StepLayout | null): Reading['axes'] {
  const [field] = chosen;
  if (!field) return [];
  return field.axes.flatMap((name, i): Reading['axes'] => {
    if (name === 'time' || name === 'component') return [];
    const count = field.info.shape[i];
    const nodes = coordinates.find((one) => one.axis === name && !one.edges && one.length === count);
    const edges = coordinates.find((one) => one.axis === name && one.edges && one.length === count + 1);
    if (nodes) roles.give(pathOf(nodes, steps), 'coordinate', `${nodes.why}, and its length ${count} is that of axis ${name}`);
    if (edges) roles.give(pathOf(edges, steps), 'cell-edges', `${edges.why}, and its length is one more than that of axis ${name}`);
    const why = nodes ? `coordinates from ${nodes.info.path}` : edges ? `cell edges from ${edges.info.path}` : 'no coordinates were found';
    return [{ name, path: nodes?.info.path ?? null, edges: edges?.info.path ?? null, unit: nodes ? unitOf(nodes.info) : edges ? unitOf(edges.info) : null, count, periodic: null, why }];
  });
}

/** In the roles an array of the step groups stands once, by its template. */
function pathOf({ info }: Coordinate, steps: StepLayout | null): string {
  return steps?.arrays.find((one) => one.info.path === info.path)?.template ?? info.path;
}

function weightsOf(arrays: ArrayInfo[], chosen: FieldCandidate[], roles: RoleBook): Pick<Reading, 'spaceWeights' | 'timeWeights'> {
  const [field] = chosen;
  const found: Pick<Reading, 'spaceWeights' | 'timeWeights'> = { spaceWeights: null, timeWeights: null };
  if (!field) return found;
  const space = field.info.shape.filter((_, i) => field.axes[i] !== 'time' && field.axes[i] !== 'component');
  const nodes = sizeOf(space);
  for (const info of arrays) {
    if (roles.has(info.path) || !namesWeights(info.path)) continue;
    const count = sizeOf(info.shape);
    if (namesTimeWeights(info.path) && count === field.snapshots) {
      found.timeWeights ??= { path: info.path };
      roles.give(info.path, 'weight', 'its name is that of time weights, one a snapshot');
    } else if (count === nodes && (isVector(info) || info.shape.join() === space.join())) {
      found.spaceWeights ??= { path: info.path };
      roles.give(info.path, 'weight', `its name is that of weights, and it has one value a node (${nodes})`);
    }
  }
  return found;
}

function giveRest(arrays: ArrayInfo[], coordinates: Coordinate[], roles: RoleBook): void {
  for (const info of arrays) {
    const coordinate = coordinates.find((one) => one.info === info);
    const shape = `(${info.shape.join(', ')})`;
    if (namesMask(info.path) && (info.dtype === 'bool' || !info.dtype.startsWith('float'))) roles.give(info.path, 'mask', 'its name and its whole numbers are those of a mask');
    else if (namesConnectivity(info.path) && !info.dtype.startsWith('float')) roles.give(info.path, 'connectivity', 'its name and its whole numbers are those of connectivity');
    else if (namesPoints(info.path) && info.shape.length === 2) roles.give(info.path, 'coordinate', `points of a mesh, ${shape}`);
    else if (coordinate) roles.give(info.path, 'coordinate', `${coordinate.why}, but no field has an axis of its own of length ${coordinate.length}`);
    else if (info.dtype === 'bool') roles.give(info.path, 'mask', 'true or false at each place');
    else if (isVector(info)) roles.give(info.path, 'ignored', `one axis of length ${sizeOf(info.shape)} that fits neither time nor a coordinate`);
    else roles.give(info.path, 'ignored', `no axis of its shape ${shape} is the record's time`);
  }
}

function layoutOf(chosen: FieldCandidate[]): Reading['layout'] {
  const [field] = chosen;
  if (!field) return 'unknown';
  if (isTemplate(field.path)) return 'group-per-step';
  const axes = field.axes.filter((name) => name !== 'component');
  const at = axes.indexOf('time');
  if (at < 0) return 'single-snapshot';
  if (axes.length === 2 && axes.includes('node')) return 'snapshot-matrix';
  if (at === 0) return 'time-first';
  return at === axes.length - 1 ? 'time-last' : 'unknown';
}
