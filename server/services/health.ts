/** Is the service up: its version, and whether the database answers. */
import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { sql } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import type { ResponseOf } from '#contract/route.ts';
import type { routes } from '#contract/routes.ts';
import type { App } from './context.ts';

/** From the checkout's package.json, which lies at different heights above the sources and above dist/. */
function versionOfCheckout(): string {
  for (let folder = dirname(fileURLToPath(import.meta.url)); ; folder = dirname(folder)) {
    const file = join(folder, 'package.json');
    const description = existsSync(file) ? (JSON.parse(readFileSync(file, 'utf8')) as { name?: string; version?: string }) : {};
    if (description.name === 'pennyweight' && description.version) return description.version;
    if (folder === dirname(folder)) throw new PennyweightError('internal', 'The package.json of Pennyweight is missing.');
  }
}

const version = versionOfCheckout();

export async function describeHealth(app: App): Promise<ResponseOf<typeof routes.getHealth>> {
  const database = await app.db.execute(sql`select 1`).then(() => true, () => false);
  return { ok: database, version, database, demo: app.config.demo };
}
