/**
 * What the command line and the API say of one checked archive: survey and findings in the shape of contract/check-report.ts.
 * Statistics of the whole record are put together from those of the snapshots: min and max are extremes, the mean is
 * weighted by each snapshot's number of finite values. All over finite values; null where there is none.
 */
import type { ArchiveReport } from '#contract/check-report.ts';
import type { Finding } from '#contract/finding.ts';
import type { FieldReading } from '#contract/reading.ts';
import { axisEvenness } from '../checks/evenness.ts';
import type { FieldSurvey, Survey, SurveyAxis } from '../survey.ts';

export interface ReportedFile {
  name: string;
  bytes: number;
  sha256: string;
}

type Statistics = ArchiveReport['statistics'][string];
type ReportedReading = NonNullable<ArchiveReport['reading']>;

/** NaN and infinities have no place in JSON. */
function jsonNumber(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}

export function recordStatistics(field: FieldSurvey): Statistics {
  let min = Infinity;
  let max = -Infinity;
  let sum = 0;
  let count = 0;
  for (let j = 0; j < field.snapshots; j++) {
    const finite = field.nodes - field.nonFinite[j];
    if (finite === 0) continue;
    min = Math.min(min, field.min[j]);
    max = Math.max(max, field.max[j]);
    sum += field.mean[j] * finite;
    count += finite;
  }
  return {
    min: jsonNumber(min),
    max: jsonNumber(max),
    mean: count > 0 ? jsonNumber(sum / count) : null,
    norm: Array.from(field.norm, jsonNumber),
  };
}

/** Null when the coordinates are not known or not monotone; true also where only rounding makes them uneven. */
export function isUniform(axis: SurveyAxis): boolean | null {
  const evenness = axisEvenness(axis);
  return evenness && evenness.verdict !== 'uneven';
}

function reportField(survey: Survey, field: FieldReading): ReportedReading['fields'][number] {
  const surveyed = survey.fields.find((candidate) => candidate.path === field.path);
  const stored = survey.contents.arrays.find((array) => array.path === field.path);
  const perStep = field.path.includes('{step}');
  const counts = field.axes.map(
    (name) =>
      survey.axes.find((axis) => axis.name === name)?.count ??
      survey.reading.axes.find((axis) => axis.name === name)?.count ??
      0,
  );
  return {
    path: field.path,
    name: field.name,
    shape: perStep ? [surveyed?.snapshots ?? 0, ...counts] : (stored?.shape ?? counts),
    dtype: surveyed?.dtype ?? stored?.dtype ?? 'other',
    unit: field.unit,
    axes: perStep ? ['time', ...field.axes] : field.axes,
  };
}

function reportReading(survey: Survey): ReportedReading {
  const { time } = survey.reading;
  return {
    time: survey.stamps
      ? {
          path: survey.stampPath,
          count: survey.stamps.length,
          unit: time && time.kind !== 'ensemble' ? time.unit : null,
        }
      : null,
    fields: survey.reading.fields.map((field) => reportField(survey, field)),
    axes: survey.axes.map((axis) => ({
      name: axis.name,
      path: axis.path,
      count: axis.count,
      uniform: isUniform(axis),
      periodic: axis.periodic,
    })),
  };
}

/**
 * @param digest SHA-256 of the archive: of its one file, or of a series' lines of digests
 * @param survey null when the archive could not be read
 */
export function describeArchive(
  files: ReportedFile[],
  digest: string,
  survey: Survey | null,
  findings: Finding[],
): ArchiveReport {
  return {
    file: files[0].name,
    bytes: files.reduce((sum, file) => sum + file.bytes, 0),
    sha256: digest,
    files,
    format: survey?.contents.format ?? null,
    reading: survey ? reportReading(survey) : null,
    findings,
    statistics: Object.fromEntries((survey?.fields ?? []).map((field) => [field.path, recordStatistics(field)])),
  };
}
