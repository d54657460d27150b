/** Datasets, drafts, releases and pulls. */
import { sql } from 'drizzle-orm';
import { bigint, check, index, integer, jsonb, pgTable, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { Approval, BuildSummary, DraftState } from '#contract/dataset.ts';
import type { Recipe } from '#contract/recipe.ts';
import { user } from './auth.ts';
import { campaign } from './campaign.ts';

const at = (column: string) => timestamp(column, { withTimezone: true });
const bytes = (column: string) => bigint(column, { mode: 'number' });

export const dataset = pgTable('dataset', {
  id: uuid('id').primaryKey().defaultRandom(),
  campaignId: uuid('campaign_id').notNull().references(() => campaign.id),
  slug: text('slug').notNull(),
  title: text('title').notNull(),
  description: text('description').notNull().default(''),
  createdBy: text('created_by').notNull().references(() => user.id),
  createdAt: at('created_at').notNull().defaultNow(),
}, (table) => [uniqueIndex('dataset_slug').on(table.campaignId, table.slug)]);

export const draft = pgTable('draft', {
  id: uuid('id').primaryKey().defaultRandom(),
  datasetId: uuid('dataset_id').notNull().references(() => dataset.id),
  campaignId: uuid('campaign_id').notNull().references(() => campaign.id),
  number: integer('number').notNull(),
  state: text('state').$type<DraftState>().notNull().default('draft'),
  recipe: jsonb('recipe').$type<Recipe>().notNull(),
  recipeHash: text('recipe_hash').notNull(),
  version: integer('version').notNull().default(1),
  /** who made it: builder and those who handed in its archives; kept up to date with the recipe */
  makers: jsonb('makers').$type<string[]>().notNull().default([]),
  build: jsonb('build').$type<BuildSummary>(),
  /** of what the build was made: recipe, readings and parameters (inputsHash in services/draft-sources.ts); differs from theirs now: stale */
  buildHash: text('build_hash'),
  /** folder of the built arrays, below storage's builds */
  buildFolder: text('build_folder'),
  jobId: uuid('job_id'),
  createdBy: text('created_by').notNull().references(() => user.id),
  createdAt: at('created_at').notNull().defaultNow(),
  updatedAt: at('updated_at').notNull().defaultNow(),
  submittedBy: text('submitted_by').references(() => user.id),
  submittedAt: at('submitted_at'),
  reviewedBy: text('reviewed_by').references(() => user.id),
  reviewedAt: at('reviewed_at'),
  reviewReason: text('review_reason'),
  /** what the steward gave with the approval; the release job reads it */
  approval: jsonb('approval').$type<Approval>(),
}, (table) => [
  uniqueIndex('draft_number').on(table.datasetId, table.number),
  index('draft_state').on(table.campaignId, table.state),
  /** four eyes, held by the database too */
  check('draft_four_eyes', sql`${table.reviewedBy} is null or not (${table.makers} ? ${table.reviewedBy})`),
]);

/** Inserted when its bag is complete; immutable but for its withdrawal (a trigger holds that). */
export const release = pgTable('release', {
  id: uuid('id').primaryKey().defaultRandom(),
  datasetId: uuid('dataset_id').notNull().references(() => dataset.id),
  campaignId: uuid('campaign_id').notNull().references(() => campaign.id),
  draftId: uuid('draft_id').notNull().unique().references(() => draft.id),
  version: integer('version').notNull(),
  state: text('state').$type<'released' | 'superseded' | 'withdrawn'>().notNull().default('released'),
  build: jsonb('build').$type<BuildSummary>().notNull(),
  recipe: jsonb('recipe').$type<Recipe>().notNull(),
  files: jsonb('files').$type<{ path: string; bytes: number; sha256: string }[]>().notNull(),
  waivers: jsonb('waivers').$type<{ check: string; message: string; reason: string; by: { id: string; name: string }; at: string }[]>().notNull().default([]),
  manifestSha256: text('manifest_sha256').notNull(),
  bytes: bytes('bytes').notNull(),
  licence: text('licence').notNull(),
  handlingLabel: text('handling_label').notNull(),
  contact: text('contact').notNull(),
  note: text('note').notNull().default(''),
  datasheet: text('datasheet').notNull(),
  /** folder of the bag, below storage's releases */
  folder: text('folder').notNull(),
  builtBy: text('built_by').notNull().references(() => user.id),
  approvedBy: text('approved_by').notNull().references(() => user.id),
  approvedAt: at('approved_at').notNull(),
  releasedAt: at('released_at').notNull().defaultNow(),
  withdrawnAt: at('withdrawn_at'),
  withdrawnBy: text('withdrawn_by').references(() => user.id),
  withdrawnReason: text('withdrawn_reason'),
}, (table) => [
  uniqueIndex('release_version').on(table.datasetId, table.version),
  check('release_four_eyes', sql`${table.builtBy} <> ${table.approvedBy}`),
]);

export const pull = pgTable('pull', {
  id: uuid('id').primaryKey().defaultRandom(),
  releaseId: uuid('release_id').notNull().references(() => release.id),
  userId: text('user_id').notNull().references(() => user.id),
  via: text('via').notNull(),
  what: text('what').notNull(),
  bytes: bytes('bytes').notNull(),
  at: at('at').notNull().defaultNow(),
}, (table) => [index('pull_release').on(table.releaseId, table.at)]);
