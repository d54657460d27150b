/** Contents of an archive as its container states them, and the reading: what each array means. */
import { z } from 'zod';

export const archiveFormats = ['hdf5', 'netcdf4', 'npy', 'npz', 'zip'] as const;
export const archiveFormat = z.enum(archiveFormats);
export type ArchiveFormat = z.infer<typeof archiveFormat>;

/** Element types by NumPy's names; 'complex64'/'complex128' also for HDF5 compounds {r,i}. 'other' is never read as a field. */
export const elementTypes = [
  'float16', 'float32', 'float64', 'int8', 'int16', 'int32', 'int64', 'uint8', 'uint16', 'uint32', 'uint64',
  'bool', 'complex64', 'complex128', 'string', 'other',
] as const;
export const elementType = z.enum(elementTypes);
export type ElementType = z.infer<typeof elementType>;

export const attributeValue = z.union([z.string(), z.number(), z.array(z.number()), z.array(z.string())]);
export type AttributeValue = z.infer<typeof attributeValue>;

/**
 * One array of an archive. `path` is the HDF5 path, or '/' + the file's stem for NPY ('/u' for u.npy).
 * `order` 'F' only for Fortran-ordered NPY: the shape stays logical, the storage is reversed.
 */
export const arrayInfo = z.object({
  path: z.string(),
  shape: z.array(z.number().int().nonnegative()),
  dtype: elementType,
  byteOrder: z.enum(['little', 'big', 'none']),
  order: z.enum(['C', 'F']),
  /** position of its file in the archive's list of files */
  file: z.number().int().nonnegative(),
  chunks: z.array(z.number().int().positive()).nullable(),
  filters: z.array(z.object({ id: z.number().int(), name: z.string(), available: z.boolean() })),
  attributes: z.record(z.string(), attributeValue),
  /** names of the dimension scales attached to each axis, '' where none */
  dimensionScales: z.array(z.string()).nullable(),
  /** declared fill value when it is known */
  fillValue: z.number().nullable(),
  /** elements that the file really holds, when they can be counted; null when unknown */
  allocated: z.number().nullable(),
});
export type ArrayInfo = z.infer<typeof arrayInfo>;

export const archiveContents = z.object({
  format: archiveFormat,
  files: z.array(z.object({ name: z.string(), bytes: z.number() })),
  arrays: z.array(arrayInfo),
  groups: z.array(z.object({ path: z.string(), attributes: z.record(z.string(), attributeValue) })),
  /** links and storage that point out of the archive; never followed */
  outsideLinks: z.array(z.object({ path: z.string(), kind: z.enum(['external-link', 'virtual-source', 'external-storage']), target: z.string() })),
  /** the container's own consistency flag says a writer had the file open */
  writerOpen: z.boolean(),
  /** arrays or groups that could not be described, with the reason */
  damaged: z.array(z.object({ path: z.string(), reason: z.string() })),
});
export type ArchiveContents = z.infer<typeof archiveContents>;

export const axisNames = ['time', 'x', 'y', 'z', 'r', 'theta', 'phi', 'lat', 'lon', 'node', 'component'] as const;
export const axisName = z.enum(axisNames);
export type AxisName = z.infer<typeof axisName>;

export const roles = ['time', 'coordinate', 'cell-edges', 'field', 'component', 'weight', 'mask', 'connectivity', 'parameter', 'ignored'] as const;
export const role = z.enum(roles);
export type Role = z.infer<typeof role>;

/**
 * Where the time stamps come from.
 *  array            one 1-D dataset, a stamp a snapshot
 *  step-attribute   attribute `name` of each step's group (one group per step)
 *  step-dataset     scalar dataset `name` in each step's group
 *  step-name        the number in the step group's name
 *  generated        start + j * step, given by a person
 *  ensemble         declared a set of samples without time
 */
export const timeSource = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('array'), path: z.string(), unit: z.string().nullable() }),
  z.object({ kind: z.literal('step-attribute'), name: z.string(), unit: z.string().nullable() }),
  z.object({ kind: z.literal('step-dataset'), name: z.string(), unit: z.string().nullable() }),
  z.object({ kind: z.literal('step-name'), unit: z.string().nullable() }),
  z.object({ kind: z.literal('generated'), start: z.number(), step: z.number(), unit: z.string().nullable() }),
  z.object({ kind: z.literal('ensemble') }),
]);
export type TimeSource = z.infer<typeof timeSource>;

/**
 * A field. `path` names one dataset, or, for one group per step, a template with '{step}' where the step's group name
 * stands ('/{step}/u', '/steps/{step}/u'); the steps are then ordered by their number. `axes` names each axis of the
 * dataset in storage order; exactly one is 'time' unless the path is a template or the record holds one snapshot.
 */
export const fieldReading = z.object({
  path: z.string(),
  name: z.string(),
  unit: z.string().nullable(),
  axes: z.array(axisName),
  why: z.string(),
});
export type FieldReading = z.infer<typeof fieldReading>;

/** A space axis: `path` its coordinate array (null when unknown), `edges` its cell edges. */
export const axisReading = z.object({
  name: axisName,
  path: z.string().nullable(),
  edges: z.string().nullable(),
  unit: z.string().nullable(),
  count: z.number().int().nonnegative(),
  periodic: z.boolean().nullable(),
  why: z.string(),
});
export type AxisReading = z.infer<typeof axisReading>;

export const reading = z.object({
  layout: z.enum(['time-first', 'time-last', 'snapshot-matrix', 'group-per-step', 'single-snapshot', 'unknown']),
  time: timeSource.nullable(),
  fields: z.array(fieldReading),
  axes: z.array(axisReading),
  /** provided spatial weights, one a node, in the fields' node order */
  spaceWeights: z.object({ path: z.string() }).nullable(),
  /** provided time weights, one a snapshot */
  timeWeights: z.object({ path: z.string() }).nullable(),
  parameters: z.array(z.object({ name: z.string(), value: z.number(), unit: z.string().nullable(), from: z.string() })),
  /** the role given to every array, with the reason, also for those ignored */
  roles: z.array(z.object({ path: z.string(), role, why: z.string() })),
});
export type Reading = z.infer<typeof reading>;
