/**
 * reading/incomplete: a role that is needed is not assigned, or what is assigned holds nothing: no field at all, a field
 * that the campaign requires, a field without (or with two) time axes in a record of several snapshots, an axis of a field
 * that the reading does not describe, a field of length 0. A field that does not fit at all is reading/shape-mismatch's.
 */
import type { FieldReading } from '#contract/reading.ts';
import type { Survey } from '../survey.ts';
import type { Check, Judgement } from './check.ts';
import { snapshotCount } from './written-part.ts';

function judgement(path: string | null, message: string, evidence: Record<string, unknown> = {}): Judgement {
  return { path, message, evidence, remedy: null };
}

function judgeField(survey: Survey, field: FieldReading): Judgement[] {
  const surveyed = survey.fields.find((candidate) => candidate.path === field.path);
  const faults: Judgement[] = [];
  const times = field.axes.filter((axis) => axis === 'time').length;
  const perStep = field.path.includes('{step}');
  if (times > 1)
    faults.push(
      judgement(field.path, `The reading names ${times} axes of ${field.path} as time; name exactly one.`, {
        count: times,
      }),
    );
  if (times === 0 && !perStep && survey.reading.layout !== 'single-snapshot' && snapshotCount(survey) > 1) {
    faults.push(
      judgement(
        field.path,
        `No axis of ${field.path} is assigned to time although the record has ${snapshotCount(survey)} snapshots; say which axis it is, or leave the array out of the fields.`,
      ),
    );
  }
  const described = new Set(survey.reading.axes.map((axis) => axis.name));
  const missing = field.axes.filter((axis) => axis !== 'time' && axis !== 'component' && !described.has(axis));
  if (missing.length > 0) {
    faults.push(
      judgement(
        field.path,
        `The reading does not describe the axis ${missing.join(', ')} of ${field.path}; complete it.`,
        { axes: missing },
      ),
    );
  }
  if (surveyed && (surveyed.snapshots === 0 || surveyed.nodes === 0)) {
    const what = surveyed.snapshots === 0 ? 'no snapshot' : 'no value in a snapshot';
    faults.push(
      judgement(
        field.path,
        `${field.path} holds ${what}: an axis has length 0; choose another array or upload the complete file.`,
        { snapshots: surveyed.snapshots, nodes: surveyed.nodes },
      ),
    );
  }
  return faults;
}

export const readingIncomplete: Check = {
  id: 'reading/incomplete',
  severity: 'blocker',
  title: 'The reading assigns all that is needed',
  source: 'common practice, no source',
  thresholds: {},
  judge({ survey, demands }) {
    if (!survey) return [];
    const { fields } = survey.reading;
    const told = new Set(survey.mismatches.map((mismatch) => mismatch.path));
    const faults = fields.filter((field) => !told.has(field.path)).flatMap((field) => judgeField(survey, field));
    // A link out of the archive or damage is the cause then, and is told by its own check.
    const causeTold = survey.contents.outsideLinks.length > 0 || survey.contents.damaged.length > 0;
    if (fields.length === 0 && !causeTold) {
      faults.unshift(
        judgement(
          null,
          `No array of the archive is assigned as a field (${survey.contents.arrays.length} found); say in the reading which arrays are fields.`,
          { count: survey.contents.arrays.length },
        ),
      );
    }
    const names = new Set(fields.map((field) => field.name));
    const wanting = demands.fields
      .filter((demand) => demand.required && !names.has(demand.name))
      .map((demand) => demand.name);
    if (wanting.length > 0) {
      faults.push(
        judgement(
          null,
          `The campaign needs the field${wanting.length > 1 ? 's' : ''} ${wanting.join(', ')}, which the reading does not assign (it has ${[...names].join(', ') || 'none'}); name the array that holds ${wanting.length > 1 ? 'each' : 'it'}.`,
          {
            count: wanting.length,
            fields: wanting.slice(0, 20),
          },
        ),
      );
    }
    return faults;
  },
};
