/** The connection to PostgreSQL: one pool a process; `Transaction` is what services hand to repositories. */
import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import pg from 'pg';
import * as schema from './schema/index.ts';

export type Database = NodePgDatabase<typeof schema> & { $client: pg.Pool };
export type Transaction = Parameters<Parameters<Database['transaction']>[0]>[0];
/** Either: what a repository takes. */
export type Queryable = Database | Transaction;

export function openDatabase(url: string, options: { max?: number } = {}): Database {
  const pool = new pg.Pool({ connectionString: url, max: options.max ?? 12, application_name: 'pennyweight' });
  // An idle connection that breaks (the database restarts) must not end the process; the next query reports it.
  pool.on('error', () => undefined);
  return drizzle(pool, { schema }) as Database;
}
