/** Jobs, the audit log, the desk, storage and health. */
import { z } from 'zod';
import { archiveSummary, delivery } from './archive.ts';
import { draftSummary } from './dataset.ts';
import { problem } from './error.ts';
import { defineRoute } from './route.ts';
import { id, person, slug, timestamp, wholeNumber } from './shape.ts';

export const jobKinds = ['check', 'build', 'release'] as const;
export const job = z.object({
  id, kind: z.enum(jobKinds), subjectType: z.string(), subjectId: z.string(), label: z.string(), campaign: slug.nullable(),
  state: z.enum(['queued', 'running', 'done', 'failed', 'cancelled']), done: z.number(), total: z.number(), unit: z.string(), phase: z.string(),
  rate: z.number().nullable(), secondsLeft: z.number().nullable(), attempts: z.number().int(), problem: problem.nullable(),
  createdBy: person.nullable(), createdAt: timestamp, startedAt: timestamp.nullable(), finishedAt: timestamp.nullable(),
});
export type Job = z.infer<typeof job>;

export const auditEntry = z.object({
  seq: z.number().int(), at: timestamp, actor: person.nullable(), via: z.string(), action: z.string(),
  objectType: z.string(), objectId: z.string(), label: z.string(), campaign: slug.nullable(),
  before: z.unknown(), after: z.unknown(), reason: z.string().nullable(), hash: z.string(),
});
export type AuditEntry = z.infer<typeof auditEntry>;

export const auditQuery = z.object({
  campaign: slug.optional(), actor: z.string().optional(), action: z.string().optional(), objectType: z.string().optional(), objectId: z.string().optional(),
  from: timestamp.optional(), to: timestamp.optional(), q: z.string().max(200).optional(),
  /** rows with seq below this one */
  before: wholeNumber.optional(), limit: wholeNumber.max(1000).default(200),
});
export const chainVerdict = z.object({ intact: z.boolean(), entries: z.number(), brokenAt: z.number().nullable(), message: z.string(), head: z.string() });

export const desk = z.object({
  reviews: z.array(draftSummary), returned: z.array(draftSummary), drafts: z.array(draftSummary), archives: z.array(archiveSummary), deliveries: z.array(delivery), jobs: z.array(job),
  recent: z.array(auditEntry),
});

export const operationRoutes = {
  getHealth: defineRoute({ method: 'get', path: '/api/health', summary: 'Is the service up', access: 'public', response: z.object({ ok: z.boolean(), version: z.string(), database: z.boolean(), demo: z.boolean() }) }),
  getDesk: defineRoute({ method: 'get', path: '/api/desk', summary: 'What waits for me', access: 'signed-in', response: desk }),
  listJobs: defineRoute({ method: 'get', path: '/api/jobs', summary: 'Jobs that I may see', access: 'signed-in', query: z.object({ campaign: slug.optional(), state: z.string().optional() }), response: z.object({ jobs: z.array(job) }) }),
  getJob: defineRoute({ method: 'get', path: '/api/jobs/:job', summary: 'One job with its progress', access: { action: 'read', subject: 'Job' }, scope: 'read', params: z.object({ job: id }), response: job }),
  cancelJob: defineRoute({ method: 'post', path: '/api/jobs/:job/cancellation', summary: 'Cancel a job; nothing half-made stays', access: { action: 'cancel', subject: 'Job' }, params: z.object({ job: id }), response: job }),
  listAudit: defineRoute({ method: 'get', path: '/api/audit', summary: 'The audit log', access: 'signed-in', scope: 'read', query: auditQuery, response: z.object({ entries: z.array(auditEntry), total: z.number() }) }),
  exportAudit: defineRoute({ method: 'get', path: '/api/audit.csv', summary: 'The audit log as CSV', access: 'signed-in', scope: 'read', query: auditQuery, response: z.string(), media: 'text/csv' }),
  verifyAudit: defineRoute({ method: 'get', path: '/api/audit/verification', summary: 'Walk the hash chain', access: { action: 'verify', subject: 'AuditEntry' }, response: chainVerdict }),
  getStorage: defineRoute({ method: 'get', path: '/api/storage', summary: 'Bytes held, by campaign, and free space', access: { action: 'read', subject: 'Storage' }, response: z.object({ objects: z.number(), bytes: z.number(), freeBytes: z.number(), campaigns: z.array(z.object({ campaign: slug, title: z.string(), usedBytes: z.number(), quotaBytes: z.number() })) }) }),
};
