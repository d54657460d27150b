/** What `pennyweight check --json` prints: archives, their reading in brief, findings and statistics. */
import { z } from 'zod';
import { finding } from './finding.ts';
import { archiveFormat, axisName, elementType } from './reading.ts';
import { numbers, sha256 } from './shape.ts';

const number = z.number().nullable();

/** Time as read: `path` null when the stamps come from names or attributes of steps, or from a given start and step. */
export const reportTime = z.object({
  path: z.string().nullable(),
  count: z.number().int(),
  unit: z.string().nullable(),
});

export const reportField = z.object({
  path: z.string(),
  name: z.string(),
  shape: z.array(z.number().int()),
  dtype: elementType,
  unit: z.string().nullable(),
  axes: z.array(axisName),
});

/** `uniform` and `periodic` null: not known. */
export const reportAxis = z.object({
  name: axisName,
  path: z.string().nullable(),
  count: z.number().int(),
  uniform: z.boolean().nullable(),
  periodic: z.boolean().nullable(),
});

/** Over all finite values of a field; null where there is none. `norm`: Euclidean, one a snapshot. */
export const reportStatistics = z.object({ min: number, max: number, mean: number, norm: numbers });

export const archiveReport = z.object({
  /** name of the file; of a series, of its first file */
  file: z.string(),
  bytes: z.number(),
  /** of a series: of the lines that sha256sum prints for its files */
  sha256,
  /** every file of the archive */
  files: z.array(z.object({ name: z.string(), bytes: z.number(), sha256 })),
  /** null when the container could not be read; then `reading` is null as well */
  format: archiveFormat.nullable(),
  reading: z
    .object({ time: reportTime.nullable(), fields: z.array(reportField), axes: z.array(reportAxis) })
    .nullable(),
  findings: z.array(finding),
  /** by the field's path */
  statistics: z.record(z.string(), reportStatistics),
});
export type ArchiveReport = z.infer<typeof archiveReport>;

export const checkReport = z.object({ pennyweight: z.string(), archives: z.array(archiveReport) });
export type CheckReport = z.infer<typeof checkReport>;
