/** Jobs and the audit log. */
import { bigint, doublePrecision, index, integer, jsonb, pgTable, text, timestamp, uuid } from 'drizzle-orm/pg-core';
import type { Problem } from '#contract/error.ts';
import { user } from './auth.ts';
import { campaign } from './campaign.ts';

const at = (column: string) => timestamp(column, { withTimezone: true });

/** Progress, history and cancel of what graphile-worker runs. */
export const job = pgTable('job', {
  id: uuid('id').primaryKey().defaultRandom(),
  kind: text('kind').$type<'check' | 'build' | 'release'>().notNull(),
  subjectType: text('subject_type').notNull(),
  subjectId: uuid('subject_id').notNull(),
  label: text('label').notNull(),
  campaignId: uuid('campaign_id').references(() => campaign.id),
  state: text('state').$type<'queued' | 'running' | 'done' | 'failed' | 'cancelled'>().notNull().default('queued'),
  done: doublePrecision('done').notNull().default(0),
  total: doublePrecision('total').notNull().default(0),
  unit: text('unit').notNull().default('bytes'),
  phase: text('phase').notNull().default(''),
  attempts: integer('attempts').notNull().default(0),
  problem: jsonb('problem').$type<Problem>(),
  createdBy: text('created_by').references(() => user.id),
  createdAt: at('created_at').notNull().defaultNow(),
  startedAt: at('started_at'),
  finishedAt: at('finished_at'),
}, (table) => [index('job_subject').on(table.subjectId), index('job_state').on(table.state), index('job_campaign').on(table.campaignId, table.createdAt)]);

/**
 * Append-only. seq, at, prev_hash and hash are set by the trigger audit_chain; UPDATE, DELETE and TRUNCATE are refused by triggers
 * (see drizzle/, migration audit_chain). No foreign keys: an entry outlives what it speaks of.
 */
export const auditLog = pgTable('audit_log', {
  seq: bigint('seq', { mode: 'number' }).primaryKey(),
  at: at('at').notNull(),
  actorId: text('actor_id'),
  actorName: text('actor_name').notNull(),
  via: text('via').notNull(),
  action: text('action').notNull(),
  objectType: text('object_type').notNull(),
  objectId: text('object_id').notNull(),
  label: text('label').notNull(),
  campaignId: uuid('campaign_id'),
  before: jsonb('before'),
  after: jsonb('after'),
  reason: text('reason'),
  requestId: text('request_id'),
  prevHash: text('prev_hash').notNull(),
  hash: text('hash').notNull(),
}, (table) => [
  index('audit_log_campaign').on(table.campaignId, table.seq),
  index('audit_log_object').on(table.objectType, table.objectId, table.seq),
  index('audit_log_actor').on(table.actorId, table.seq),
]);
