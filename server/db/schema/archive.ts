/** Deliveries on their way, stored objects, archives, what was collected of them, and findings. */
import { sql } from 'drizzle-orm';
import { bigint, check, doublePrecision, index, integer, jsonb, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { CheckId, Evidence, Finding, Remedy, Severity } from '#contract/finding.ts';
import type { ArchiveContents, ArchiveFormat, Reading } from '#contract/reading.ts';
import { user } from './auth.ts';
import { campaign, run } from './campaign.ts';

const at = (column: string) => timestamp(column, { withTimezone: true });
const bytes = (column: string) => bigint(column, { mode: 'number' });

export const delivery = pgTable('delivery', {
  id: uuid('id').primaryKey().defaultRandom(),
  campaignId: uuid('campaign_id').notNull().references(() => campaign.id),
  run: text('run').notNull(),
  solver: text('solver').notNull().default(''),
  parameters: jsonb('parameters').$type<Record<string, number>>().notNull().default({}),
  note: text('note').notNull().default(''),
  state: text('state').$type<'open' | 'complete' | 'refused' | 'cancelled' | 'expired'>().notNull().default('open'),
  problem: text('problem'),
  findings: jsonb('findings').$type<Finding[]>().notNull().default([]),
  createdBy: text('created_by').notNull().references(() => user.id),
  createdAt: at('created_at').notNull().defaultNow(),
  updatedAt: at('updated_at').notNull().defaultNow(),
  expiresAt: at('expires_at').notNull(),
}, (table) => [index('delivery_campaign').on(table.campaignId, table.state)]);

/** One announced file; its id is also the id of its tus upload. */
export const deliveryFile = pgTable('delivery_file', {
  id: uuid('id').primaryKey().defaultRandom(),
  deliveryId: uuid('delivery_id').notNull().references(() => delivery.id, { onDelete: 'cascade' }),
  position: integer('position').notNull(),
  name: text('name').notNull(),
  bytes: bytes('bytes').notNull(),
  announcedSha256: text('announced_sha256'),
  sha256: text('sha256'),
  state: text('state').$type<'waiting' | 'receiving' | 'verified' | 'refused'>().notNull().default('waiting'),
  problem: text('problem'),
}, (table) => [uniqueIndex('delivery_file_position').on(table.deliveryId, table.position)]);

/** Bytes in storage, by content. Never altered. */
export const storedObject = pgTable('stored_object', {
  sha256: text('sha256').primaryKey(),
  bytes: bytes('bytes').notNull(),
  createdAt: at('created_at').notNull().defaultNow(),
});

export const archive = pgTable('archive', {
  id: uuid('id').primaryKey().defaultRandom(),
  campaignId: uuid('campaign_id').notNull().references(() => campaign.id),
  runId: uuid('run_id').notNull().references(() => run.id),
  deliveryId: uuid('delivery_id').notNull().unique().references(() => delivery.id),
  name: text('name').notNull(),
  bytes: bytes('bytes').notNull(),
  note: text('note').notNull().default(''),
  format: text('format').$type<ArchiveFormat>(),
  state: text('state').$type<'checking' | 'checked' | 'unreadable' | 'withdrawn'>().notNull().default('checking'),
  contents: jsonb('contents').$type<ArchiveContents>(),
  proposal: jsonb('proposal').$type<Reading>(),
  reading: jsonb('reading').$type<Reading>(),
  readingSource: text('reading_source').$type<'proposed' | 'saved' | 'corrected'>(),
  savedReadingId: uuid('saved_reading_id'),
  misfits: jsonb('misfits').$type<{ path: string; expected: string; actual: string; message: string }[]>().notNull().default([]),
  layout: text('layout'),
  snapshots: integer('snapshots'),
  nodes: bytes('nodes'),
  fieldNames: jsonb('field_names').$type<string[]>().notNull().default([]),
  timeFrom: doublePrecision('time_from'),
  timeTo: doublePrecision('time_to'),
  jobId: uuid('job_id'),
  withdrawnReason: text('withdrawn_reason'),
  createdBy: text('created_by').notNull().references(() => user.id),
  createdAt: at('created_at').notNull().defaultNow(),
}, (table) => [index('archive_campaign').on(table.campaignId, table.createdAt), index('archive_run').on(table.runId)]);

export const archiveFile = pgTable('archive_file', {
  archiveId: uuid('archive_id').notNull().references(() => archive.id),
  position: integer('position').notNull(),
  name: text('name').notNull(),
  sha256: text('sha256').notNull().references(() => storedObject.sha256),
  bytes: bytes('bytes').notNull(),
}, (table) => [primaryKey({ columns: [table.archiveId, table.position] }), index('archive_file_sha256').on(table.sha256)]);

/** What the streaming pass collected (engine/survey.ts), packed with v8.serialize and gzip by services; one row an archive, replaced by a new pass. */
export const survey = pgTable('survey', {
  archiveId: uuid('archive_id').primaryKey().references(() => archive.id),
  readingHash: text('reading_hash').notNull(),
  /** equal grids have equal hashes, so that only grids that differ are loaded to be compared */
  gridHash: text('grid_hash'),
  object: text('object').notNull(),
  collectedAt: at('collected_at').notNull().defaultNow(),
});

export const finding = pgTable('finding', {
  id: uuid('id').primaryKey().defaultRandom(),
  campaignId: uuid('campaign_id').notNull().references(() => campaign.id),
  /** exactly one of the two */
  archiveId: uuid('archive_id').references(() => archive.id),
  draftId: uuid('draft_id'),
  checkId: text('check_id').$type<CheckId>().notNull(),
  severity: text('severity').$type<Severity>().notNull(),
  path: text('path'),
  message: text('message').notNull(),
  evidence: jsonb('evidence').$type<Evidence>().notNull(),
  remedy: jsonb('remedy').$type<Remedy>(),
  position: integer('position').notNull(),
  createdAt: at('created_at').notNull().defaultNow(),
  waivedReason: text('waived_reason'),
  waivedBy: text('waived_by').references(() => user.id),
  waivedAt: at('waived_at'),
}, (table) => [
  index('finding_archive').on(table.archiveId),
  index('finding_draft').on(table.draftId),
  index('finding_campaign').on(table.campaignId, table.severity),
  check('finding_of_one', sql`num_nonnulls(${table.archiveId}, ${table.draftId}) = 1`),
  check('finding_waiver', sql`${table.waivedAt} is null or (${table.severity} = 'caution' and ${table.waivedReason} is not null and ${table.waivedBy} is not null)`),
]);
