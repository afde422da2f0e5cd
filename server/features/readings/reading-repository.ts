import { and, asc, desc, eq, gt, gte, inArray, lte, lt, sql, type SQL } from 'drizzle-orm';
import type { PgTable } from 'drizzle-orm/pg-core';
import { climateDays } from '../../db/schema/climate.ts';
import { adjustments, disputes, levels, notRead, readings, roundNotes } from '../../db/schema/ledger.ts';
import type { Transaction } from '../../db/transaction.ts';

/** Rows that count: not void, and not replaced by a later row of the same table. */
export function isLive(table: PgTable & { id: unknown; isVoid: unknown; organisationId: unknown }): SQL {
  return sql`${table.isVoid} = 'no' and not exists (select 1 from ${table} newer where newer.organisation_id = ${table}.organisation_id and newer.supersedes_id = ${table}.id)`;
}

export const insertReading = (tx: Transaction, row: typeof readings.$inferInsert) =>
  tx.insert(readings).values(row);
export const insertLevel = (tx: Transaction, row: typeof levels.$inferInsert) =>
  tx.insert(levels).values(row);
export const insertNotRead = (tx: Transaction, row: typeof notRead.$inferInsert) =>
  tx.insert(notRead).values(row);
export const insertRoundNote = (tx: Transaction, row: typeof roundNotes.$inferInsert) =>
  tx.insert(roundNotes).values(row);
export const insertAdjustment = (tx: Transaction, row: typeof adjustments.$inferInsert) =>
  tx.insert(adjustments).values(row);
export const insertDispute = (tx: Transaction, row: typeof disputes.$inferInsert) =>
  tx.insert(disputes).values(row);
export const insertClimateDays = (tx: Transaction, rows: (typeof climateDays.$inferInsert)[]) =>
  tx.insert(climateDays).values(rows);

export async function findReading(tx: Transaction, id: string) {
  const [row] = await tx.select().from(readings).where(eq(readings.id, id));
  return row ?? null;
}

/** The live reading before an instant that is in the totals, or null. */
export async function lastReadingBefore(tx: Transaction, meterId: string, at: string, exceptId?: string) {
  const [row] = await tx
    .select()
    .from(readings)
    .where(
      and(
        eq(readings.meterId, meterId),
        lt(readings.observedAt, at),
        sql`${readings.answer} <> 'held'`,
        exceptId ? sql`${readings.id} <> ${exceptId}` : undefined,
        isLive(readings),
      ),
    )
    .orderBy(desc(readings.observedAt), desc(readings.sequence))
    .limit(1);
  return row ?? null;
}

/** Last reading at or before an instant, for the edges of a window. */
export async function readingAtOrBefore(tx: Transaction, meterId: string, at: string) {
  const [row] = await tx
    .select({ observedAt: readings.observedAt })
    .from(readings)
    .where(and(eq(readings.meterId, meterId), lte(readings.observedAt, at), isLive(readings)))
    .orderBy(desc(readings.observedAt))
    .limit(1);
  return row?.observedAt ?? null;
}

export async function readingAtOrAfter(tx: Transaction, meterId: string, at: string, isStrict = false) {
  const [row] = await tx
    .select({ observedAt: readings.observedAt })
    .from(readings)
    .where(
      and(
        eq(readings.meterId, meterId),
        isStrict ? gt(readings.observedAt, at) : gte(readings.observedAt, at),
        isLive(readings),
      ),
    )
    .orderBy(asc(readings.observedAt))
    .limit(1);
  return row?.observedAt ?? null;
}

export const listReadings = (tx: Transaction, meterIds: string[], from: string, to: string) =>
  tx
    .select()
    .from(readings)
    .where(
      and(
        inArray(readings.meterId, meterIds),
        gte(readings.observedAt, from),
        lte(readings.observedAt, to),
        isLive(readings),
      ),
    )
    .orderBy(asc(readings.observedAt), asc(readings.sequence));

export const listReadingsOfDays = (tx: Transaction, meterIds: string[], firstDay: string, lastDay: string) =>
  tx
    .select()
    .from(readings)
    .where(
      and(
        inArray(readings.meterId, meterIds),
        gte(readings.siteDay, firstDay),
        lte(readings.siteDay, lastDay),
        isLive(readings),
      ),
    )
    .orderBy(asc(readings.observedAt), asc(readings.sequence));

export const listAdjustments = (tx: Transaction, meterIds: string[]) =>
  tx
    .select()
    .from(adjustments)
    .where(and(inArray(adjustments.meterId, meterIds), isLive(adjustments)));

export const listDisputes = (tx: Transaction, meterIds: string[]) =>
  tx
    .select()
    .from(disputes)
    .where(and(inArray(disputes.meterId, meterIds), isLive(disputes)));

export const listLevels = (
  tx: Transaction,
  subject: { storeIds?: string[]; sumpIds?: string[] },
  from: string,
  to: string,
) =>
  tx
    .select()
    .from(levels)
    .where(
      and(
        subject.storeIds
          ? inArray(levels.storeId, subject.storeIds)
          : inArray(levels.sumpId, subject.sumpIds ?? []),
        gte(levels.observedAt, from),
        lte(levels.observedAt, to),
        isLive(levels),
      ),
    )
    .orderBy(asc(levels.observedAt), asc(levels.sequence));

export const listNotRead = (tx: Transaction, siteId: string, firstDay: string, lastDay: string) =>
  tx
    .select()
    .from(notRead)
    .where(
      and(
        eq(notRead.siteId, siteId),
        gte(notRead.siteDay, firstDay),
        lte(notRead.siteDay, lastDay),
        isLive(notRead),
      ),
    );

export const listRoundNotes = (tx: Transaction, siteId: string, lastDay: string) =>
  tx
    .select()
    .from(roundNotes)
    .where(and(eq(roundNotes.siteId, siteId), lte(roundNotes.siteDay, lastDay)))
    .orderBy(desc(roundNotes.sequence))
    .limit(10);

export const listRainDays = (tx: Transaction, stationIds: string[], firstDay: string, lastDay: string) =>
  tx
    .select()
    .from(climateDays)
    .where(
      and(
        inArray(climateDays.stationId, stationIds),
        gte(climateDays.siteDay, firstDay),
        lte(climateDays.siteDay, lastDay),
        isLive(climateDays),
      ),
    )
    .orderBy(asc(climateDays.siteDay));
