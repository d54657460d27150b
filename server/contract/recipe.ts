/** The recipe: ordered, typed steps that turn readings into a matrix. Data, not code; replayable. */
import { z } from 'zod';
import { spaceRuleId, timeRuleId } from './weights.ts';

export const recipeVersion = 1;

const time = z.number().finite();
const index = z.number().int().nonnegative();

/** runs: archive ids; fields: names, stacked in this order */
export const selectStep = z.object({
  step: z.literal('select'),
  archives: z.array(z.uuid()).min(1),
  fields: z.array(z.string().min(1)).min(1),
});
export const orderStep = z.object({
  step: z.literal('order'),
  sort: z.boolean().default(true),
  restart: z.enum(['keep-later', 'keep-earlier', 'refuse']).default('keep-later'),
  dropDuplicates: z.boolean().default(true),
  dropFrozen: z.boolean().default(false),
  /** snapshot indices of an archive's record to drop, before anything else */
  drop: z.array(z.object({ archive: z.uuid(), indices: z.array(index) })).default([]),
});
export const windowStep = z.object({
  step: z.literal('window'),
  from: time.nullable().default(null),
  to: time.nullable().default(null),
  every: z.number().int().min(1).default(1),
  first: z.number().int().min(1).nullable().default(null),
  last: z.number().int().min(1).nullable().default(null),
});
export const centreStep = z.object({
  step: z.literal('centre'),
  subtract: z.enum(['nothing', 'weighted-mean', 'weighted-mean-per-run', 'first-snapshot']).default('weighted-mean'),
});
export const weighStep = z.object({
  step: z.literal('weigh'),
  time: timeRuleId.default('trapezoid'),
  space: spaceRuleId.default('tensor'),
  runs: z.enum(['equal']).default('equal'),
});
export const splitStep = z.object({
  step: z.literal('split'),
  by: z.enum(['run', 'blocks']),
  /** shares of train, validation, test; they add up to 1 */
  shares: z.tuple([z.number().min(0).max(1), z.number().min(0).max(1), z.number().min(0).max(1)]),
  /** number of blocks a record is cut into, and snapshots left out between two parts (by blocks) */
  blocks: z.number().int().min(3).default(10),
  guard: z.number().int().min(0).default(1),
  seed: z.number().int().min(0).default(1),
});
export const castStep = z.object({ step: z.literal('cast'), type: z.enum(['float32', 'float64']) });

export const recipeStep = z.discriminatedUnion('step', [
  selectStep, orderStep, windowStep, centreStep, weighStep, splitStep, castStep,
]);
export type RecipeStep = z.infer<typeof recipeStep>;
export type SelectStep = z.infer<typeof selectStep>;
export type OrderStep = z.infer<typeof orderStep>;
export type WindowStep = z.infer<typeof windowStep>;
export type CentreStep = z.infer<typeof centreStep>;
export type WeighStep = z.infer<typeof weighStep>;
export type SplitStep = z.infer<typeof splitStep>;
export type CastStep = z.infer<typeof castStep>;
export const stepNames = ['select', 'order', 'window', 'centre', 'weigh', 'split', 'cast'] as const;
export type StepName = (typeof stepNames)[number];

export const recipe = z.object({
  pennyweight: z.literal(recipeVersion),
  steps: z.array(recipeStep).min(1),
});
export type Recipe = z.infer<typeof recipe>;

export const splitPart = z.enum(['train', 'validation', 'test', 'guard']);
export type SplitPart = z.infer<typeof splitPart>;
