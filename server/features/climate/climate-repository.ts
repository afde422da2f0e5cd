import { and, asc, eq, inArray, sql } from 'drizzle-orm';
import { climateDays, climateGapChoices, climateMonths, stations } from '../../db/schema/climate.ts';
import type { Transaction } from '../../db/transaction.ts';
import { isLive } from '../readings/reading-repository.ts';

const rowsPerInsert = 2_000;

export const listStations = (tx: Transaction, siteId: string) =>
  tx
    .select()
    .from(stations)
    .where(eq(stations.siteId, siteId))
    .orderBy(asc(stations.priority), asc(stations.name));

export async function findOrAddStation(tx: Transaction, row: typeof stations.$inferInsert): Promise<string> {
  const [known] = await tx
    .select()
    .from(stations)
    .where(and(eq(stations.siteId, row.siteId), eq(stations.name, row.name)));
  if (known) return known.id;
  await tx.insert(stations).values(row);
  return row.id;
}

const dayColumns = {
  stationId: climateDays.stationId,
  siteDay: climateDays.siteDay,
  kind: climateDays.kind,
  accumulatedDays: climateDays.accumulatedDays,
  id: climateDays.id,
  precipitationMm: climateDays.precipitationMm,
  tMinC: climateDays.tMinC,
  tMaxC: climateDays.tMaxC,
  tMeanC: climateDays.tMeanC,
  petMm: climateDays.petMm,
  panMm: climateDays.panMm,
  windMPerS: climateDays.windMPerS,
  relativeHumidityPercent: climateDays.relativeHumidityPercent,
  sunshineHours: climateDays.sunshineHours,
};

export const listLiveDays = (
  tx: Transaction,
  stationIds: string[],
  firstDay = '0001-01-01',
  lastDay = '9999-12-31',
) =>
  tx
    .select(dayColumns)
    .from(climateDays)
    .where(
      and(
        inArray(climateDays.stationId, stationIds),
        sql`${climateDays.siteDay} between ${firstDay} and ${lastDay}`,
        isLive(climateDays),
      ),
    )
    .orderBy(asc(climateDays.siteDay));

export const listLiveMonths = (tx: Transaction, stationIds: string[]) =>
  tx
    .select()
    .from(climateMonths)
    .where(and(inArray(climateMonths.stationId, stationIds), isLive(climateMonths)))
    .orderBy(asc(climateMonths.month));

/**
 * Changes whenever a day, a month or a choice of these stations does: the rows only grow, and a sequence number is
 * never given twice.
 */
export async function climateStamp(tx: Transaction, siteId: string, stationIds: string[]): Promise<string> {
  const found = await tx.execute<{ stamp: string }>(sql`
    select concat_ws(' ',
      (select concat(count(*), ':', max(sequence)) from climate_days where ${inArray(climateDays.stationId, stationIds)}),
      (select concat(count(*), ':', max(sequence)) from climate_months where ${inArray(climateMonths.stationId, stationIds)}),
      (select concat(count(*), ':', max(sequence)) from climate_gap_choices where site_id = ${siteId})) as stamp`);
  return found.rows[0]!.stamp;
}

export async function insertDays(tx: Transaction, rows: (typeof climateDays.$inferInsert)[]): Promise<void> {
  for (let start = 0; start < rows.length; start += rowsPerInsert)
    await tx.insert(climateDays).values(rows.slice(start, start + rowsPerInsert));
}

export async function insertMonths(
  tx: Transaction,
  rows: (typeof climateMonths.$inferInsert)[],
): Promise<void> {
  for (let start = 0; start < rows.length; start += rowsPerInsert)
    await tx.insert(climateMonths).values(rows.slice(start, start + rowsPerInsert));
}

export const listDaysOfImport = (tx: Transaction, importId: string) =>
  tx
    .select()
    .from(climateDays)
    .where(and(eq(climateDays.importId, importId), isLive(climateDays)));
export const listMonthsOfImport = (tx: Transaction, importId: string) =>
  tx
    .select()
    .from(climateMonths)
    .where(and(eq(climateMonths.importId, importId), isLive(climateMonths)));

export const insertGapChoice = (tx: Transaction, row: typeof climateGapChoices.$inferInsert) =>
  tx.insert(climateGapChoices).values(row);
export const listGapChoices = (tx: Transaction, siteId: string) =>
  tx
    .select()
    .from(climateGapChoices)
    .where(eq(climateGapChoices.siteId, siteId))
    .orderBy(asc(climateGapChoices.sequence));
