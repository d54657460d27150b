/**
 * The check of an archive: its contents, what its arrays mean, one streaming pass over the data, and the judgement of all checks.
 * An archive that cannot be read is a result, not a failure of the job. What an earlier pass collected is used again when the
 * fields are read as before.
 */
import { PennyweightError, type ErrorCode } from '#contract/error.ts';
import type { ArchiveContents, Reading } from '#contract/reading.ts';
import { judgeAll } from '../engine/checks/index.ts';
import type { Survey } from '../engine/survey.ts';
import { archiveToCheck, keepCheck, type CheckedArchive, type CheckResult, type ChosenReading } from '../services/archive-check.ts';
import type { OpenArchive } from '../services/archive-reader.ts';
import type { App } from '../services/context.ts';
import { earlierOnOtherGrids, otherGrids } from '../services/grids.ts';
import { openArchiveFiles } from '../services/reading-pool.ts';
import { parametersOf } from '../services/run-parameters.ts';
import { gridHash, sameReading } from '../services/survey-store.ts';
import type { JobHandle, JobHandler } from './handle.ts';

/** Refusals that say something of the archive; any other is a failure of ours. */
const ofTheArchive = new Set<ErrorCode>(['file-unreadable', 'unsupported-format', 'file-too-large', 'limit-exceeded', 'invalid-input', 'stamps-invalid', 'matrix-invalid']);

type Known = Omit<CheckResult, 'state' | 'findings' | 'comparedWith'>;

export const check: JobHandler = async (app, job) => {
  const checked = await archiveToCheck(app, job.subjectId);
  if (checked.row.state === 'withdrawn') return;
  const known: Known = { contents: null, chosen: null, survey: null };
  let failure: { message: string; path: string | null } | null = null;
  try {
    const unchanged = surveyAsBefore(checked);
    if (unchanged) known.survey = unchanged;
    else await readArchive(app, job, checked, known);
  } catch (cause) {
    job.signal.throwIfAborted();
    if (!(cause instanceof PennyweightError) || !ofTheArchive.has(cause.code)) throw cause;
    const { path } = cause.details;
    failure = { message: sentence(cause.message), path: typeof path === 'string' ? path : null };
  }
  job.signal.throwIfAborted();
  const { survey } = known;
  const reading = known.chosen?.reading ?? checked.row.reading;
  const grid = survey ? gridHash(survey) : null;
  const comparedWith = grid === null ? [] : await earlierOnOtherGrids(app.db, checked.row, grid);
  const findings = judgeAll({
    survey, failure, checksum: checked.checksum, demands: checked.demands, parameters: parametersOf(checked.run.parameters, reading),
    otherGrids: survey ? await otherGrids(app, checked.row, survey) : [], timeRule: null, archive: checked.row.id,
  }, checked.policy);
  await keepCheck(app, job.caller, job.id, checked, { ...known, state: failure ? 'unreadable' : 'checked', findings, comparedWith });
};

/** The reader's clauses begin in lower case; those that begin with the name of a file stay as they are. */
function sentence(clause: string): string {
  return /^(the|no|an?|it|attribute|dataset) /.test(clause) ? clause.charAt(0).toUpperCase() + clause.slice(1) : clause;
}

/** The last survey, when the archive would be read in the same way again: then nothing of it is opened. */
function surveyAsBefore({ row, saved, survey }: CheckedArchive): Survey | null {
  const decided = row.readingSource === 'corrected' || (row.readingSource !== null && row.savedReadingId === (saved?.id ?? null));
  return decided && survey && row.reading && sameReading(survey.reading, row.reading) ? survey : null;
}

async function readArchive(app: App, job: JobHandle, checked: CheckedArchive, known: Known): Promise<void> {
  job.report({ done: 0, total: 0, unit: 'bytes', phase: 'opening' });
  const open = await openArchiveFiles(app, checked.row.id);
  const close = () => void open.close();
  job.signal.addEventListener('abort', close);
  try {
    job.signal.throwIfAborted();
    const contents = (known.contents = await open.contents());
    const chosen = (known.chosen = await chooseReading(open, checked));
    known.survey = await surveyArchive(open, contents, chosen.reading, checked.survey, (done, total) => job.report({ done, total, unit: 'bytes', phase: 'reading' }));
  } finally {
    job.signal.removeEventListener('abort', close);
    await open.close();
  }
}

/** A person's correction stands; else the campaign's reading for the solver where it fits; else the proposal, with what did not fit. */
async function chooseReading(open: OpenArchive, { row, saved }: CheckedArchive): Promise<ChosenReading> {
  const proposal = await open.propose();
  if (row.readingSource === 'corrected' && row.reading) {
    return { proposal, reading: row.reading, source: 'corrected', savedReadingId: row.savedReadingId, misfits: await open.fits(row.reading) };
  }
  if (!saved) return { proposal, reading: proposal, source: 'proposed', savedReadingId: null, misfits: [] };
  const { reading, mismatches } = await open.apply(saved.reading);
  return mismatches.length === 0
    ? { proposal, reading, source: 'saved', savedReadingId: saved.id, misfits: [] }
    : { proposal, reading: proposal, source: 'proposed', savedReadingId: saved.id, misfits: mismatches };
}

/** The pass; or, when every field was read in the same way before, only stamps, coordinates and weights anew. */
async function surveyArchive(open: OpenArchive, contents: ArchiveContents, reading: Reading, before: Survey | null, onProgress: (done: number, total: number) => void): Promise<Survey> {
  try {
    const mismatches = await open.fits(reading);
    const fields = before && mismatches.length === 0 ? reusedFields(before, reading) : null;
    if (fields) return { contents, reading, ...(await open.axes(reading)), fields, mismatches };
    return await open.survey(reading, onProgress);
  } catch (cause) {
    if (!(cause instanceof PennyweightError) || cause.code !== 'reading-mismatch') throw cause;
    return unfittingSurvey(contents, reading, cause);
  }
}

/** What was collected of each field depends on its path and axes only; names and units are the reading's. */
function reusedFields(before: Survey, reading: Reading): Survey['fields'] | null {
  const fields = reading.fields.map((field) => {
    const then = before.reading.fields.find(({ path }) => path === field.path);
    const collected = before.fields.find(({ path }) => path === field.path);
    return then && collected && then.axes.join() === field.axes.join() ? { ...collected, name: field.name, unit: field.unit } : null;
  });
  return fields.every((field) => field !== null) ? fields : null;
}

/** The archive can be read, its reading cannot be carried out: nothing is collected, and the one mismatch is told. */
function unfittingSurvey(contents: ArchiveContents, reading: Reading, { message, details }: PennyweightError): Survey {
  const path = typeof details.path === 'string' ? details.path : reading.fields[0]?.path ?? '/';
  return {
    contents, reading, stamps: null, stampType: null, stampPath: null, axes: [], spaceWeights: null, timeWeights: null, fields: [],
    mismatches: [{ path, expected: 'what the reading says', actual: 'something else', message: sentence(message) }],
  };
}
