import { and, desc, eq, lt } from 'drizzle-orm';
import type { TrailView } from '#shared/views/site-view.ts';
import { checkTrail } from '../../audit/trail-seals.ts';
import { trailEntries } from '../../db/schema/reporting.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context } from '../../http/route.ts';
import { listNames } from '../people/people-repository.ts';
import { siteOf } from '../sites/site-service.ts';

const pageSize = 60;

/** Newest changes of the site, a page at a time; one record's history when a subject is named. */
export async function readTrail(
  tx: Transaction,
  context: Context,
  filter: { before?: number | undefined; subject?: string | undefined },
): Promise<TrailView> {
  const names = await listNames(tx);
  const rows = await tx
    .select()
    .from(trailEntries)
    .where(
      and(
        eq(trailEntries.siteId, siteOf(context)),
        filter.before ? lt(trailEntries.sequence, filter.before) : undefined,
        filter.subject ? eq(trailEntries.subjectId, filter.subject) : undefined,
      ),
    )
    .orderBy(desc(trailEntries.sequence))
    .limit(pageSize + 1);
  return {
    rows: rows.slice(0, pageSize).map((row) => ({
      id: row.id,
      sequence: row.sequence,
      at: row.at,
      by: names.get(row.personId) ?? 'somebody who has left',
      action: row.action,
      subjectType: row.subjectType,
      subjectId: row.subjectId,
      sentence: row.sentence,
      reason: row.reason,
      before: row.before,
      after: row.after,
    })),
    nextBefore: rows.length > pageSize ? rows[pageSize - 1]!.sequence : null,
  };
}

export const readTrailCheck = (tx: Transaction, context: Context) => checkTrail(tx, context.organisationId);
