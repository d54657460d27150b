/** Names of people by id, for answers that speak of them. */
import { inArray } from 'drizzle-orm';
import type { Person } from '#contract/shape.ts';
import type { Queryable } from '../db/database.ts';
import { user } from '../db/schema/index.ts';

export async function peopleById(tx: Queryable, ids: (string | null)[]): Promise<(id: string) => Person> {
  const wanted = [...new Set(ids.filter((id): id is string => id !== null))];
  const rows = wanted.length === 0 ? [] : await tx.select({ id: user.id, name: user.name }).from(user).where(inArray(user.id, wanted));
  const names = new Map(rows.map((row) => [row.id, row.name]));
  return (id) => ({ id, name: names.get(id) ?? 'unknown' });
}
