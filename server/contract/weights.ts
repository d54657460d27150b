/** Quadrature rules in time and space, their judgement on given stamps, and the spectrum. */
import { z } from 'zod';

export const timeRuleIds = [
  'equal', 'periodic', 'trapezoid', 'simpson', 'simpson-guarded', 'gregory', 'spline', 'moment-fit',
  'clenshaw-curtis', 'gauss-legendre', 'provided', 'mass-linear', 'mass-spline', 'mass-hermite',
] as const;
export const timeRuleId = z.enum(timeRuleIds);
export type TimeRuleId = z.infer<typeof timeRuleId>;

export const spaceRuleIds = ['none', 'tensor', 'cell-volume', 'curvilinear', 'lumped-mass', 'mass-matrix', 'provided'] as const;
export const spaceRuleId = z.enum(spaceRuleIds);
export type SpaceRuleId = z.infer<typeof spaceRuleId>;

/** One rule judged on one vector of stamps. `weights` sum to the record's duration (also for `equal`). */
export const timeRuleResult = z.object({
  id: timeRuleId,
  admissible: z.boolean(),
  /** why it is admissible or refused, one sentence */
  why: z.string(),
  weights: z.array(z.number()),
  mass: z.array(z.array(z.number())).nullable(),
  /** highest polynomial degree integrated exactly on these stamps, found numerically; null when not even constants */
  degree: z.number().int().nullable(),
  /** (sum a)^2 / (m sum a^2): share of the snapshots that is effective */
  effective: z.number(),
  negative: z.number().int(),
  min: z.number(),
  max: z.number(),
  sum: z.number(),
  energy_error: z.number().nullable(),
  holdout_error: z.array(z.number()).nullable(),
});
export type TimeRuleResult = z.infer<typeof timeRuleResult>;

export const spaceRuleResult = z.object({
  chosen: spaceRuleId,
  why: z.string(),
  sum: z.number(),
  /** measure of the domain when the grid tells it */
  measure: z.number().nullable(),
});
export type SpaceRuleResult = z.infer<typeof spaceRuleResult>;

export const spectrumResult = z.object({
  /** sqrt of the eigenvalues of C, descending; entries below `floor` are noise and are not to be shown as digits */
  singular_values: z.array(z.number()),
  floor: z.number(),
  /** number of singular values above the floor */
  resolved: z.number().int(),
  /** sum of the eigenvalues = weighted energy */
  energy: z.number(),
  rank: z.record(z.string(), z.number().int()),
});
export type SpectrumResult = z.infer<typeof spectrumResult>;

export const weightsReport = z.object({
  time: z.object({ chosen: timeRuleId, reason: z.string(), rules: z.array(timeRuleResult) }),
  space: spaceRuleResult,
  spectrum: spectrumResult.nullable(),
});
export type WeightsReport = z.infer<typeof weightsReport>;
