/** One archive read in its own process and judged: what `check` reports. Refusals of the reader become findings. */
import type { ArchiveReport } from '#contract/check-report.ts';
import { PennyweightError } from '#contract/error.ts';
import type { CheckPolicy } from '#contract/finding.ts';
import type { Reading } from '#contract/reading.ts';
import type { CheckSubject } from '../engine/checks/check.ts';
import { judgeAll } from '../engine/checks/index.ts';
import { partialSurvey } from '../engine/checks/partial-survey.ts';
import { describeArchive } from '../engine/report/archive-report.ts';
import type { Survey } from '../engine/survey.ts';
import { openIsolated, type IsolatedArchive } from '../reading/isolated.ts';
import type { ArchiveFile } from './archive-files.ts';
import { archiveDigest, fileDigest } from './file-digest.ts';
import { applyChoice, type ReadingChoice } from './reading-choice.ts';
import type { Terminal } from './terminal.ts';

/** Bytes of the digest and of the survey count alike on the bar. */
type Report = (share: number) => void;

export async function chosenReading(archive: IsolatedArchive, choice: ReadingChoice): Promise<Reading> {
  return applyChoice(choice.reading ? (await archive.apply(choice.reading)).reading : await archive.propose(), choice);
}

function failureOf(error: unknown): NonNullable<CheckSubject['failure']> {
  if (!(error instanceof PennyweightError) || error.code === 'internal') throw error;
  const { path } = error.details;
  return { message: error.message, path: typeof path === 'string' ? path : null };
}

type Read = Pick<CheckSubject, 'survey' | 'failure'>;

async function surveyOf(archive: IsolatedArchive, choice: ReadingChoice, report: Report): Promise<Read> {
  const reading = await chosenReading(archive, choice);
  try {
    return {
      survey: await archive.survey(reading, (done, total) => report(total > 0 ? done / total : 1)),
      failure: null,
    };
  } catch (error) {
    const failure = failureOf(error);
    const survey: Survey = partialSurvey(await archive.contents(), reading);
    if ((error as PennyweightError).code !== 'reading-mismatch') return { survey, failure };
    return {
      survey: {
        ...survey,
        mismatches: [{ path: failure.path ?? '/', expected: '', actual: '', message: failure.message }],
      },
      failure: null,
    };
  }
}

async function read(files: ArchiveFile[], choice: ReadingChoice, report: Report): Promise<Read> {
  let archive: IsolatedArchive;
  try {
    archive = await openIsolated(files.map(({ name, path }) => ({ name, path })));
  } catch (error) {
    return { survey: null, failure: failureOf(error) };
  }
  try {
    return await surveyOf(archive, choice, report);
  } catch (error) {
    return { survey: null, failure: failureOf(error) };
  } finally {
    await archive.close();
  }
}

export async function checkArchive(
  files: ArchiveFile[],
  choice: ReadingChoice,
  policy: CheckPolicy,
  terminal: Terminal,
): Promise<ArchiveReport> {
  const [first] = files;
  const total = files.reduce((sum, file) => sum + file.bytes, 0);
  const show: Report = (share) => terminal.progress(first.name, share);
  let hashed = 0;
  const digests = files.map((file) => ({
    name: file.name,
    bytes: file.bytes,
    sha256: fileDigest(file.path, (count) => show(0.3 * ((hashed += count) / Math.max(1, total)))),
  }));
  const digest = archiveDigest(digests);
  const { survey, failure } = await read(files, choice, (share) => show(0.3 + 0.7 * share));
  terminal.progress(first.name, null);
  const parameters = Object.fromEntries((survey?.reading.parameters ?? []).map(({ name, value }) => [name, value]));
  const subject: CheckSubject = {
    survey,
    failure,
    checksum: { received: digest, announced: null },
    demands: { fields: [], parameters: [] },
    parameters,
    otherGrids: [],
    timeRule: null,
  };
  return describeArchive(digests, digest, survey, judgeAll(subject, policy));
}
