/** Walks the hash chain outside the database: every hash is computed again with node:crypto, in pages of bounded size. */
import { createHash } from 'node:crypto';
import { sql } from 'drizzle-orm';
import type { z } from 'zod';
import type { chainVerdict } from '#contract/operation.ts';
import type { Database } from '../db/database.ts';
import { authorise, type Caller } from './context.ts';

const pageSize = 5000;

/** Whoever may verify entries of any campaign may walk the chain: it is one for all. */
export function mayVerify(caller: Caller): void {
  if (!caller.ability.can('verify', 'AuditEntry')) authorise(caller, 'verify', 'AuditEntry', {});
}

interface Row extends Record<string, unknown> {
  seq: string;
  canonical: string;
  prev_hash: string;
  hash: string;
}

/** A link noted outside the database at an earlier time. */
export interface KnownLink {
  seq: number;
  hash: string;
}

/**
 * The chain alone cannot tell that its end was cut off, or that all entries from some number on were hashed anew: that takes a link which
 * was noted elsewhere before (`known`).
 */
export async function verifyChain(db: Database, known: KnownLink | null = null): Promise<z.infer<typeof chainVerdict>> {
  let expected = '0'.repeat(64), seq = 0;
  const broken = (message: string) => ({ intact: false, entries: seq, brokenAt: seq + 1, message, head: expected });
  for (;;) {
    const { rows } = await db.execute<Row>(sql`
      select seq, prev_hash, hash, jsonb_build_array(seq, to_char(at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"'), actor_id, actor_name, via, action,
        object_type, object_id, label, campaign_id, before, after, reason, request_id)::text as canonical
      from audit_log where seq > ${seq} order by seq limit ${pageSize}`);
    for (const row of rows) {
      if (Number(row.seq) !== seq + 1) return broken(`Entry ${seq + 1} is missing: the next one is ${row.seq}.`);
      if (row.prev_hash !== expected) return broken(`Entry ${row.seq} does not follow the entry before it: its link is not that entry's hash.`);
      const hash = createHash('sha256').update(`${row.prev_hash}\n${row.canonical}`).digest('hex');
      if (hash !== row.hash) return broken(`Entry ${row.seq} was altered: its content does not give its hash.`);
      if (known?.seq === seq + 1 && known.hash !== hash) return broken(`Entry ${row.seq} is not the one that was noted: the log was written anew from there or before.`);
      expected = row.hash;
      seq = Number(row.seq);
    }
    if (rows.length < pageSize) break;
  }
  if (known && known.seq > seq) return { ...broken(`Entry ${known.seq} was noted, but the log ends with ${seq}: its end was cut off.`), brokenAt: known.seq };
  return { intact: true, entries: seq, brokenAt: null, message: `All ${seq} entries are in order, and each follows from the one before.`, head: expected };
}
