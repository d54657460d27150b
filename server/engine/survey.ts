/**
 * The survey: all that one streaming pass over an archive collects, and all that the checks ever see of the data.
 * Plain objects and typed arrays; m = number of snapshots, n = number of values in one snapshot (nodes x components).
 */
import type { ArchiveContents, AxisName, ElementType, Reading } from '#contract/reading.ts';

/** What the pass collected of one field. Node indices count through the space axes in storage order (C order of the reading's axes without time). */
export interface FieldSurvey {
  path: string;
  name: string;
  dtype: ElementType;
  unit: string | null;
  snapshots: number;
  nodes: number;
  /** over the finite values of each snapshot, length m; NaN where a snapshot has none */
  min: Float64Array;
  max: Float64Array;
  mean: Float64Array;
  /** Euclidean norm over the finite values, length m */
  norm: Float64Array;
  /** number of NaN or infinite values a snapshot, length m */
  nonFinite: Float64Array;
  /** node index of the first non-finite value of each snapshot, -1 where none, length m */
  firstNonFinite: Float64Array;
  /** candidates for fill values met in the data: the declared one and well-known constants */
  fill: { value: number; declared: boolean; counts: Float64Array; firstSnapshot: number; firstNode: number }[];
  /** 64-bit content hash of each snapshot's stored bit patterns, 16 hex digits, length m */
  hash: string[];
  /** ||u_j - u_{j-1}||_2, [0] = 0, length m */
  stepChange: Float64Array;
  /** nodes whose value differs from that of the first snapshot anywhere in the record */
  changedNodes: number;
  /** largest difference within one snapshot over all snapshots: max_j (max u_j - min u_j) */
  spread: number;
  /** elements that the file really holds, when it can be told; null when unknown */
  allocated: number | null;
  /** snapshots at the end of the record that hold nothing but one constant bit pattern (the fill value), 0 when none */
  trailingFill: number;
}

/** One space axis as read. */
export interface SurveyAxis {
  name: AxisName;
  path: string | null;
  unit: string | null;
  count: number;
  /** coordinates, length count; null when unknown */
  nodes: Float64Array | null;
  /** cell edges, length count + 1; null when unknown */
  edges: Float64Array | null;
  dtype: ElementType | null;
  periodic: boolean | null;
}

export interface Survey {
  contents: ArchiveContents;
  reading: Reading;
  /** time stamps in storage order, null for an ensemble or when unknown */
  stamps: Float64Array | null;
  /** element type in which the stamps are stored ('string' when taken from a name); tells their precision */
  stampType: ElementType | null;
  stampPath: string | null;
  axes: SurveyAxis[];
  spaceWeights: Float64Array | null;
  timeWeights: Float64Array | null;
  fields: FieldSurvey[];
  /** arrays of the reading whose shape does not fit, with expected and actual */
  mismatches: { path: string; expected: string; actual: string; message: string }[];
}
