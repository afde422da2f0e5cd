import { sql } from 'drizzle-orm';
import type { PgDatabase } from 'drizzle-orm/pg-core';
import type { NodePgQueryResultHKT } from 'drizzle-orm/node-postgres';
import type { Database } from './client.ts';

export type Transaction = PgDatabase<NodePgQueryResultHKT>;

export interface Wall {
  /** The organisation whose rows may be seen; null before anyone has signed in: no rows. */
  organisationId: string | null;
  personId: string | null;
}

/**
 * The only way to the database: begin, set the organisation for this transaction, work, commit.
 * The settings end with the transaction, so a pooled connection carries nothing to the next person.
 */
export function withOrganisation<T>(
  database: Database,
  wall: Wall,
  work: (tx: Transaction) => Promise<T>,
): Promise<T> {
  return database.transaction(async (tx) => {
    await tx.execute(
      sql`select set_config('app.organisation_id', ${wall.organisationId ?? ''}, true), set_config('app.person_id', ${wall.personId ?? ''}, true)`,
    );
    return work(tx);
  });
}
