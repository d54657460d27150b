/** Campaigns, role assignments, invitations, runs and saved readings. */
import { sql } from 'drizzle-orm';
import { bigint, check, index, integer, jsonb, pgTable, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { MemberRole } from '#contract/access.ts';
import type { CampaignField, CampaignParameter } from '#contract/campaign.ts';
import type { CheckPolicy } from '#contract/finding.ts';
import type { Reading } from '#contract/reading.ts';
import { user } from './auth.ts';

const at = (column: string) => timestamp(column, { withTimezone: true });

export const campaign = pgTable('campaign', {
  id: uuid('id').primaryKey().defaultRandom(),
  slug: text('slug').notNull().unique(),
  title: text('title').notNull(),
  description: text('description').notNull().default(''),
  quotaBytes: bigint('quota_bytes', { mode: 'number' }).notNull(),
  fields: jsonb('fields').$type<CampaignField[]>().notNull().default([]),
  parameters: jsonb('parameters').$type<CampaignParameter[]>().notNull().default([]),
  policy: jsonb('policy').$type<CheckPolicy>().notNull().default({ thresholds: {} }),
  handlingLabel: text('handling_label').notNull().default('internal'),
  contact: text('contact').notNull().default(''),
  licence: text('licence').notNull().default(''),
  version: integer('version').notNull().default(1),
  createdBy: text('created_by').notNull().references(() => user.id),
  createdAt: at('created_at').notNull().defaultNow(),
});

/** One row a role; campaign null: the role holds in the whole organisation. */
export const roleAssignment = pgTable('role_assignment', {
  id: uuid('id').primaryKey().defaultRandom(),
  userId: text('user_id').notNull().references(() => user.id, { onDelete: 'cascade' }),
  campaignId: uuid('campaign_id').references(() => campaign.id, { onDelete: 'cascade' }),
  role: text('role').$type<MemberRole>().notNull(),
  createdAt: at('created_at').notNull().defaultNow(),
}, (table) => [
  uniqueIndex('role_assignment_one').on(table.userId, sql`coalesce(${table.campaignId}, '00000000-0000-0000-0000-000000000000'::uuid)`, table.role),
  index('role_assignment_campaign').on(table.campaignId),
  check('role_assignment_role', sql`${table.role} in ('contributor', 'steward', 'modeler', 'auditor', 'administrator')`),
]);

/** The secret is stored as its SHA-256 only. */
export const invitation = pgTable('invitation', {
  id: uuid('id').primaryKey().defaultRandom(),
  email: text('email').notNull(),
  campaignId: uuid('campaign_id').references(() => campaign.id, { onDelete: 'cascade' }),
  roles: jsonb('roles').$type<MemberRole[]>().notNull(),
  secretHash: text('secret_hash').notNull().unique(),
  invitedBy: text('invited_by').notNull().references(() => user.id),
  createdAt: at('created_at').notNull().defaultNow(),
  expiresAt: at('expires_at').notNull(),
  acceptedAt: at('accepted_at'),
  revokedAt: at('revoked_at'),
});

export const run = pgTable('run', {
  id: uuid('id').primaryKey().defaultRandom(),
  campaignId: uuid('campaign_id').notNull().references(() => campaign.id),
  name: text('name').notNull(),
  solver: text('solver').notNull().default(''),
  parameters: jsonb('parameters').$type<Record<string, number>>().notNull().default({}),
  createdAt: at('created_at').notNull().defaultNow(),
}, (table) => [uniqueIndex('run_name').on(table.campaignId, table.name)]);

/** The campaign's reading for a solver; a new row a version, the newest counts. */
export const savedReading = pgTable('saved_reading', {
  id: uuid('id').primaryKey().defaultRandom(),
  campaignId: uuid('campaign_id').notNull().references(() => campaign.id),
  solver: text('solver').notNull(),
  version: integer('version').notNull(),
  reading: jsonb('reading').$type<Reading>().notNull(),
  savedBy: text('saved_by').notNull().references(() => user.id),
  savedAt: at('saved_at').notNull().defaultNow(),
}, (table) => [uniqueIndex('saved_reading_version').on(table.campaignId, table.solver, table.version)]);
