/** Runs the migrations in drizzle/ once, also when several processes start at the same time (advisory lock). */
import { existsSync } from 'node:fs';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate as runMigrations } from 'drizzle-orm/node-postgres/migrator';
import { runMigrations as runQueueMigrations } from 'graphile-worker';
import pg from 'pg';
import { PennyweightError } from '#contract/error.ts';

const lockKey = 0x70_77_67_68;

/** drizzle/ lies beside server/ in the source tree and one level higher beside dist/. */
function migrationsFolder(): string {
  for (const relative of ['../../drizzle', '../../../drizzle']) {
    const folder = fileURLToPath(new URL(relative, import.meta.url));
    if (existsSync(`${folder}/meta/_journal.json`)) return folder;
  }
  throw new PennyweightError('internal', 'The migrations folder drizzle/ is missing beside the program; restore it from the repository.');
}

export async function migrate(databaseUrl: string): Promise<void> {
  const client = new pg.Client({ connectionString: databaseUrl });
  await client.connect();
  try {
    await client.query('select pg_advisory_lock($1)', [lockKey]);
    await runMigrations(drizzle(client), { migrationsFolder: migrationsFolder() });
    await runQueueMigrations({ connectionString: databaseUrl });
  } finally {
    await client.end();
  }
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
  const url = process.env.DATABASE_URL;
  if (!url) throw new PennyweightError('invalid-input', 'DATABASE_URL is not set: say which database to migrate.');
  await migrate(url);
}
