/**
 * reading/shape-mismatch: the axes of a field do not fit the grid or the time vector, or fields differ in their snapshots.
 * An array that does not fit because it is damaged or lies outside of the archive, and a reading without any field, are
 * told by file/unreadable, file/outside-link and reading/incomplete alone.
 */
import type { Survey } from '../survey.ts';
import type { Check, Judgement } from './check.ts';
import { snapshotCount } from './written-part.ts';

function toldElsewhere({ contents, reading }: Survey, path: string): boolean {
  if (path === '/') return reading.fields.length === 0;
  return (
    contents.damaged.some((damage) => damage.path === path) || contents.outsideLinks.some((link) => link.path === path)
  );
}

function withAdvice(message: string): string {
  return /correct|choose|upload|store /.test(message) ? message : message.replace(/\.?$/, '; correct the reading.');
}

export const readingShapeMismatch: Check = {
  id: 'reading/shape-mismatch',
  severity: 'blocker',
  title: 'Shapes of fields, grid and time vector fit together',
  source: 'common practice, no source',
  thresholds: {},
  judge({ survey }) {
    if (!survey) return [];
    const judgements = survey.mismatches
      .filter(({ path }) => !toldElsewhere(survey, path))
      .map(({ path, expected, actual, message }): Judgement => ({
        path,
        message: withAdvice(message),
        evidence: { expected, actual },
        remedy: null,
      }));
    const told = new Set(survey.mismatches.map((mismatch) => mismatch.path));
    const m = snapshotCount(survey);
    if (survey.stamps && survey.stamps.length !== m && survey.fields.length > 0 && !survey.mismatches.length) {
      judgements.push({
        path: survey.stampPath,
        message: `There are ${survey.stamps.length} time stamps${survey.stampPath ? ` in ${survey.stampPath}` : ''} but ${m} snapshots in ${survey.fields[0].path}; correct the reading.`,
        evidence: { expected: String(m), actual: String(survey.stamps.length) },
        remedy: null,
      });
    }
    for (const field of survey.fields) {
      if (field.snapshots === m || told.has(field.path) || field.snapshots === 0) continue;
      judgements.push({
        path: field.path,
        message: `${field.path} has ${field.snapshots} snapshots where the record has ${m}; correct the reading or leave the field out.`,
        evidence: { expected: String(m), actual: String(field.snapshots) },
        remedy: null,
      });
    }
    for (const axis of survey.axes) {
      const path = axis.path;
      if (path === null || told.has(path)) continue;
      const length = axis.nodes?.length ?? axis.count;
      if (length === axis.count) continue;
      judgements.push({
        path,
        message: `${path} holds ${length} coordinates for the axis ${axis.name} of length ${axis.count}; correct the reading.`,
        evidence: { expected: String(axis.count), actual: String(length) },
        remedy: null,
      });
    }
    return judgements;
  },
};
