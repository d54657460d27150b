/** Pulls: whole files of the bag and slices of the matrix. Every pull is in the release's list and in the audit log. */
import { join } from 'node:path';
import { and, eq, gt, sql } from 'drizzle-orm';
import type { z } from 'zod';
import { PennyweightError } from '#contract/error.ts';
import type { matrixQuery } from '#contract/release.ts';
import { pull } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { authorise, type App, type Caller } from './context.ts';
import { sliceMatrix, type MatrixSlice } from './matrix-slice.ts';
import { findRelease, releaseLabel, type FoundRelease, type ReleaseAddress } from './releases.ts';

/** What is asked of a file: its bytes, the rest of them after an interruption, or only its size. */
export type PullKind = 'bytes' | 'rest' | 'size';

async function releaseForPull(app: App, caller: Caller, address: ReleaseAddress): Promise<FoundRelease> {
  const found = await findRelease(app, caller, address);
  authorise(caller, 'pull', 'Release', found.row);
  if (found.row.state === 'withdrawn') throw new PennyweightError('withdrawn', `${releaseLabel(found)} was withdrawn: ${found.row.withdrawnReason} Ask ${found.row.contact}.`, { contact: found.row.contact });
  return found;
}

/** `bytes`: as announced; whether the receiver stayed to the end is not known. */
async function recordPull(app: App, caller: Caller, found: FoundRelease, what: string, bytes: number): Promise<void> {
  await app.db.transaction(async (tx) => {
    await tx.insert(pull).values({ releaseId: found.row.id, userId: caller.user.id, via: caller.via, what, bytes });
    await recordAudit(tx, caller, { action: 'release.pull', objectType: 'release', objectId: found.row.id, label: releaseLabel(found), campaignId: found.row.campaignId, after: { what, bytes } });
  });
}

/** The same person began to pull the same thing within a day: what follows is the rest of it. */
async function wasBegun(app: App, caller: Caller, found: FoundRelease, what: string): Promise<boolean> {
  const begun = await app.db.select({ id: pull.id }).from(pull).where(and(eq(pull.releaseId, found.row.id), eq(pull.userId, caller.user.id), eq(pull.what, what), gt(pull.at, sql`now() - interval '1 day'`))).limit(1);
  return begun.length > 0;
}

/** A whole file of the bag; only paths that stand in its manifests. */
export async function fileForPull(app: App, caller: Caller, address: ReleaseAddress, path: string, kind: PullKind): Promise<{ path: string; name: string; sha256: string }> {
  const found = await releaseForPull(app, caller, address);
  const file = found.row.files.find((each) => each.path === path);
  if (!file) throw new PennyweightError('not-found', `The release has no file "${path}": see its manifest.`, { path });
  const recorded = kind === 'size' || (kind === 'rest' && (await wasBegun(app, caller, found, path)));
  if (!recorded) await recordPull(app, caller, found, path, file.bytes);
  return { path: join(app.storage.folder('releases', found.row.folder), path), name: path.split('/').pop()!, sha256: file.sha256 };
}

export async function matrixForPull(app: App, caller: Caller, address: ReleaseAddress, query: z.output<typeof matrixQuery>, kind: PullKind): Promise<MatrixSlice & { name: string }> {
  const found = await releaseForPull(app, caller, address);
  const slice = await sliceMatrix(join(app.storage.folder('releases', found.row.folder), 'data'), found.row.build, query);
  if (kind !== 'size') await recordPull(app, caller, found, slice.what, slice.bytes);
  return { ...slice, name: `${address.campaign}-${address.dataset}-${address.version}.npy` };
}
