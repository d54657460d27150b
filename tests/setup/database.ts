/** Real PostgreSQL for tests: one database a file, cloned from the migrated template in about 50 ms. */
import { randomBytes } from 'node:crypto';
import { setTimeout as wait } from 'node:timers/promises';
import pg from 'pg';
import { inject } from 'vitest';
import { PennyweightError } from '#contract/error.ts';
import { openDatabases, type TestDatabase } from './open-databases.ts';

declare module 'vitest' {
  export interface ProvidedContext {
    testDatabases: { template: string; adminUrl: string; applicationUrl: string };
  }
}

export type { TestDatabase };

async function administer<Row>(sql: string, values: unknown[] = []): Promise<Row[]> {
  const client = new pg.Client({ connectionString: inject('testDatabases').adminUrl });
  await client.connect();
  try {
    return (await client.query(sql, values)).rows as Row[];
  } finally {
    await client.end();
  }
}

interface Connection {
  application_name: string;
  state: string | null;
  query: string;
}

/** A closed pool's connections take a moment to vanish from the server's list. */
async function leakedConnections(name: string): Promise<Connection[]> {
  const list = () =>
    administer<Connection>(
      `select application_name, state, query from pg_stat_activity where datname = $1 and backend_type = 'client backend'`,
      [name],
    );
  let connections = await list();
  for (let attempt = 0; attempt < 20 && connections.length > 0; attempt += 1) {
    await wait(50);
    connections = await list();
  }
  return connections;
}

export async function createTestDatabase(): Promise<TestDatabase> {
  const { template, applicationUrl } = inject('testDatabases');
  const name = `test_${randomBytes(8).toString('hex')}`;
  const url = new URL(applicationUrl);
  url.pathname = `/${name}`;
  await administer(`create database ${name} owner ${url.username} template ${template}`);
  const database: TestDatabase = {
    url: url.href,
    async drop() {
      if (!openDatabases.delete(name)) return;
      const leaked = await leakedConnections(name);
      await administer(`drop database ${name} with (force)`);
      if (leaked.length > 0) {
        const last = leaked.map(
          (each) => `${each.application_name || 'unnamed'} (${each.state}): ${each.query.slice(0, 120)}`,
        );
        throw new PennyweightError(
          'internal',
          `${leaked.length} connections to the test database were still open: end the pool or the queue before drop(). ${last.join('; ')}`,
          { leaked },
        );
      }
    },
  };
  openDatabases.set(name, database);
  return database;
}
