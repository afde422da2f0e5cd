import { and, asc, eq, gte, inArray, isNull, lte, sql, type SQL } from 'drizzle-orm';
import { condensate, entries, levels, loadsOut, pendingChanges, returns } from '../../db/schema/ledger.ts';
import { monthClosings } from '../../db/schema/reporting.ts';
import type { Transaction } from '../../db/transaction.ts';
import { isLive } from '../readings/reading-repository.ts';

const rowsPerInsert = 2_000;

export async function insertEntries(tx: Transaction, rows: (typeof entries.$inferInsert)[]): Promise<void> {
  for (let start = 0; start < rows.length; start += rowsPerInsert)
    await tx.insert(entries).values(rows.slice(start, start + rowsPerInsert));
}

/** Entries that stand: neither reversed nor a reversal. */
const stands: SQL = sql`${entries.reversesId} is null and not exists (select 1 from entries r where r.organisation_id = entries.organisation_id and r.reverses_id = entries.id)`;

export const listLiveEntriesOfMeter = (tx: Transaction, meterId: string, firstDay: string, lastDay: string) =>
  tx
    .select({
      id: entries.id,
      siteDay: entries.siteDay,
      basis: entries.basis,
      volumeM3: entries.volumeM3,
      fromPlaceId: entries.fromPlaceId,
      toPlaceId: entries.toPlaceId,
      factIds: entries.factIds,
    })
    .from(entries)
    .where(
      and(
        eq(entries.meterId, meterId),
        gte(entries.siteDay, firstDay),
        lte(entries.siteDay, lastDay),
        stands,
      ),
    );

/** Every entry of a span of days, reversals included, oldest first. */
export const listEntries = (tx: Transaction, siteId: string, firstDay: string, lastDay: string) =>
  tx
    .select()
    .from(entries)
    .where(and(eq(entries.siteId, siteId), gte(entries.siteDay, firstDay), lte(entries.siteDay, lastDay)))
    .orderBy(asc(entries.siteDay), asc(entries.sequence));

/** Sums per month, pair of places, meter and basis: all that totals are made of. */
export async function sumEntriesByMonth(tx: Transaction, siteId: string, firstDay: string, lastDay: string) {
  const found = await tx.execute<{
    month: string;
    from_place_id: string;
    to_place_id: string;
    meter_id: string | null;
    basis: string;
    volume_m3: string;
    day_count: string;
  }>(sql`
    select to_char(site_day, 'YYYY-MM') as month, from_place_id, to_place_id, meter_id, basis,
      sum(volume_m3)::text as volume_m3, count(distinct site_day) filter (where reverses_id is null)::text as day_count
    from entries where site_id = ${siteId} and site_day between ${firstDay} and ${lastDay}
    group by 1, 2, 3, 4, 5 having sum(volume_m3) <> 0 or count(*) filter (where reverses_id is null) > count(*) filter (where reverses_id is not null)
    order by 1`);
  return found.rows.map((row) => ({
    month: row.month,
    fromPlaceId: row.from_place_id,
    toPlaceId: row.to_place_id,
    meterId: row.meter_id,
    basis: row.basis,
    volumeM3: row.volume_m3,
    dayCount: Number(row.day_count),
  }));
}

/** The standing act of each month that was ever closed: the newest row says closed or reopened. */
export async function listMonthActs(tx: Transaction, siteId: string) {
  const rows = await tx
    .select()
    .from(monthClosings)
    .where(eq(monthClosings.siteId, siteId))
    .orderBy(asc(monthClosings.sequence));
  return new Map(rows.map((row) => [row.month, row]));
}

export async function listClosedMonths(tx: Transaction, siteId: string): Promise<Set<string>> {
  const acts = await listMonthActs(tx, siteId);
  return new Set([...acts].filter(([, row]) => row.act === 'close').map(([month]) => month));
}

export const insertPendingChange = (tx: Transaction, row: typeof pendingChanges.$inferInsert) =>
  tx.insert(pendingChanges).values(row);
export const listPendingChanges = (tx: Transaction, siteId: string) =>
  tx
    .select()
    .from(pendingChanges)
    .where(and(eq(pendingChanges.siteId, siteId), isNull(pendingChanges.postedAt)));
export const markPosted = (tx: Transaction, ids: string[], postedAt: string) =>
  tx.update(pendingChanges).set({ postedAt }).where(inArray(pendingChanges.id, ids));

/** One writer of entries and closings per site at a time, until the transaction ends. */
export const lockSiteLedger = (tx: Transaction, siteId: string) =>
  tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`ledger:${siteId}`}, 0))`);

export const insertLoadOut = (tx: Transaction, row: typeof loadsOut.$inferInsert) =>
  tx.insert(loadsOut).values(row);
export const listLoadsOut = (tx: Transaction, siteId: string, firstDay: string, lastDay: string) =>
  tx
    .select()
    .from(loadsOut)
    .where(
      and(
        eq(loadsOut.siteId, siteId),
        gte(loadsOut.siteDay, firstDay),
        lte(loadsOut.siteDay, lastDay),
        isLive(loadsOut),
      ),
    )
    .orderBy(asc(loadsOut.observedAt));
export async function findLiveTicket(tx: Transaction, siteId: string, hauler: string, ticket: string) {
  const [row] = await tx
    .select()
    .from(loadsOut)
    .where(
      and(
        eq(loadsOut.siteId, siteId),
        sql`lower(${loadsOut.hauler}) = lower(${hauler})`,
        sql`lower(${loadsOut.ticket}) = lower(${ticket})`,
        isLive(loadsOut),
      ),
    );
  return row ?? null;
}
export async function findLoadOut(tx: Transaction, id: string) {
  const [row] = await tx
    .select()
    .from(loadsOut)
    .where(and(eq(loadsOut.id, id), isLive(loadsOut)));
  return row ?? null;
}
export const findEntriesOfLoad = (tx: Transaction, loadOutId: string) =>
  tx
    .select()
    .from(entries)
    .where(and(eq(entries.loadOutId, loadOutId), stands));
export const listReturns = (tx: Transaction, siteId: string, firstDay: string, lastDay: string) =>
  tx
    .select()
    .from(returns)
    .where(
      and(
        eq(returns.siteId, siteId),
        gte(returns.siteDay, firstDay),
        lte(returns.siteDay, lastDay),
        isLive(returns),
      ),
    );

/** Condensate and wash-down led to the sumps, as it stands. */
export const listCondensate = (tx: Transaction, sumpIds: string[]) =>
  tx
    .select()
    .from(condensate)
    .where(and(inArray(condensate.sumpId, sumpIds), isLive(condensate)));

/** Levels read in the sumps, as they stand. */
export const listSumpLevels = (tx: Transaction, sumpIds: string[]) =>
  tx
    .select({ sumpId: levels.sumpId, siteDay: levels.siteDay, levelM: levels.levelM })
    .from(levels)
    .where(and(inArray(levels.sumpId, sumpIds), isLive(levels)))
    .orderBy(asc(levels.siteDay));
