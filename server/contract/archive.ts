/** Deliveries (uploads on their way), archives, readings and findings. Bytes travel by tus at /api/uploads. */
import { z } from 'zod';
import { finding } from './finding.ts';
import { archiveContents, archiveFormat, reading } from './reading.ts';
import { defineRoute } from './route.ts';
import { beam, fieldValues, findingCounts, id, name, numbers, page, person, reason, sha256, slug, timestamp, wholeNumber } from './shape.ts';
import { timeRuleResult } from './weights.ts';

export const parameters = z.record(z.string().min(1), z.number().finite());

export const newDelivery = z.object({
  run: name,
  solver: z.string().trim().max(120).default(''),
  parameters: parameters.default({}),
  note: z.string().trim().max(2000).default(''),
  files: z.array(z.object({ name: z.string().min(1).max(255), bytes: z.number().int().positive(), sha256: sha256.nullable().default(null) })).min(1).max(5000),
});
export const deliveryFile = z.object({
  id, name: z.string(), bytes: z.number(), received: z.number(), sha256: sha256.nullable(), announcedSha256: sha256.nullable(),
  state: z.enum(['waiting', 'receiving', 'verified', 'refused']), problem: z.string().nullable(),
});
/** open -> complete (became an archive) | refused (a file failed verification) | cancelled | expired */
export const delivery = z.object({
  id, campaign: slug, run: z.string(), solver: z.string(), parameters, note: z.string(),
  state: z.enum(['open', 'complete', 'refused', 'cancelled', 'expired']), problem: z.string().nullable(),
  files: z.array(deliveryFile), archive: id.nullable(), createdBy: person, createdAt: timestamp, updatedAt: timestamp, expiresAt: timestamp,
  findings: z.array(finding),
});
export type Delivery = z.infer<typeof delivery>;
/** tus Upload-Metadata keys: `delivery`, `file` (id of the announced file), `filename`. */
export const tusPath = '/api/uploads';

export const archiveSummary = z.object({
  id, campaign: slug, campaignId: id, run: z.string(), solver: z.string(), name: z.string(), bytes: z.number(), format: archiveFormat.nullable(),
  /** checking: a job reads it; checked: findings stand; unreadable: it could not be read (a finding says why) */
  state: z.enum(['checking', 'checked', 'unreadable', 'withdrawn']),
  layout: z.string().nullable(), snapshots: z.number().nullable(), nodes: z.number().nullable(), fields: z.array(z.string()),
  timeFrom: z.number().nullable(), timeTo: z.number().nullable(),
  findings: findingCounts, createdBy: person, createdAt: timestamp,
});
export type ArchiveSummary = z.infer<typeof archiveSummary>;

export const storedFinding = finding.extend({
  /** id of the row; `id` stays the check's id */
  findingId: id,
  state: z.enum(['open', 'waived']),
  waiver: z.object({ reason: z.string(), by: person, at: timestamp }).nullable(),
});
export type StoredFinding = z.infer<typeof storedFinding>;

export const fieldStatistics = z.object({
  path: z.string(), name: z.string(), unit: z.string().nullable(), dtype: z.string(), snapshots: z.number(), nodes: z.number(),
  min: numbers, max: numbers, mean: numbers, norm: numbers, nonFinite: numbers, stepChange: numbers,
});

export const archive = archiveSummary.extend({
  files: z.array(z.object({ name: z.string(), bytes: z.number(), sha256 })),
  parameters, note: z.string(), jobId: id.nullable(),
  readingSource: z.enum(['proposed', 'saved', 'corrected']).nullable(),
  usedIn: z.array(z.object({ dataset: z.string(), draft: id, number: z.number(), state: z.string() })),
  withdrawnReason: z.string().nullable(),
});
export type Archive = z.infer<typeof archive>;

export const archiveReading = z.object({
  reading, proposal: reading, contents: archiveContents, source: z.enum(['proposed', 'saved', 'corrected']),
  savedFrom: z.string().nullable(),
  /** what does not fit, when a saved reading was tried */
  misfits: z.array(z.object({ path: z.string(), expected: z.string(), actual: z.string(), message: z.string() })),
});
export const readingTrial = z.object({
  misfits: archiveReading.shape.misfits, snapshots: z.number().nullable(), nodes: z.number().nullable(),
  stamps: z.object({ from: z.number(), to: z.number(), count: z.number() }).nullable(),
});

export const savedReading = z.object({ id, solver: z.string(), reading, savedBy: person, savedAt: timestamp, version: z.number().int() });

const inCampaign = z.object({ campaign: slug });
const ofArchive = z.object({ archive: id });

export const archiveRoutes = {
  createDelivery: defineRoute({ method: 'post', path: '/api/campaigns/:campaign/deliveries', summary: 'Announce the files of one archive before sending them', access: { action: 'hand-in', subject: 'Delivery' }, scope: 'hand-in', params: inCampaign, body: newDelivery, response: delivery, status: 201 }),
  listDeliveries: defineRoute({ method: 'get', path: '/api/campaigns/:campaign/deliveries', summary: 'Deliveries on their way or refused', access: { action: 'read', subject: 'Campaign' }, scope: 'hand-in', params: inCampaign, response: z.object({ deliveries: z.array(delivery) }) }),
  getDelivery: defineRoute({ method: 'get', path: '/api/deliveries/:delivery', summary: 'One delivery', access: { action: 'read', subject: 'Delivery' }, scope: 'hand-in', params: z.object({ delivery: id }), response: delivery }),
  cancelDelivery: defineRoute({ method: 'delete', path: '/api/deliveries/:delivery', summary: 'Give a delivery up and remove what was received', access: { action: 'cancel', subject: 'Delivery' }, scope: 'hand-in', params: z.object({ delivery: id }), response: z.null(), status: 204 }),
  listArchives: defineRoute({
    method: 'get', path: '/api/campaigns/:campaign/archives', summary: 'Archives of a campaign', access: { action: 'read', subject: 'Campaign' }, scope: 'read', params: inCampaign,
    query: page.extend({ q: z.string().optional(), state: z.string().optional(), severity: z.string().optional() }), response: z.object({ archives: z.array(archiveSummary), total: z.number() }),
  }),
  getArchive: defineRoute({ method: 'get', path: '/api/archives/:archive', summary: 'One archive', access: { action: 'read', subject: 'Archive' }, scope: 'read', params: ofArchive, response: archive }),
  withdrawArchive: defineRoute({ method: 'post', path: '/api/archives/:archive/withdrawal', summary: 'Withdraw an archive from further use', access: { action: 'withdraw', subject: 'Archive' }, params: ofArchive, body: z.object({ reason }), response: archive }),
  getArchiveReading: defineRoute({ method: 'get', path: '/api/archives/:archive/reading', summary: 'What each array means, why, and what the container holds', access: { action: 'read', subject: 'Archive' }, scope: 'read', params: ofArchive, response: archiveReading }),
  tryReading: defineRoute({ method: 'post', path: '/api/archives/:archive/reading/trial', summary: 'What a corrected reading would do to shapes and stamps', access: { action: 'correct', subject: 'Archive' }, params: ofArchive, body: z.object({ reading }), response: readingTrial }),
  putArchiveReading: defineRoute({ method: 'put', path: '/api/archives/:archive/reading', summary: 'Correct the reading; the archive is checked again', access: { action: 'correct', subject: 'Archive' }, params: ofArchive, body: z.object({ reading, reason, saveForSolver: z.boolean().default(false) }), response: archive, status: 202 }),
  putRunParameters: defineRoute({ method: 'put', path: '/api/archives/:archive/parameters', summary: 'Give or correct the parameter values of the run', access: { action: 'correct', subject: 'Archive' }, params: ofArchive, body: z.object({ parameters, reason }), response: archive, status: 202 }),
  recheckArchive: defineRoute({ method: 'post', path: '/api/archives/:archive/check', summary: 'Check again', access: { action: 'check', subject: 'Archive' }, params: ofArchive, response: archive, status: 202 }),
  listSavedReadings: defineRoute({ method: 'get', path: '/api/campaigns/:campaign/readings', summary: 'Readings saved per solver', access: { action: 'read', subject: 'Campaign' }, scope: 'read', params: inCampaign, response: z.object({ readings: z.array(savedReading) }) }),
  listArchiveFindings: defineRoute({ method: 'get', path: '/api/archives/:archive/findings', summary: 'Findings of an archive', access: { action: 'read', subject: 'Archive' }, scope: 'read', params: ofArchive, response: z.object({ findings: z.array(storedFinding) }) }),
  getArchiveStatistics: defineRoute({ method: 'get', path: '/api/archives/:archive/statistics', summary: 'Per-snapshot statistics of each field', access: { action: 'read', subject: 'Archive' }, scope: 'read', params: ofArchive, response: z.object({ fields: z.array(fieldStatistics) }) }),
  getArchiveBeam: defineRoute({ method: 'get', path: '/api/archives/:archive/beam', summary: 'Stamps, weights and marks', access: { action: 'read', subject: 'Archive' }, scope: 'read', params: ofArchive, query: z.object({ rule: z.string().optional() }), response: beam }),
  getArchiveWeights: defineRoute({ method: 'get', path: '/api/archives/:archive/weights', summary: 'Every time rule judged on the stamps', access: { action: 'read', subject: 'Archive' }, scope: 'read', params: ofArchive, response: z.object({ chosen: z.string().nullable(), reason: z.string(), rules: z.array(timeRuleResult) }) }),
  getArchiveSnapshot: defineRoute({
    method: 'get', path: '/api/archives/:archive/snapshot', summary: 'Values of one snapshot of one field', access: { action: 'read', subject: 'Archive' }, scope: 'read', params: ofArchive,
    query: z.object({ field: z.string(), index: wholeNumber }), response: fieldValues,
  }),
  getArchiveFile: defineRoute({ method: 'get', path: '/api/archives/:archive/files/:position', summary: 'Download an archive file as it was handed in (Range)', access: { action: 'pull', subject: 'Archive' }, scope: 'pull', params: ofArchive.extend({ position: wholeNumber }), response: z.unknown(), media: 'application/octet-stream' }),
  waiveFinding: defineRoute({ method: 'put', path: '/api/findings/:finding/waiver', summary: 'Waive a caution with a reason', access: { action: 'waive', subject: 'Finding' }, params: z.object({ finding: id }), body: z.object({ reason }), response: storedFinding }),
  revokeWaiver: defineRoute({ method: 'delete', path: '/api/findings/:finding/waiver', summary: 'Take a waiver back', access: { action: 'waive', subject: 'Finding' }, params: z.object({ finding: id }), response: storedFinding }),
};
