/** Releases: shown, withdrawn, and who pulled them. */
import { and, desc, eq, sql } from 'drizzle-orm';
import type { Release } from '#contract/release.ts';
import { PennyweightError } from '#contract/error.ts';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import { releaseCaution } from '../engine/release/caution.ts';
import { draft, pull, release, user } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { authorise, mustSee, type App, type Caller } from './context.ts';
import { findDataset, type DatasetRow } from './datasets.ts';
import { peopleById } from './people.ts';

export type ReleaseRow = typeof release.$inferSelect;
export interface ReleaseAddress {
  campaign: string;
  dataset: string;
  version: number;
}
export interface FoundRelease {
  row: ReleaseRow;
  parent: DatasetRow;
  campaign: { slug: string; title: string };
}

export async function findRelease(app: App, caller: Caller, address: ReleaseAddress): Promise<FoundRelease> {
  const { row: parent, campaign } = await findDataset(app, caller, address.campaign, address.dataset);
  const [row] = await app.db.select().from(release).where(and(eq(release.datasetId, parent.id), eq(release.version, address.version)));
  if (!row) throw new PennyweightError('not-found', `${parent.title} has no release ${address.version}.`, { version: address.version });
  mustSee(caller, 'Release', row, 'release');
  return { row, parent, campaign };
}

export const releaseLabel = ({ row, parent }: Pick<FoundRelease, 'row' | 'parent'>) => `${parent.title}, release ${row.version}`;

export async function getRelease(app: App, caller: Caller, address: ReleaseAddress): Promise<Release> {
  const { row, parent, campaign } = await findRelease(app, caller, address);
  const person = await peopleById(app.db, [row.builtBy, row.approvedBy, row.withdrawnBy]);
  const [{ pulls }] = await app.db.select({ pulls: sql<number>`count(*)::int` }).from(pull).where(eq(pull.releaseId, row.id));
  return {
    id: row.id, version: row.version, state: row.state, rows: row.build.rows, columns: row.build.columns, bytes: row.bytes, approvedBy: person(row.approvedBy), builtBy: person(row.builtBy), releasedAt: row.releasedAt.toISOString(),
    campaign: campaign.slug, campaignId: row.campaignId, campaignTitle: campaign.title, dataset: parent.slug, title: parent.title, description: parent.description, draft: row.draftId,
    licence: row.licence, handlingLabel: row.handlingLabel, contact: row.contact, note: row.note, citation: /Cite as: (.*)/.exec(row.datasheet)?.[1] ?? '',
    build: row.build, recipe: row.recipe, files: row.files, manifestSha256: row.manifestSha256, waivers: row.waivers,
    withdrawnAt: row.withdrawnAt?.toISOString() ?? null, withdrawnReason: row.withdrawnReason, withdrawnBy: row.withdrawnBy ? person(row.withdrawnBy) : null, pulls, caution: releaseCaution, datasheet: row.datasheet,
  };
}

export async function withdrawRelease(app: App, caller: Caller, address: ReleaseAddress, reason: string): Promise<Release> {
  const found = await findRelease(app, caller, address);
  authorise(caller, 'withdraw', 'Release', found.row);
  await app.db.transaction(async (tx) => {
    const changed = await tx.update(release).set({ state: 'withdrawn', withdrawnAt: new Date(), withdrawnBy: caller.user.id, withdrawnReason: reason }).where(and(eq(release.id, found.row.id), sql`${release.state} <> 'withdrawn'`)).returning({ id: release.id });
    if (changed.length === 0) throw new PennyweightError('wrong-state', 'This release is withdrawn already.');
    await tx.update(draft).set({ state: 'withdrawn' }).where(eq(draft.id, found.row.draftId));
    await recordAudit(tx, caller, { action: 'release.withdraw', objectType: 'release', objectId: found.row.id, label: releaseLabel(found), campaignId: found.row.campaignId, before: { state: found.row.state }, after: { state: 'withdrawn' }, reason });
  });
  return getRelease(app, caller, address);
}

export async function listPulls(app: App, caller: Caller, address: ReleaseAddress): Promise<ResponseOf<typeof routes.listPulls>['pulls']> {
  const { row } = await findRelease(app, caller, address);
  authorise(caller, 'read', 'Pull', row);
  const rows = await app.db.select({ pull, name: user.name }).from(pull).innerJoin(user, eq(user.id, pull.userId)).where(eq(pull.releaseId, row.id)).orderBy(desc(pull.at)).limit(1000);
  return rows.map((each) => ({ by: { id: each.pull.userId, name: each.name }, at: each.pull.at.toISOString(), what: each.pull.what, bytes: each.pull.bytes }));
}
