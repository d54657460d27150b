/** Personal tokens: scope, campaign, expiry; shown once, stored as SHA-256. */
import { and, desc, eq, isNull } from 'drizzle-orm';
import type { z } from 'zod';
import type { createdToken, newToken, Token } from '#contract/account.ts';
import { PennyweightError } from '#contract/error.ts';
import { hashOfSecret, newSecret } from '../access/secret-text.ts';
import { campaign, token } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import { campaignBySlug } from './campaign-lookup.ts';
import { authorise, type App, type Caller } from './context.ts';

type Row = typeof token.$inferSelect;
const shown = (row: Row, slug: string | null): Token => ({
  id: row.id, name: row.name, start: row.start, scopes: row.scopes, campaign: slug, createdAt: row.createdAt.toISOString(), expiresAt: row.expiresAt.toISOString(), lastUsedAt: row.lastUsedAt?.toISOString() ?? null,
});

export async function listTokens(app: App, caller: Caller): Promise<Token[]> {
  const rows = await app.db.select({ token, slug: campaign.slug }).from(token).leftJoin(campaign, eq(campaign.id, token.campaignId)).where(and(eq(token.userId, caller.user.id), isNull(token.revokedAt))).orderBy(desc(token.createdAt));
  return rows.map((row) => shown(row.token, row.slug));
}

export async function createToken(app: App, caller: Caller, input: z.output<typeof newToken>): Promise<z.input<typeof createdToken>> {
  authorise(caller, 'create', 'Token', { userId: caller.user.id });
  const where = input.campaign ? await campaignBySlug(app.db, caller, input.campaign) : null;
  const secret = newSecret('pw_');
  const expiresAt = new Date(Date.now() + input.days * 24 * 3600 * 1000);
  const row = await app.db.transaction(async (tx) => {
    const [made] = await tx.insert(token).values({ userId: caller.user.id, name: input.name, start: secret.slice(0, 8), hash: hashOfSecret(secret), scopes: [...new Set(input.scopes)], campaignId: where?.id ?? null, expiresAt }).returning();
    await recordAudit(tx, caller, { action: 'token.create', objectType: 'token', objectId: made.id, label: made.name, campaignId: made.campaignId, after: { scopes: made.scopes, expiresAt } });
    return made;
  });
  return { ...shown(row, where?.slug ?? null), secret };
}

export async function revokeToken(app: App, caller: Caller, id: string): Promise<void> {
  await app.db.transaction(async (tx) => {
    const rows = /^[0-9a-f-]{36}$/i.test(id) ? await tx.update(token).set({ revokedAt: new Date() }).where(and(eq(token.id, id), eq(token.userId, caller.user.id), isNull(token.revokedAt))).returning() : [];
    if (rows.length === 0) throw new PennyweightError('not-found', 'You have no such token.');
    await recordAudit(tx, caller, { action: 'token.revoke', objectType: 'token', objectId: id, label: rows[0].name, campaignId: rows[0].campaignId });
  });
}
