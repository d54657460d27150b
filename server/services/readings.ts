/** Readings of an archive: shown, tried, corrected, and saved for the next archive of the solver. */
import { and, desc, eq } from 'drizzle-orm';
import type { z } from 'zod';
import type { Archive, archiveReading, readingTrial, savedReading as savedShape } from '#contract/archive.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Reading } from '#contract/reading.ts';
import { archive, savedReading, user } from '../db/schema/index.ts';
import { enqueueCheck, findArchive, getArchive, mustBeSettled } from './archives.ts';
import { recordAudit } from './audit.ts';
import { campaignBySlug } from './campaign-lookup.ts';
import { authorise, type App, type Caller } from './context.ts';
import { withArchive } from './reading-pool.ts';

export async function getArchiveReading(app: App, caller: Caller, id: string): Promise<z.input<typeof archiveReading>> {
  const { row } = await findArchive(app, caller, id);
  if (!row.reading || !row.contents || !row.proposal) throw new PennyweightError('wrong-state', row.state === 'unreadable' ? 'This archive cannot be read, so it has no reading.' : 'The reading is made while the archive is checked: wait until that is done.');
  const [saved] = row.savedReadingId ? await app.db.select({ solver: savedReading.solver, version: savedReading.version }).from(savedReading).where(eq(savedReading.id, row.savedReadingId)) : [];
  return { reading: row.reading, proposal: row.proposal, contents: row.contents, source: row.readingSource ?? 'proposed', savedFrom: saved ? `${saved.solver}, version ${saved.version}` : null, misfits: row.misfits };
}

/** What a reading would do to shapes and stamps; nothing is stored. */
export async function tryReading(app: App, caller: Caller, id: string, reading: Reading): Promise<z.input<typeof readingTrial>> {
  const { row } = await findArchive(app, caller, id);
  authorise(caller, 'correct', 'Archive', row);
  return withArchive(app, id, async (open) => {
    const misfits = await open.fits(reading);
    if (misfits.length > 0) return { misfits, snapshots: null, nodes: null, stamps: null };
    const { stamps } = await open.axes(reading);
    const [field] = reading.fields;
    const info = field && (await open.contents()).arrays.find((array) => array.path === field.path);
    const timeAxis = field ? field.axes.indexOf('time') : -1;
    const nodes = info ? info.shape.reduce((product, count, axis) => (axis === timeAxis ? product : product * count), 1) : null;
    const snapshots = stamps?.length ?? (info && timeAxis >= 0 ? info.shape[timeAxis] : field ? 1 : null);
    return { misfits, snapshots, nodes, stamps: stamps && stamps.length > 0 ? { from: stamps[0], to: stamps[stamps.length - 1], count: stamps.length } : null };
  });
}

export async function putArchiveReading(app: App, caller: Caller, id: string, input: { reading: Reading; reason: string; saveForSolver: boolean }): Promise<Archive> {
  const { row, run } = await findArchive(app, caller, id);
  authorise(caller, 'correct', 'Archive', row);
  await mustBeSettled(app.db, row);
  const misfits = await withArchive(app, id, (open) => open.fits(input.reading));
  if (misfits.length > 0) throw new PennyweightError('reading-mismatch', `This reading does not fit the archive: ${misfits[0].message}`, { misfits });
  if (input.saveForSolver && run.solver === '') throw new PennyweightError('invalid-input', 'The run names no solver, so its reading cannot be saved for one.');
  await app.db.transaction(async (tx) => {
    await tx.update(archive).set({ reading: input.reading, readingSource: 'corrected', misfits: [] }).where(eq(archive.id, id));
    if (input.saveForSolver) {
      const [last] = await tx.select({ version: savedReading.version }).from(savedReading).where(and(eq(savedReading.campaignId, row.campaignId), eq(savedReading.solver, run.solver))).orderBy(desc(savedReading.version)).limit(1);
      await tx.insert(savedReading).values({ campaignId: row.campaignId, solver: run.solver, version: (last?.version ?? 0) + 1, reading: input.reading, savedBy: caller.user.id });
    }
    await enqueueCheck(app, tx, caller, row);
    await recordAudit(tx, caller, { action: 'reading.correct', objectType: 'archive', objectId: id, label: row.name, campaignId: row.campaignId, before: row.reading, after: { reading: input.reading, savedForSolver: input.saveForSolver ? run.solver : null }, reason: input.reason });
  });
  return getArchive(app, caller, id);
}

export async function listSavedReadings(app: App, caller: Caller, slug: string): Promise<z.input<typeof savedShape>[]> {
  const where = await campaignBySlug(app.db, caller, slug);
  const rows = await app.db.select({ saved: savedReading, by: user.name }).from(savedReading).innerJoin(user, eq(user.id, savedReading.savedBy)).where(eq(savedReading.campaignId, where.id)).orderBy(savedReading.solver, desc(savedReading.version));
  return rows.map(({ saved, by }) => ({ id: saved.id, solver: saved.solver, reading: saved.reading, version: saved.version, savedBy: { id: saved.savedBy, name: by }, savedAt: saved.savedAt.toISOString() }));
}

/** The campaign's newest saved reading for a solver; null when there is none. */
export async function newestSavedReading(app: App, campaignId: string, solver: string): Promise<{ id: string; reading: Reading } | null> {
  if (solver === '') return null;
  const [row] = await app.db.select({ id: savedReading.id, reading: savedReading.reading }).from(savedReading).where(and(eq(savedReading.campaignId, campaignId), eq(savedReading.solver, solver))).orderBy(desc(savedReading.version)).limit(1);
  return row ?? null;
}
