/** Is the service up, and does its database answer. */
import { sql } from 'drizzle-orm';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import type { App } from './context.ts';
import { version } from './version.ts';

export async function describeHealth(app: App): Promise<ResponseOf<typeof routes.getHealth>> {
  const database = await app.db.execute(sql`select 1`).then(() => true, () => false);
  return { ok: database, version, database, demo: app.config.demo };
}
