/** Releases and what can be pulled from them. */
import { z } from 'zod';
import { buildSummary, releaseSummary } from './dataset.ts';
import { recipe } from './recipe.ts';
import { defineRoute } from './route.ts';
import { beam, fieldValues, flag, id, list, person, reason, sha256, slug, timestamp, wholeNumber } from './shape.ts';

export const releaseFile = z.object({ path: z.string(), bytes: z.number(), sha256 });
export const release = releaseSummary.extend({
  campaign: slug, campaignId: id, campaignTitle: z.string(), dataset: slug, title: z.string(), description: z.string(), draft: id,
  licence: z.string(), handlingLabel: z.string(), contact: z.string(), citation: z.string(), note: z.string(),
  build: buildSummary, recipe, files: z.array(releaseFile), manifestSha256: sha256,
  waivers: z.array(z.object({ check: z.string(), message: z.string(), reason: z.string(), by: person, at: timestamp })),
  withdrawnAt: timestamp.nullable(), withdrawnReason: z.string().nullable(), withdrawnBy: person.nullable(),
  pulls: z.number().int(), caution: z.string(), datasheet: z.string(),
});
export type Release = z.infer<typeof release>;

/** Columns by index range 'a:b' (half open) or by split part; fields by name; weighted: times sqrt(time weight x space weight). */
export const matrixQuery = z.object({
  columns: z.string().regex(/^\d*:\d*$/, 'write columns as from:to, e.g. 0:100').optional(),
  split: z.enum(['train', 'validation', 'test']).optional(),
  fields: list.optional(),
  weighted: flag.default(false),
});

const ofRelease = z.object({ campaign: slug, dataset: slug, version: z.coerce.number().int().positive() });
const path = '/api/campaigns/:campaign/datasets/:dataset/releases/:version';
const read = { action: 'read', subject: 'Release' } as const;
const pull = { action: 'pull', subject: 'Release' } as const;

export const releaseRoutes = {
  getRelease: defineRoute({ method: 'get', path, summary: 'One release', access: read, scope: 'read', params: ofRelease, response: release }),
  getReleaseBeam: defineRoute({ method: 'get', path: `${path}/beam`, summary: 'Stamps, weights and split', access: read, scope: 'read', params: ofRelease, response: beam }),
  getReleaseValues: defineRoute({ method: 'get', path: `${path}/values`, summary: 'Values of one column, mode or the mean of one field', access: read, scope: 'read', params: ofRelease, query: z.object({ of: z.enum(['column', 'mode', 'mean']), index: wholeNumber.default(0), field: z.string() }), response: fieldValues }),
  getReleaseFile: defineRoute({ method: 'get', path: `${path}/files/*path`, summary: 'A whole file of the bag (Range, ETag)', access: pull, scope: 'pull', params: ofRelease.extend({ path: z.union([z.string(), z.array(z.string())]) }), response: z.unknown(), media: 'application/octet-stream' }),
  getReleaseMatrix: defineRoute({ method: 'get', path: `${path}/matrix.npy`, summary: 'Columns and fields of the matrix as NPY, raw or weighted', access: pull, scope: 'pull', params: ofRelease, query: matrixQuery, response: z.unknown(), media: 'application/octet-stream' }),
  withdrawRelease: defineRoute({ method: 'post', path: `${path}/withdrawal`, summary: 'Withdraw a release; pulls then fail with the reason', access: { action: 'withdraw', subject: 'Release' }, params: ofRelease, body: z.object({ reason }), response: release }),
  listPulls: defineRoute({ method: 'get', path: `${path}/pulls`, summary: 'Who pulled this release', access: { action: 'read', subject: 'Pull' }, params: ofRelease, response: z.object({ pulls: z.array(z.object({ by: person, at: timestamp, what: z.string(), bytes: z.number() })) }) }),
};
