/** Small shapes that many resources share. */
import { z } from 'zod';

export const slug = z.string().regex(/^[a-z0-9]+(-[a-z0-9]+)*$/, 'use lower-case letters, digits and single hyphens').min(2).max(60);
export const id = z.uuid();
export const sha256 = z.string().regex(/^[0-9a-f]{64}$/, 'a SHA-256 is 64 hexadecimal digits');
export const timestamp = z.iso.datetime({ offset: true });
export const reason = z.string().trim().min(8, 'give a reason of at least 8 characters').max(2000);
export const name = z.string().trim().min(1, 'give a name').max(120);
export const person = z.object({ id: z.string(), name: z.string() });
export type Person = z.infer<typeof person>;

/** A number that may come as text in a query string. */
export const wholeNumber = z.coerce.number().int().nonnegative();
/** 'true'/'false' in a query string. */
export const flag = z.union([z.boolean(), z.enum(['true', 'false', '1', '0']).transform((v) => v === 'true' || v === '1')]);
/** 'u,v' in a query string, or an array. */
export const list = z.union([z.array(z.string()), z.string().transform((v) => v.split(',').map((part) => part.trim()).filter(Boolean))]);

export const page = z.object({ offset: wholeNumber.default(0), limit: wholeNumber.max(1000).default(200) });
export const findingCounts = z.object({ blocker: z.number(), caution: z.number(), note: z.number(), waived: z.number() });

/** A number array in JSON: NaN and infinities travel as null. */
export const numbers = z.array(z.number().nullable());

/** What the beam draws: stamps, weights and marks of one record (see src/beam). */
export const beam = z.object({
  /** stamps, or null for an ensemble: then index order is drawn */
  stamps: z.array(z.number()).nullable(),
  count: z.number().int(),
  unit: z.string().nullable(),
  weights: z.array(z.number()).nullable(),
  rule: z.string().nullable(),
  marks: z.object({
    /** index j of the snapshot before a gap */
    gaps: z.array(z.number().int()),
    duplicates: z.array(z.number().int()),
    /** index of the first snapshot after a jump back */
    restarts: z.array(z.number().int()),
  }),
  /** for datasets: which part each snapshot belongs to, and its record */
  split: z.array(z.enum(['train', 'validation', 'test', 'guard'])).nullable(),
  records: z.array(z.object({ label: z.string(), from: z.number().int(), count: z.number().int() })),
});
export type Beam = z.infer<typeof beam>;

/** Values of one snapshot or mode for the field view; thinned by `stride` when the grid is large. */
export const fieldValues = z.object({
  label: z.string(),
  field: z.string(),
  unit: z.string().nullable(),
  /** space axes in storage order; `nodes` null when unknown */
  axes: z.array(z.object({ name: z.string(), unit: z.string().nullable(), count: z.number().int(), nodes: z.array(z.number()).nullable() })),
  /** C order over the axes; null where not finite */
  values: numbers,
  stride: z.array(z.number().int()),
  min: z.number().nullable(),
  max: z.number().nullable(),
  time: z.number().nullable(),
  index: z.number().int(),
  count: z.number().int(),
});
export type FieldValues = z.infer<typeof fieldValues>;
