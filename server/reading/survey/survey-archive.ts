/** The survey of an archive under a reading: its small arrays, then one pass over each field that fits. */
import type { ArchiveContents, Reading } from '#contract/reading.ts';
import type { FieldSurvey, Survey } from '../../engine/survey.ts';
import { unreadable, type Archive } from '../archive.ts';
import { findArray } from '../contents-index.ts';
import { fieldSource, type FieldSource } from '../field-source.ts';
import { mismatchesOf } from '../fit.ts';
import type { Limits } from '../limits.ts';
import { readVectors } from '../reading-vectors.ts';
import { stepsOf, isTemplate } from '../step-groups.ts';
import { surveyField } from './survey-field.ts';

/** `report` gets the bytes gone through, those to go through, and the field at hand. */
export async function surveyArchive(
  archive: Archive,
  reading: Reading,
  limits: Limits,
  report: (done: number, total: number, path: string) => Promise<void>,
): Promise<Survey> {
  const { contents } = archive;
  const mismatches = mismatchesOf(contents, reading);
  const readable = fittingPart(contents, reading, new Set(mismatches.map(({ path }) => path)));
  const vectors = readVectors(archive, readable);
  const sources = readable.fields.map((field): FieldSource => fieldSource(archive, field, limits));
  const total = sources.reduce((sum, source) => sum + source.bytes, 0);
  let done = 0;
  const fields: FieldSurvey[] = [];
  for (const source of sources) {
    fields.push(
      await surveyField(source, source.field.unit, async (bytes) => {
        done += bytes;
        await report(done, total, source.field.path);
      }),
    );
  }
  return { contents, reading, ...vectors, fields, mismatches };
}

/** What does not fit is named in the mismatches and left out of the pass; the rest is still judged. */
function fittingPart(contents: ArchiveContents, reading: Reading, broken: Set<string>): Reading {
  const fits = (path: string | null) => path !== null && !broken.has(path);
  const { time } = reading;
  const info = time?.kind === 'array' ? findArray(contents, time.path) : undefined;
  // Stamps of the wrong number are still stamps, and their checks say more than "does not fit".
  const timeless = time?.kind === 'array' && (!info || unreadable(contents, info) !== null);
  const wholeSteps = (path: string) => !isTemplate(path) || stepsOf(contents, path).every((step) => fits(step.info.path));
  return {
    ...reading,
    fields: reading.fields.filter(({ path }) => fits(path) && wholeSteps(path)),
    time: timeless ? null : time,
    axes: reading.axes.map((axis) => ({ ...axis, path: fits(axis.path) ? axis.path : null, edges: fits(axis.edges) ? axis.edges : null })),
    spaceWeights: fits(reading.spaceWeights?.path ?? null) ? reading.spaceWeights : null,
    timeWeights: fits(reading.timeWeights?.path ?? null) ? reading.timeWeights : null,
  };
}
