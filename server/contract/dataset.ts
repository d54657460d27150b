/** Datasets, drafts and their review. */
import { z } from 'zod';
import { storedFinding } from './archive.ts';
import { recipe, splitPart } from './recipe.ts';
import { defineRoute } from './route.ts';
import { beam, fieldValues, findingCounts, id, name, person, reason, sha256, slug, timestamp, wholeNumber } from './shape.ts';
import { spaceRuleResult, spectrumResult, timeRuleId, timeRuleResult } from './weights.ts';

export const draftStates = ['draft', 'submitted', 'returned', 'approved', 'released', 'superseded', 'withdrawn'] as const;
export const draftState = z.enum(draftStates);
export type DraftState = z.infer<typeof draftState>;

/** One field of a matrix: its rows are [from, from + count). */
export const matrixField = z.object({ name: z.string(), unit: z.string().nullable(), from: z.number().int(), count: z.number().int(), shape: z.array(z.number().int()) });
/** One record (run) of a matrix: its columns are [from, from + count). */
export const matrixRecord = z.object({ archive: id, run: z.string(), from: z.number().int(), count: z.number().int(), parameters: z.record(z.string(), z.number()) });

/** What a build made; all that pages and releases say of the matrix. */
export const buildSummary = z.object({
  rows: z.number().int(), columns: z.number().int(), type: z.enum(['float32', 'float64']), bytes: z.number(),
  matrixSha256: sha256, recipeSha256: sha256,
  fields: z.array(matrixField), records: z.array(matrixRecord),
  timeRule: timeRuleId, spaceRule: spaceRuleResult, duration: z.number(),
  centred: z.string(), castError: z.number(),
  split: z.array(z.object({ part: splitPart, columns: z.number().int() })),
  spectrum: spectrumResult, modes: z.number().int(),
  steps: z.array(z.object({ step: z.string(), before: z.string(), after: z.string(), sentence: z.string() })),
  builtAt: timestamp,
});
export type BuildSummary = z.infer<typeof buildSummary>;

export const datasetSummary = z.object({
  id, campaign: slug, campaignId: id, slug, title: z.string(), description: z.string(), createdBy: person, createdAt: timestamp,
  latestRelease: z.object({ version: z.number().int(), state: z.string(), rows: z.number(), columns: z.number(), releasedAt: timestamp }).nullable(),
  openDrafts: z.number().int(), fields: z.array(z.string()),
});
export const draftSummary = z.object({
  id, number: z.number().int(), state: draftState, createdBy: person, createdAt: timestamp, updatedAt: timestamp,
  campaign: slug, campaignId: id, dataset: slug, datasetTitle: z.string(), built: z.boolean(), findings: findingCounts, releaseVersion: z.number().int().nullable(),
});
export type DraftSummary = z.infer<typeof draftSummary>;
export const releaseSummary = z.object({
  id, version: z.number().int(), state: z.enum(['released', 'superseded', 'withdrawn']), rows: z.number(), columns: z.number(), bytes: z.number(),
  approvedBy: person, builtBy: person, releasedAt: timestamp,
});
export const dataset = datasetSummary.extend({ drafts: z.array(draftSummary), releases: z.array(releaseSummary) });
export type Dataset = z.infer<typeof dataset>;

export const draft = draftSummary.extend({
  recipe, version: z.number().int(),
  /** the recipe changed since the build */
  stale: z.boolean(),
  build: buildSummary.nullable(), jobId: id.nullable(),
  makers: z.array(person),
  history: z.array(z.object({ at: timestamp, by: person, what: z.string(), reason: z.string().nullable() })),
  sources: z.array(z.object({ archive: id, run: z.string(), name: z.string(), sha256, state: z.string(), handedInBy: person, findings: findingCounts })),
});
export type Draft = z.infer<typeof draft>;

/** The recipe applied to the stamps only: nothing is computed on the data. */
export const preview = z.object({
  valid: z.boolean(),
  problems: z.array(z.object({ step: z.number().int().nullable(), code: z.string(), message: z.string() })),
  steps: z.array(z.object({ step: z.string(), before: z.number(), after: z.number(), sentence: z.string() })),
  rows: z.number().nullable(), columns: z.number().nullable(), bytes: z.number().nullable(),
  beam: beam.nullable(),
  rules: z.array(timeRuleResult), suggestion: z.object({ rule: z.string(), reason: z.string() }).nullable(),
});
export type Preview = z.infer<typeof preview>;

export const approval = z.object({
  note: z.string().trim().max(2000).default(''),
  licence: z.string().trim().min(1, 'give a licence (an SPDX id or your own text)').max(200),
  handlingLabel: z.string().trim().min(1, 'give a handling label').max(80),
  contact: z.string().trim().min(1, 'say who answers questions').max(200),
});
export type Approval = z.infer<typeof approval>;

const inCampaign = z.object({ campaign: slug });
const ofDataset = inCampaign.extend({ dataset: slug });
const ofDraft = z.object({ draft: id });

export const datasetRoutes = {
  listDatasets: defineRoute({ method: 'get', path: '/api/datasets', summary: 'Datasets that I may see', access: 'signed-in', scope: 'read', query: z.object({ campaign: slug.optional(), q: z.string().optional() }), response: z.object({ datasets: z.array(datasetSummary) }) }),
  createDataset: defineRoute({ method: 'post', path: '/api/campaigns/:campaign/datasets', summary: 'Begin a dataset', access: { action: 'create', subject: 'Dataset' }, params: inCampaign, body: z.object({ slug, title: name, description: z.string().trim().max(4000).default('') }), response: dataset, status: 201 }),
  getDataset: defineRoute({ method: 'get', path: '/api/campaigns/:campaign/datasets/:dataset', summary: 'One dataset with drafts and releases', access: { action: 'read', subject: 'Dataset' }, scope: 'read', params: ofDataset, response: dataset }),
  createDraft: defineRoute({ method: 'post', path: '/api/campaigns/:campaign/datasets/:dataset/drafts', summary: 'Begin a draft from a recipe', access: { action: 'create', subject: 'Draft' }, params: ofDataset, body: z.object({ recipe }), response: draft, status: 201 }),
  getDraft: defineRoute({ method: 'get', path: '/api/drafts/:draft', summary: 'One draft', access: { action: 'read', subject: 'Draft' }, scope: 'read', params: ofDraft, response: draft }),
  putRecipe: defineRoute({ method: 'put', path: '/api/drafts/:draft/recipe', summary: 'Change the recipe', access: { action: 'update', subject: 'Draft' }, params: ofDraft, body: z.object({ recipe, version: z.number().int() }), response: draft }),
  previewRecipe: defineRoute({ method: 'post', path: '/api/campaigns/:campaign/recipe-preview', summary: 'What a recipe would do to the record, before anything is computed', access: { action: 'create', subject: 'Draft' }, params: inCampaign, body: z.object({ recipe: z.unknown() }), response: preview }),
  buildDraft: defineRoute({ method: 'post', path: '/api/drafts/:draft/build', summary: 'Build the matrix as a job', access: { action: 'build', subject: 'Draft' }, params: ofDraft, response: draft, status: 202 }),
  listDraftFindings: defineRoute({ method: 'get', path: '/api/drafts/:draft/findings', summary: 'Findings of the draft and of its sources', access: { action: 'read', subject: 'Draft' }, scope: 'read', params: ofDraft, response: z.object({ findings: z.array(storedFinding.extend({ archive: id.nullable(), archiveName: z.string().nullable(), settledBy: z.string().nullable() })) }) }),
  getDraftBeam: defineRoute({ method: 'get', path: '/api/drafts/:draft/beam', summary: 'Stamps, weights and split of the built matrix', access: { action: 'read', subject: 'Draft' }, scope: 'read', params: ofDraft, response: beam }),
  getDraftValues: defineRoute({
    method: 'get', path: '/api/drafts/:draft/values', summary: 'Values of one column or one mode of one field', access: { action: 'read', subject: 'Draft' }, scope: 'read', params: ofDraft,
    query: z.object({ of: z.enum(['column', 'mode', 'mean']), index: wholeNumber.default(0), field: z.string() }), response: fieldValues,
  }),
  submitDraft: defineRoute({ method: 'post', path: '/api/drafts/:draft/submission', summary: 'Hand the draft to the stewards', access: { action: 'submit', subject: 'Draft' }, params: ofDraft, body: z.object({ note: z.string().trim().max(2000).default('') }), response: draft }),
  returnDraft: defineRoute({ method: 'post', path: '/api/drafts/:draft/return', summary: 'Return the draft with reasons', access: { action: 'review', subject: 'Draft' }, params: ofDraft, body: z.object({ reason }), response: draft }),
  approveDraft: defineRoute({ method: 'post', path: '/api/drafts/:draft/approval', summary: 'Approve the draft: a release is made', access: { action: 'review', subject: 'Draft' }, params: ofDraft, body: approval, response: draft, status: 202 }),
  listReviews: defineRoute({ method: 'get', path: '/api/reviews', summary: 'Drafts that wait for a steward, and what I may decide', access: 'signed-in', response: z.object({ drafts: z.array(draftSummary.extend({ mayReview: z.boolean(), whyNot: z.string().nullable() })) }) }),
};
