/** Judges time rules on given stamps: assumptions, degree, sign, sum, effective share, error estimate of the mean energy. */
import { PennyweightError } from '#contract/error.ts';
import type { ElementType } from '#contract/reading.ts';
import type { TimeRuleId, TimeRuleResult } from '#contract/weights.ts';
import { degreeOfExactness } from './degree.ts';
import { timeRuleOf, timeRules } from './index.ts';
import { providedWeights } from './provided.ts';
import { describeSpacing, effectiveStamps, type Spacing } from './spacing.ts';
import { accurateSum, assertStamps } from './stamps.ts';

export interface JudgeOptions {
  /** weights that the archive brings */
  provided?: ArrayLike<number> | null;
  /** first index of each segment, ascending, beginning with 0: weights never span a gap or the border of two runs */
  segments?: number[];
  /** ||u_j||_W^2 of each snapshot, for the error estimate */
  energies?: ArrayLike<number> | null;
}

/** Weights of a rule on each segment by itself; length m. Errors as assertStamps within a segment. */
export function weightsBySegment(id: TimeRuleId, stamps: Float64Array, dtype: ElementType | null, segments: number[] = [0]): Float64Array {
  const rule = timeRuleOf(id), weights = new Float64Array(stamps.length);
  segments.forEach((from, s) => {
    const part = stamps.subarray(from, segments[s + 1] ?? stamps.length);
    assertStamps(part);
    weights.set(rule.weights(effectiveStamps(part, describeSpacing(part, dtype))), from);
  });
  return weights;
}

/** All rules, in the catalogue's order; 'provided' last, when given. `stamps` strictly increasing within each segment. */
export function judgeTimeRules(stamps: Float64Array, dtype: ElementType | null, options: JudgeOptions = {}): TimeRuleResult[] {
  const results = timeRules.map((rule) => judgeTimeRule(rule.id, stamps, dtype, options));
  return options.provided ? [...results, judgeTimeRule('provided', stamps, dtype, options)] : results;
}

export function judgeTimeRule(id: TimeRuleId, stamps: Float64Array, dtype: ElementType | null, options: JudgeOptions = {}): TimeRuleResult {
  if (id === 'provided') return judgeProvided(stamps, options);
  const rule = timeRuleOf(id), segments = options.segments ?? [0];
  const weights = weightsBySegment(id, stamps, dtype, segments);
  const parts = segments.map((from, s) => stamps.subarray(from, segments[s + 1] ?? stamps.length));
  const spacings = parts.map((part) => describeSpacing(part, dtype));
  const assumptions = spacings.map((spacing) => rule.assumptions(spacing));
  const refused = assumptions.find((each) => !each.holds);
  const degrees = parts.map((part, s) => {
    const even = effectiveStamps(part, spacings[s]);
    return degreeOfExactness(rule, even, weights.subarray(segments[s], segments[s + 1] ?? stamps.length));
  });
  const negative = negatives(weights);
  const why = negative.length > 0 ? negativeSentence(negative, stamps, weights) : (refused ?? assumptions[0]).why;
  return {
    id, admissible: !refused && negative.length === 0, why, weights: Array.from(weights), mass: null,
    degree: degrees.some((degree) => degree === null) ? null : Math.min(...(degrees as number[])),
    ...figures(weights), holdout_error: null,
    energy_error: options.energies ? energyError(id, parts, spacings, segments, options.energies, weights, dtype) : null,
  };
}

function judgeProvided(stamps: Float64Array, options: JudgeOptions): TimeRuleResult {
  const given = options.provided ?? [];
  try {
    const { weights, why } = providedWeights(stamps, given);
    return { id: 'provided', admissible: true, why, weights: Array.from(weights), mass: null, degree: degreeOfExactness({ local: false, weights: () => weights }, stamps, weights), ...figures(weights), energy_error: null, holdout_error: null };
  } catch (error) {
    if (!(error instanceof PennyweightError)) throw error;
    return { id: 'provided', admissible: false, why: error.message, weights: [], mass: null, degree: null, effective: 0, negative: 0, min: 0, max: 0, sum: 0, energy_error: null, holdout_error: null };
  }
}

function negatives(weights: Float64Array): number[] {
  const found: number[] = [];
  for (let j = 0; j < weights.length; j++) if (weights[j] < 0) found.push(j);
  return found;
}

function negativeSentence(negative: number[], stamps: Float64Array, weights: Float64Array): string {
  const first = negative[0], where = `snapshot ${first} at t = ${Number(stamps[first].toPrecision(6))} has ${weights[first].toPrecision(3)}`;
  return `${negative.length} negative weight${negative.length === 1 ? '' : 's'} (${where}): a snapshot is multiplied by the square root of its weight, so the rule cannot be used here.`;
}

/** Effective share (sum a)^2 / (m sum a^2) (L. Kish, Survey Sampling, 1965, effective sample size), extremes and sum. */
function figures(weights: Float64Array): Pick<TimeRuleResult, 'effective' | 'negative' | 'min' | 'max' | 'sum'> {
  const sum = accurateSum(weights), squares = accurateSum(weights.map((a) => a * a));
  let min = Infinity, max = -Infinity;
  for (const a of weights) {
    min = Math.min(min, a);
    max = Math.max(max, a);
  }
  return { effective: squares > 0 ? (sum * sum) / (weights.length * squares) : 0, negative: negatives(weights).length, min, max, sum };
}

/**
 * Relative change of the mean energy when the same rule sees every other snapshot: a cautious estimate, since the finer value is
 * better than the coarser one. Segments with an even number of snapshots leave their last one out of both; null when no segment
 * has five snapshots.
 */
function energyError(id: TimeRuleId, parts: Float64Array[], spacings: Spacing[], segments: number[], energies: ArrayLike<number>, weights: Float64Array, dtype: ElementType | null): number | null {
  let fine = 0, coarse = 0, tested = false;
  parts.forEach((part, s) => {
    const odd = part.length % 2 ? part.length : part.length - 1;
    if (odd < 5) return;
    tested = true;
    const even = effectiveStamps(part, spacings[s]).slice(0, odd);
    const same = odd === part.length ? weights.subarray(segments[s], segments[s] + odd) : weightsBySegment(id, even, dtype);
    const halved = weightsBySegment(id, even.filter((_, j) => j % 2 === 0), dtype);
    for (let j = 0; j < odd; j++) {
      fine += same[j] * energies[segments[s] + j];
      if (j % 2 === 0) coarse += halved[j / 2] * energies[segments[s] + j];
    }
  });
  return tested && fine > 0 ? Math.abs(fine - coarse) / fine : null;
}
