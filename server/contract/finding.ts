/** Findings: what a check says of an archive, a draft or a release. */
import { z } from 'zod';

export const severities = ['blocker', 'caution', 'note'] as const;
export const severity = z.enum(severities);
export type Severity = z.infer<typeof severity>;

/** Stable ids of the check catalogue. They appear in the API, the command line's JSON and in waivers. */
export const checkIds = [
  'file/unreadable', 'file/checksum-mismatch', 'file/unwritten-data', 'file/writer-open', 'file/outside-link',
  'file/filter-unknown', 'file/duplicate',
  'reading/incomplete', 'reading/shape-mismatch', 'reading/type-lossy',
  'time/missing', 'time/not-increasing', 'time/duplicate', 'time/restart-overlap', 'time/gap', 'time/uneven-spacing',
  'time/rounded-stamps', 'time/even-point-count', 'time/negative-weights', 'time/under-resolved',
  'time/start-up-transient', 'time/whole-periods', 'time/too-few',
  'grid/missing', 'grid/not-monotone', 'grid/duplicate-nodes', 'grid/uneven', 'grid/periodic-end-repeated',
  'grid/degenerate-cells', 'grid/moving', 'grid/differs', 'grid/weights-invalid',
  'value/non-finite', 'value/fill-value', 'value/frozen', 'value/repeated', 'value/jump', 'value/spike',
  'value/constant-field', 'value/dead-nodes', 'value/precision', 'value/quantised', 'value/out-of-range',
  'value/unit-missing', 'value/unit-mismatch',
  'param/missing', 'param/outside-box', 'param/duplicate-run',
  'set/field-dominates', 'set/split-leak', 'set/coverage', 'set/unconverged', 'set/rank-floor',
] as const;
export const checkId = z.enum(checkIds);
export type CheckId = z.infer<typeof checkId>;

/**
 * Evidence: `indices` are snapshot or node indices (0-based, the first 20), `times` their stamps, `count` how many in all;
 * any further member is a number, text or short list that the check names in its own file.
 */
export const evidence = z
  .object({
    indices: z.array(z.number()).max(20).optional(),
    times: z.array(z.number()).max(20).optional(),
    count: z.number().optional(),
  })
  .catchall(z.unknown());
export type Evidence = z.infer<typeof evidence>;

/** A remedy that can be put into the recipe with one action: a recipe step (see recipe.ts) and how to say it. */
export const remedy = z.object({
  step: z.string(),
  parameters: z.record(z.string(), z.unknown()).default({}),
  sentence: z.string(),
});
export type Remedy = z.infer<typeof remedy>;

/** What a check's judge() returns; the catalogue adds id and severity. */
export const finding = z.object({
  id: checkId,
  severity,
  /** dataset path inside the archive, or null when it concerns the whole */
  path: z.string().nullable(),
  message: z.string(),
  evidence,
  remedy: remedy.nullable(),
});
export type Finding = z.infer<typeof finding>;

/** Thresholds that a campaign can change; defaults stand in each check's file. */
export const checkPolicy = z.object({
  thresholds: z.record(z.string(), z.record(z.string(), z.number())).default({}),
});
export type CheckPolicy = z.infer<typeof checkPolicy>;
