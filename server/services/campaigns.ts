/** Campaigns with their counts; opening and changing them. */
import { and, asc, eq, sql } from 'drizzle-orm';
import type { z } from 'zod';
import { about } from '#contract/access.ts';
import type { Campaign, campaignUpdate, newCampaign } from '#contract/campaign.ts';
import { PennyweightError } from '#contract/error.ts';
import { catalogue } from '../engine/checks/index.ts';
import type { Queryable } from '../db/database.ts';
import { campaign } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { campaignBySlug, type CampaignRow } from './campaign-lookup.ts';
import { authorise, type App, type Caller } from './context.ts';
import { setRoles } from './roles.ts';

interface Counts extends Record<string, unknown> {
  id: string;
  used: string;
  archives: number;
  datasets: number;
  releases: number;
  members: number;
  blocker: number;
  caution: number;
  note: number;
  waived: number;
}

/** Bytes and counts of campaigns in one statement. */
async function countsOf(tx: Queryable, ids: string[]): Promise<Map<string, Counts>> {
  if (ids.length === 0) return new Map();
  const { rows } = await tx.execute<Counts>(sql`
    select c.id,
      (select coalesce(sum(bytes), 0) from archive a where a.campaign_id = c.id) as used,
      (select count(*)::int from archive a where a.campaign_id = c.id) as archives,
      (select count(*)::int from dataset d where d.campaign_id = c.id) as datasets,
      (select count(*)::int from release r where r.campaign_id = c.id) as releases,
      (select count(distinct user_id)::int from role_assignment m where m.campaign_id = c.id) as members,
      f.blocker, f.caution, f.note, f.waived
    from campaign c
    cross join lateral (
      select count(*) filter (where severity = 'blocker')::int as blocker, count(*) filter (where severity = 'caution' and waived_at is null)::int as caution,
        count(*) filter (where severity = 'note')::int as note, count(*) filter (where waived_at is not null)::int as waived
      from finding f join archive a on a.id = f.archive_id where f.campaign_id = c.id and a.state <> 'withdrawn') f
    where c.id in (${sql.join(ids.map((id) => sql`${id}::uuid`), sql`, `)})`);
  return new Map(rows.map((row) => [row.id, row]));
}

function shown(row: CampaignRow, counts: Counts | undefined, caller: Caller): Campaign {
  return {
    id: row.id, slug: row.slug, title: row.title, description: row.description, quotaBytes: row.quotaBytes, fields: row.fields, parameters: row.parameters, policy: row.policy,
    handlingLabel: row.handlingLabel, contact: row.contact, licence: row.licence, version: row.version, createdAt: row.createdAt.toISOString(),
    usedBytes: Number(counts?.used ?? 0),
    counts: { archives: counts?.archives ?? 0, datasets: counts?.datasets ?? 0, releases: counts?.releases ?? 0, members: counts?.members ?? 0 },
    findings: { blocker: counts?.blocker ?? 0, caution: counts?.caution ?? 0, note: counts?.note ?? 0, waived: counts?.waived ?? 0 },
    myRoles: caller.principal.roles.filter((each) => each.campaignId === row.id).map((each) => each.role),
  };
}

export async function listCampaigns(app: App, caller: Caller): Promise<Campaign[]> {
  const rows = (await app.db.select().from(campaign).orderBy(asc(campaign.title))).filter((row) => caller.ability.can('read', about('Campaign', { campaignId: row.id })));
  const counts = await countsOf(app.db, rows.map((row) => row.id));
  return rows.map((row) => shown(row, counts.get(row.id), caller));
}

export async function getCampaign(app: App, caller: Caller, slug: string): Promise<Campaign> {
  const row = await campaignBySlug(app.db, caller, slug);
  return shown(row, (await countsOf(app.db, [row.id])).get(row.id), caller);
}

export async function createCampaign(app: App, caller: Caller, input: z.output<typeof newCampaign>): Promise<Campaign> {
  authorise(caller, 'create', 'Campaign', {});
  refuseDoubles(input);
  const row = await app.db.transaction(async (tx) => {
    const [made] = await tx.insert(campaign).values({ ...input, createdBy: caller.user.id }).onConflictDoNothing().returning();
    if (!made) throw new PennyweightError('conflict', `The short name "${input.slug}" is taken: choose another.`, { slug: input.slug });
    await setRoles(tx, caller.user.id, made.id, ['administrator']);
    await recordAudit(tx, caller, { action: 'campaign.open', objectType: 'campaign', objectId: made.id, label: made.title, campaignId: made.id, after: input });
    return made;
  });
  return shown(row, undefined, caller);
}

export async function updateCampaign(app: App, caller: Caller, slug: string, input: z.output<typeof campaignUpdate>): Promise<Campaign> {
  const row = await campaignBySlug(app.db, caller, slug);
  authorise(caller, 'update', 'Campaign', { campaignId: row.id });
  const { version, reason, ...change } = input;
  refuseDoubles(change);
  await app.db.transaction(async (tx) => {
    const [current] = await tx.select().from(campaign).where(and(eq(campaign.id, row.id), eq(campaign.version, version))).for('update');
    if (!current) throw new PennyweightError('stale-version', 'Somebody changed this campaign in the meantime: reload it and make your change again.', { version });
    await tx.update(campaign).set({ ...change, version: version + 1 }).where(eq(campaign.id, row.id));
    const before = Object.fromEntries(Object.keys(change).map((key) => [key, current[key as keyof CampaignRow]]));
    await recordAudit(tx, caller, { action: 'campaign.update', objectType: 'campaign', objectId: row.id, label: current.title, campaignId: row.id, before, after: change, reason });
  });
  return getCampaign(app, caller, slug);
}

/** Two fields or parameters of one name would make the reading ambiguous. */
function refuseDoubles(input: { fields?: { name: string }[]; parameters?: { name: string }[] }): void {
  for (const [kind, rows] of [['field', input.fields], ['parameter', input.parameters]] as const) {
    const names = (rows ?? []).map((row) => row.name);
    const double = names.find((name, i) => names.indexOf(name) !== i);
    if (double !== undefined) throw new PennyweightError('invalid-input', `The ${kind} "${double}" is there twice: remove one.`, { name: double });
  }
}

export function listChecks() {
  return catalogue.map((check) => ({ id: check.id, severity: check.severity, title: check.title, source: check.source, thresholds: Object.entries(check.thresholds).map(([name, threshold]) => ({ name, ...threshold })) }));
}
