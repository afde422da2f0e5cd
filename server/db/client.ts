import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import pg from 'pg';

export type Database = NodePgDatabase;

/** Pool of the application's role. Small: more busy connections than cores slow each other down. */
export function createPool(url: string, onError: (error: Error) => void): pg.Pool {
  const pool = new pg.Pool({
    connectionString: url,
    max: 10,
    connectionTimeoutMillis: 5_000,
    statement_timeout: 30_000,
    lock_timeout: 3_000,
    idle_in_transaction_session_timeout: 60_000,
  });
  // Without listeners a restart of the database would end this process.
  pool.on('error', onError);
  pool.on('connect', (client) => client.on('error', onError));
  return pool;
}

export const createDatabase = (pool: pg.Pool): Database => drizzle({ client: pool });
