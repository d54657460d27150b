/** When reading failed half way, what the container says of itself can still be judged: links, damage, storage, the reading. */
import type { ArchiveContents, Reading } from '#contract/reading.ts';
import type { Survey } from '../survey.ts';

/** A survey without any data: beside `failure`, the checks of the file and of the reading still speak. */
export function partialSurvey(contents: ArchiveContents, reading: Reading): Survey {
  return {
    contents,
    reading,
    stamps: null,
    stampType: null,
    stampPath: null,
    axes: [],
    spaceWeights: null,
    timeWeights: null,
    fields: [],
    mismatches: [],
  };
}
