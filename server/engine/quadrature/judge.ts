/** Judges time rules on given stamps: assumptions, degree, sign, sum, effective share, error estimate of the mean energy. */
import { PennyweightError } from '#contract/error.ts';
import type { ElementType } from '#contract/reading.ts';
import type { TimeRuleId, TimeRuleResult } from '#contract/weights.ts';
import { degreeOfExactness } from './degree.ts';
import { energyError } from './energy-error.ts';
import { timeRuleOf, timeRules } from './index.ts';
import { assertProvided, providedWeights } from './provided.ts';
import { segmentsOf, usualInterval, weightsOf, type Segment } from './segment.ts';
import { accurateSum } from './stamps.ts';
import type { TimeRule } from './time-rule.ts';

export interface JudgeOptions {
  /** weights that the archive brings */
  provided?: ArrayLike<number> | null;
  /** first index of each segment, ascending, beginning with 0: weights never span a gap or the border of two runs */
  segments?: number[];
  /** ||u_j||_W^2 of each snapshot, for the error estimate */
  energies?: ArrayLike<number> | null;
}

/** Weights of a rule on each segment by itself; length m. Errors: 'stamps-invalid', 'rule-not-admissible' (no such rule). */
export function weightsBySegment(
  id: TimeRuleId,
  stamps: Float64Array,
  dtype: ElementType | null,
  segments?: number[],
): Float64Array {
  return weightsOf(timeRuleOf(id), segmentsOf(stamps, dtype, segments));
}

/**
 * All rules, in the catalogue's order; 'provided' last, when given. `stamps` strictly increasing within each segment; `dtype`
 * is the type they are stored in, which tells their precision. O(m log m). Errors: 'stamps-invalid' with index and value.
 */
export function judgeTimeRules(
  stamps: Float64Array,
  dtype: ElementType | null,
  options: JudgeOptions = {},
): TimeRuleResult[] {
  const segments = segmentsOf(stamps, dtype, options.segments);
  const results = timeRules.map((rule) => judge(rule, segments, options));
  return options.provided ? [...results, judgeProvided(segments, options.provided)] : results;
}

/** One rule of the catalogue, or 'provided'. Errors as judgeTimeRules, and 'rule-not-admissible' for an id without a rule. */
export function judgeTimeRule(
  id: TimeRuleId,
  stamps: Float64Array,
  dtype: ElementType | null,
  options: JudgeOptions = {},
): TimeRuleResult {
  const segments = segmentsOf(stamps, dtype, options.segments);
  return id === 'provided' ? judgeProvided(segments, options.provided ?? []) : judge(timeRuleOf(id), segments, options);
}

function judge(rule: TimeRule, segments: Segment[], { energies }: JudgeOptions): TimeRuleResult {
  const weights = weightsOf(rule, segments);
  const assumed = segments.map(({ spacing }) => rule.assumptions(spacing));
  const refused = assumed.find(({ holds }) => !holds);
  const negative = negativeSentence(weights, segments);
  return {
    id: rule.id,
    admissible: !refused && !negative,
    why: negative ?? (refused ?? assumed[0]).why,
    weights: Array.from(weights),
    mass: null,
    degree: least(segments, ({ stamps, from, to }) =>
      degreeOfExactness(stamps, weights.subarray(from, to), rule.panels?.(stamps)),
    ),
    ...figures(weights),
    energy_error: energies ? energyError(rule, segments, energies) : null,
    holdout_error: null,
  };
}

function judgeProvided(segments: Segment[], given: ArrayLike<number>): TimeRuleResult {
  const m = segments[segments.length - 1].to;
  const result = { id: 'provided' as const, mass: null, energy_error: null, holdout_error: null };
  const brought = Float64Array.from(given);
  const shown = brought.length === m && Number.isFinite(accurateSum(brought)) ? brought : new Float64Array(0);
  const refuse = (why: string): TimeRuleResult => ({
    ...result,
    admissible: false,
    why,
    weights: Array.from(shown),
    degree: null,
    ...figures(shown),
  });
  const negative = negativeSentence(shown, segments);
  if (negative) return refuse(negative);
  const weights = new Float64Array(m);
  let why = '';
  try {
    assertProvided(brought, m);
    for (const { from, to, stamps } of segments) {
      const scaled = providedWeights(stamps, brought.subarray(from, to));
      weights.set(stamps.length === 1 ? [usualInterval(segments)] : scaled.weights, from);
      why ||= scaled.why;
    }
  } catch (error) {
    if (!(error instanceof PennyweightError)) throw error;
    return refuse(error.message);
  }
  const degree = least(segments, ({ stamps, from, to }) => degreeOfExactness(stamps, weights.subarray(from, to)));
  return { ...result, admissible: true, why, weights: Array.from(weights), degree, ...figures(weights) };
}

/** A record is exact to the least degree of its segments; null where one is not exact for constants. */
function least(segments: Segment[], degreeOf: (segment: Segment) => number | null): number | null {
  let degree = Infinity;
  for (const segment of segments) degree = Math.min(degree, degreeOf(segment) ?? -1);
  return degree < 0 ? null : degree;
}

/** How many weights are negative and where the first is; null where none is. */
function negativeSentence(weights: Float64Array, segments: Segment[]): string | null {
  const count = weights.reduce((total, weight) => total + (weight < 0 ? 1 : 0), 0);
  if (count === 0) return null;
  const first = weights.findIndex((weight) => weight < 0);
  const segment = segments.find(({ to }) => first < to)!;
  const time = Number(segment.stamps[first - segment.from].toPrecision(6));
  return `${count} negative weight${count === 1 ? '' : 's'} (snapshot ${first} at t = ${time} has ${weights[first].toPrecision(3)}): a snapshot is multiplied by the square root of its weight, so the rule cannot be used here.`;
}

/** Effective share (sum a)^2 / (m sum a^2) (L. Kish, Survey Sampling, 1965, effective sample size), extremes and sum. */
function figures(weights: Float64Array): Pick<TimeRuleResult, 'effective' | 'negative' | 'min' | 'max' | 'sum'> {
  const m = weights.length;
  if (m === 0) return { effective: 0, negative: 0, min: 0, max: 0, sum: 0 };
  let min = Infinity;
  let max = -Infinity;
  let negative = 0;
  for (const weight of weights) {
    min = Math.min(min, weight);
    max = Math.max(max, weight);
    if (weight < 0) negative++;
  }
  const sum = accurateSum(weights);
  // Scaled by the largest, so that squares neither vanish nor overflow.
  const scale = Math.max(max, -min) || 1;
  const squares = accurateSum(weights.map((weight) => (weight / scale) ** 2));
  return { effective: squares > 0 ? (sum / scale) ** 2 / (m * squares) : 0, negative, min, max, sum };
}
