import { sql } from 'drizzle-orm';
import { trailEntries } from '../db/schema/reporting.ts';
import type { Transaction } from '../db/transaction.ts';
import type { Context } from '../http/route.ts';

export interface Change {
  action: string;
  subjectType: string;
  subjectId: string;
  /** One plain sentence; names people and places as a reader knows them. */
  sentence: string;
  reason?: string | undefined;
  before?: unknown;
  after?: unknown;
}

/** Number of the advisory lock that the sealer takes alone and writers share, one per organisation. */
export const trailLock = (organisationId: string) => sql`hashtextextended(${`trail:${organisationId}`}, 0)`;

/** Writes the trail row of a change inside the caller's transaction. */
export async function recordChange(
  tx: Transaction,
  context: Pick<Context, 'organisationId' | 'personId' | 'siteId'>,
  change: Change,
): Promise<void> {
  await tx.execute(sql`select pg_advisory_xact_lock_shared(${trailLock(context.organisationId)})`);
  await tx.insert(trailEntries).values({
    organisationId: context.organisationId,
    id: crypto.randomUUID(),
    siteId: context.siteId,
    personId: context.personId,
    action: change.action,
    subjectType: change.subjectType,
    subjectId: change.subjectId,
    sentence: change.sentence,
    reason: change.reason ?? null,
    before: change.before ?? null,
    after: change.after ?? null,
  });
}
