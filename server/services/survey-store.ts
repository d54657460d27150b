/** Surveys in storage: packed with v8 (typed arrays as they are) and gzip, by content; the row says for which reading and grid. */
import { createHash } from 'node:crypto';
import { promisify } from 'node:util';
import { deserialize, serialize } from 'node:v8';
import { gunzip, gzip } from 'node:zlib';
import { eq, sql } from 'drizzle-orm';
import type { Reading } from '#contract/reading.ts';
import type { Queryable } from '../db/database.ts';
import { storedObject, survey as surveyTable } from '../db/schema/index.ts';
import type { Survey } from '../engine/survey.ts';
import { canonicalJson } from './canonical-json.ts';
import type { App } from './context.ts';

/** Raised when the pass collects more: surveys of an earlier form are collected anew. */
const form = 1;
const pack = promisify(gzip), unpack = promisify(gunzip);

export function readingHash(reading: Reading): string {
  return createHash('sha256').update(canonicalJson(reading)).digest('hex');
}

export function sameReading(one: Reading, other: Reading): boolean {
  return canonicalJson(one) === canonicalJson(other);
}

/** Equal for grids that are equal to the last bit; null without a grid. */
export function gridHash(survey: Survey): string | null {
  const axes = survey.axes.filter((axis) => axis.name !== 'component');
  if (axes.length === 0) return null;
  const hash = createHash('sha256');
  for (const { name, count, nodes } of axes) {
    hash.update(`${name} ${count} ${nodes?.length ?? 'unknown'}\n`);
    if (nodes) hash.update(nodes);
  }
  return hash.digest('hex');
}

export interface PackedSurvey {
  object: string;
  bytes: number;
}

/** Stores the bytes; the row is written by `keepSurvey` in the transaction of what was found. */
export async function packSurvey(app: App, survey: Survey): Promise<PackedSurvey> {
  const bytes = await pack(serialize({ form, survey }), { level: 3 });
  return { object: await app.storage.put(bytes), bytes: bytes.length };
}

export async function keepSurvey(tx: Queryable, archiveId: string, survey: Survey, packed: PackedSurvey): Promise<void> {
  const values = { archiveId, readingHash: readingHash(survey.reading), gridHash: gridHash(survey), object: packed.object };
  await tx.insert(storedObject).values({ sha256: packed.object, bytes: packed.bytes }).onConflictDoNothing();
  await tx.insert(surveyTable).values(values).onConflictDoUpdate({ target: surveyTable.archiveId, set: { ...values, collectedAt: sql`now()` } });
}

// Unpacked surveys of late, since a page asks for beam, weights and statistics at once.
const recent = new Map<string, Survey>();
const kept = 8;

async function unpackSurvey(app: App, object: string): Promise<Survey | null> {
  const known = recent.get(object);
  if (known) return known;
  const held = deserialize(await unpack(await app.storage.get(object))) as { form: number; survey: Survey };
  if (held.form !== form) return null;
  recent.set(object, held.survey);
  if (recent.size > kept) recent.delete(recent.keys().next().value as string);
  return held.survey;
}

/** null when the archive has not been surveyed, or (with `reading`) was surveyed with another reading. */
export async function loadSurvey(app: App, archiveId: string, reading?: Reading): Promise<Survey | null> {
  const [row] = await app.db.select().from(surveyTable).where(eq(surveyTable.archiveId, archiveId));
  if (!row || (reading && row.readingHash !== readingHash(reading))) return null;
  return unpackSurvey(app, row.object);
}
