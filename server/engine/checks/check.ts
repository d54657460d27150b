/** The form of a check. One file a check; the catalogue (index.ts) is the only other place that names it. */
import type { CheckId, Evidence, Remedy, Severity } from '#contract/finding.ts';
import type { ElementType } from '#contract/reading.ts';
import type { TimeRuleId } from '#contract/weights.ts';
import type { Survey } from '../survey.ts';

/** What a campaign asks of its archives; empty on the command line. */
export interface CampaignDemands {
  fields: { name: string; unit: string | null; min: number | null; max: number | null; required: boolean }[];
  parameters: { name: string; unit: string | null; min: number | null; max: number | null }[];
}

/** All a check may look at. `survey` is null when the container could not be read. */
export interface CheckSubject {
  survey: Survey | null;
  /** set when opening or reading failed */
  failure: { message: string; path: string | null } | null;
  /** SHA-256 of the received bytes, and the sender's when given */
  checksum: { received: string; announced: string | null } | null;
  demands: CampaignDemands;
  /** parameter values of the run, from the archive or given by the contributor */
  parameters: Record<string, number>;
  /** grids of the other archives of the same campaign or dataset, to compare with; empty when alone */
  otherGrids: {
    archive: string;
    axes: { name: string; nodes: Float64Array | null; count: number; dtype?: ElementType | null }[];
  }[];
  /** the time rule that is to be used, when chosen */
  timeRule: TimeRuleId | null;
  /** id of the archive, for the recipe's drop lists; without one the nil UUID stands for "the archive of this finding" */
  archive?: string;
  /** snapshots at the end of the record that were never written; set by judgeAll, see written-part.ts */
  unwritten?: number;
}

export interface Threshold {
  default: number;
  unit: string;
  meaning: string;
}

export interface Judgement {
  path: string | null;
  message: string;
  evidence: Evidence;
  remedy: Remedy | null;
}

export interface Check {
  id: CheckId;
  severity: Severity;
  /** one line: what it is about */
  title: string;
  /** where threshold or method come from; "common practice, no source" where that is the truth */
  source: string;
  thresholds: Record<string, Threshold>;
  judge(subject: CheckSubject, thresholds: Record<string, number>): Judgement[];
}
