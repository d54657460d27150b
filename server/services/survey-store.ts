/** Surveys in storage: packed with v8 (typed arrays as they are) and gzip, by content; the row says for which reading. */
import { createHash } from 'node:crypto';
import { deserialize, serialize } from 'node:v8';
import { gunzipSync, gzipSync } from 'node:zlib';
import { eq, sql } from 'drizzle-orm';
import type { Reading } from '#contract/reading.ts';
import type { Queryable } from '../db/database.ts';
import { survey as surveyTable } from '../db/schema/index.ts';
import type { Survey } from '../engine/survey.ts';
import type { App } from './context.ts';

export function readingHash(reading: Reading): string {
  return createHash('sha256').update(JSON.stringify(reading)).digest('hex');
}

/** Stores the bytes; the row is written by `keepSurvey` in the transaction of what was found. */
export async function packSurvey(app: App, survey: Survey): Promise<string> {
  return app.storage.put(gzipSync(serialize(survey), { level: 3 }));
}

export async function keepSurvey(tx: Queryable, archiveId: string, reading: Reading, object: string): Promise<void> {
  const values = { archiveId, readingHash: readingHash(reading), object };
  await tx.insert(surveyTable).values(values).onConflictDoUpdate({ target: surveyTable.archiveId, set: { ...values, collectedAt: sql`now()` } });
}

// Unpacked surveys of late, since a page asks for beam, weights and statistics at once.
const recent = new Map<string, Survey>();
const kept = 8;

/** null when the archive has not been surveyed, or (with `reading`) was surveyed with another reading. */
export async function loadSurvey(app: App, archiveId: string, reading?: Reading): Promise<Survey | null> {
  const [row] = await app.db.select().from(surveyTable).where(eq(surveyTable.archiveId, archiveId));
  if (!row || (reading && row.readingHash !== readingHash(reading))) return null;
  const known = recent.get(row.object);
  if (known) return known;
  const survey = deserialize(gunzipSync(await app.storage.get(row.object))) as Survey;
  recent.set(row.object, survey);
  if (recent.size > kept) recent.delete(recent.keys().next().value!);
  return survey;
}
