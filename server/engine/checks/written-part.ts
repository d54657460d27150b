/**
 * The part of a record that was really written. A writer that reserves the whole array and is killed half way leaves
 * snapshots at the end that hold the fill value only; what they do to stamps, norms and hashes has one cause, which
 * file/unwritten-data reports, so all other checks look at the written part.
 *
 * The tail counts as unwritten when in every field that varies at all
 *  - its last snapshots hold one constant, which is the declared fill value, HDF5's and NPY's default 0 where none is
 *    declared, or a default fill value of the netCDF library,
 *  - and the field had not faded before: the norm of the last written snapshot is above 1e-3 of the largest one.
 * So none of these fire: a first snapshot that is zero, a field that is zero throughout, a field that decays to zero, one
 * field that is switched off while others go on, a uniform end state of any other value, a run that diverged to NaN.
 * Source of the defaults: HDF5 reference manual, H5Pset_fill_value; netcdf.h (NC_FILL_*). Method: common practice, no source.
 */
import type { ArrayInfo, Role } from '#contract/reading.ts';
import type { FieldSurvey, Survey } from '../survey.ts';
import type { CheckSubject } from './check.ts';
import { roundOff } from './space-axes.ts';

/** NC_FILL_FLOAT and NC_FILL_DOUBLE (as float32 and as float64), NC_FILL_SHORT, NC_FILL_INT of netcdf.h. */
const netcdfFills = [9.969209968386869e36, -32767, -2147483647];
const fadedNorm = 1e-3;

/** Number of snapshots that the record should have: the most that any field has, or the number of stamps. */
export function snapshotCount(survey: Survey): number {
  return survey.fields.reduce(
    (most, field) => Math.max(most, field.snapshots),
    survey.fields.length === 0 ? (survey.stamps?.length ?? 0) : 0,
  );
}

function holdsFill(survey: Survey, field: FieldSurvey): boolean {
  const last = field.snapshots - 1;
  const value = field.nonFinite[last] === field.nodes ? NaN : field.min[last];
  const declared =
    survey.contents.arrays.find((array) => array.path === field.path)?.fillValue ??
    field.fill.find((fill) => fill.declared)?.value ??
    null;
  if (declared !== null && (declared === value || (Number.isNaN(declared) && Number.isNaN(value)))) return true;
  return (declared === null && value === 0) || netcdfFills.includes(value);
}

function faded(field: FieldSurvey): boolean {
  const lastWritten = field.snapshots - field.trailingFill - 1;
  const largest = field.norm.reduce((most, norm, j) => (j <= lastWritten && norm > most ? norm : most), 0);
  return field.norm[lastWritten] <= fadedNorm * largest;
}

/** Snapshots at the end that were never written, as far as the data tell; 0 when fewer than `atLeast`. */
export function unwrittenTail(survey: Survey, atLeast: number): number {
  const m = snapshotCount(survey);
  const varying = survey.fields.filter((field) => field.snapshots === m && field.trailingFill < m);
  if (varying.length === 0) return 0;
  const tail = Math.min(...varying.map((field) => field.trailingFill));
  if (tail < Math.max(1, atLeast) || !varying.every((field) => holdsFill(survey, field) && !faded(field))) return 0;
  return tail;
}

/** Snapshots of the record that the other checks judge: all but the unwritten end. */
export function writtenCount(subject: CheckSubject): number {
  return subject.survey ? Math.max(0, snapshotCount(subject.survey) - (subject.unwritten ?? 0)) : 0;
}

/** Units of round-off within which two stamps say the same time: the sum of a few roundings. */
const sameTimeUnits = 8;

export function sameTime(survey: Survey, j: number, k: number): boolean {
  const { stamps, stampType } = survey;
  return (
    stamps !== null &&
    Math.abs(stamps[j] - stamps[k]) <=
      sameTimeUnits * roundOff(stampType) * Math.max(Math.abs(stamps[j]), Math.abs(stamps[k]))
  );
}

/** Stamps of the written part, null for an ensemble or without time. */
export function writtenStamps(subject: CheckSubject): Float64Array | null {
  const stamps = subject.survey?.stamps ?? null;
  if (!stamps || !subject.unwritten) return stamps;
  return stamps.subarray(0, Math.max(0, stamps.length - subject.unwritten));
}

const usedRoles: Role[] = ['time', 'coordinate', 'cell-edges', 'weight', 'field', 'component'];

export interface ShortArray {
  path: string;
  held: number;
  needed: number;
}

/** Arrays that the reading uses and that hold fewer elements than their shape. */
export function shortArrays(survey: Survey): ShortArray[] {
  const short = new Map<string, ShortArray>();
  const note = (path: string, held: number | null, needed: number) => {
    if (held !== null && held < needed && !short.has(path)) short.set(path, { path, held, needed });
  };
  for (const field of survey.fields) note(field.path, field.allocated, field.snapshots * field.nodes);
  const roles = new Map(survey.reading.roles.map(({ path, role }) => [path, role]));
  const elements = (array: ArrayInfo) => array.shape.reduce((product, length) => product * length, 1);
  for (const array of survey.contents.arrays) {
    const role = roles.get(array.path);
    if (role && usedRoles.includes(role)) note(array.path, array.allocated, elements(array));
  }
  return [...short.values()];
}
