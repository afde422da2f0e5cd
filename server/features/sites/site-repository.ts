import { and, asc, eq, inArray, isNull } from 'drizzle-orm';
import { memberships } from '../../db/schema/organisations.ts';
import { stations } from '../../db/schema/climate.ts';
import {
  headerShares,
  meterEvents,
  meters,
  places,
  pumpTests,
  pumps,
  storeLevels,
  stores,
  sumps,
} from '../../db/schema/metering.ts';
import {
  cellAreas,
  cells,
  coverPeriods,
  coverTypes,
  plots,
  roundPoints,
  siteDayRules,
  sites,
  wastePlaced,
} from '../../db/schema/sites.ts';
import type { Transaction } from '../../db/transaction.ts';

export async function siteExists(tx: Transaction, siteId: string): Promise<boolean> {
  const found = await tx.select({ id: sites.id }).from(sites).where(eq(sites.id, siteId));
  return found.length > 0;
}

export async function findSite(tx: Transaction, siteId: string) {
  const [site] = await tx.select().from(sites).where(eq(sites.id, siteId));
  return site ?? null;
}

/** Sites where the person holds a role: all of them with a membership for the whole organisation. */
export async function listSitesFor(tx: Transaction, personId: string) {
  const held = await tx
    .select()
    .from(memberships)
    .where(and(eq(memberships.personId, personId), isNull(memberships.endedAt)));
  const all = await tx.select().from(sites).orderBy(asc(sites.name));
  return all
    .map((site) => ({
      site,
      roles: held.filter((one) => one.siteId === null || one.siteId === site.id).map((one) => one.role),
    }))
    .filter((row) => row.roles.length > 0);
}

export const listDayRules = (tx: Transaction, siteId: string) =>
  tx
    .select()
    .from(siteDayRules)
    .where(eq(siteDayRules.siteId, siteId))
    .orderBy(asc(siteDayRules.validFromOn));

export const insertSite = (tx: Transaction, row: typeof sites.$inferInsert) => tx.insert(sites).values(row);
export const insertDayRule = (tx: Transaction, row: typeof siteDayRules.$inferInsert) =>
  tx.insert(siteDayRules).values(row);
export const moveFirstDayRule = (tx: Transaction, id: string, validFromOn: string) =>
  tx.update(siteDayRules).set({ validFromOn }).where(eq(siteDayRules.id, id));
export const updateSite = (tx: Transaction, siteId: string, row: Partial<typeof sites.$inferInsert>) =>
  tx.update(sites).set(row).where(eq(sites.id, siteId));

/** Everything a site is made of, as plain records. */
export async function readStructure(tx: Transaction, siteId: string) {
  const cellRows = await tx.select().from(cells).where(eq(cells.siteId, siteId)).orderBy(asc(cells.code));
  const cellIds = cellRows.map((cell) => cell.id);
  const plotRows = cellIds.length
    ? await tx
        .select()
        .from(plots)
        .where(and(inArray(plots.cellId, cellIds), isNull(plots.withdrawnAt)))
        .orderBy(asc(plots.fromOn), asc(plots.name))
    : [];
  const plotIds = plotRows.map((plot) => plot.id);
  const sumpRows = await tx.select().from(sumps).where(eq(sumps.siteId, siteId)).orderBy(asc(sumps.code));
  const pumpRows = sumpRows.length
    ? await tx
        .select()
        .from(pumps)
        .where(
          inArray(
            pumps.sumpId,
            sumpRows.map((sump) => sump.id),
          ),
        )
    : [];
  const meterRows = await tx.select().from(meters).where(eq(meters.siteId, siteId)).orderBy(asc(meters.code));
  const storeRows = await tx.select().from(stores).where(eq(stores.siteId, siteId)).orderBy(asc(stores.code));
  const placeRows = await tx.select().from(places).where(eq(places.siteId, siteId)).orderBy(asc(places.name));
  return {
    cells: cellRows,
    cellAreas: cellIds.length
      ? await tx
          .select()
          .from(cellAreas)
          .where(inArray(cellAreas.cellId, cellIds))
          .orderBy(asc(cellAreas.validFromOn))
      : [],
    plots: plotRows,
    coverPeriods: plotIds.length
      ? await tx
          .select()
          .from(coverPeriods)
          .where(and(inArray(coverPeriods.plotId, plotIds), isNull(coverPeriods.withdrawnAt)))
          .orderBy(asc(coverPeriods.fromOn))
      : [],
    coverTypes: await tx
      .select()
      .from(coverTypes)
      .where(eq(coverTypes.siteId, siteId))
      .orderBy(asc(coverTypes.name)),
    wastePlaced: cellIds.length
      ? await tx
          .select()
          .from(wastePlaced)
          .where(inArray(wastePlaced.cellId, cellIds))
          .orderBy(asc(wastePlaced.month))
      : [],
    places: placeRows,
    sumps: sumpRows,
    pumps: pumpRows,
    pumpTests: pumpRows.length
      ? await tx
          .select()
          .from(pumpTests)
          .where(
            inArray(
              pumpTests.pumpId,
              pumpRows.map((pump) => pump.id),
            ),
          )
      : [],
    meters: meterRows,
    meterEvents: meterRows.length
      ? await tx
          .select()
          .from(meterEvents)
          .where(
            inArray(
              meterEvents.meterId,
              meterRows.map((meter) => meter.id),
            ),
          )
          .orderBy(asc(meterEvents.observedAt))
      : [],
    stores: storeRows,
    storeLevels: storeRows.length
      ? await tx
          .select()
          .from(storeLevels)
          .where(
            inArray(
              storeLevels.storeId,
              storeRows.map((store) => store.id),
            ),
          )
          .orderBy(asc(storeLevels.levelM))
      : [],
    headerShares: placeRows.length
      ? await tx
          .select()
          .from(headerShares)
          .where(
            inArray(
              headerShares.placeId,
              placeRows.map((place) => place.id),
            ),
          )
      : [],
    stations: await tx
      .select()
      .from(stations)
      .where(eq(stations.siteId, siteId))
      .orderBy(asc(stations.priority)),
    roundPoints: await tx
      .select()
      .from(roundPoints)
      .where(eq(roundPoints.siteId, siteId))
      .orderBy(asc(roundPoints.position)),
  };
}
export type SiteStructure = Awaited<ReturnType<typeof readStructure>>;

export const insertCell = (tx: Transaction, row: typeof cells.$inferInsert) => tx.insert(cells).values(row);
export const insertCellArea = (tx: Transaction, row: typeof cellAreas.$inferInsert) =>
  tx.insert(cellAreas).values(row);
export const insertPlots = (tx: Transaction, rows: (typeof plots.$inferInsert)[]) =>
  tx.insert(plots).values(rows);
export const updateCell = (tx: Transaction, id: string, row: Partial<typeof cells.$inferInsert>) =>
  tx.update(cells).set(row).where(eq(cells.id, id));
/** Ends or withdraws plots, or lets them go on. */
export const updatePlots = (tx: Transaction, ids: string[], row: Partial<typeof plots.$inferInsert>) =>
  tx.update(plots).set(row).where(inArray(plots.id, ids));
export const insertCoverPeriods = (tx: Transaction, rows: (typeof coverPeriods.$inferInsert)[]) =>
  tx.insert(coverPeriods).values(rows);
/** Ends or withdraws covers, or lets them go on. */
export const updateCoverPeriods = (
  tx: Transaction,
  ids: string[],
  row: Partial<typeof coverPeriods.$inferInsert>,
) => tx.update(coverPeriods).set(row).where(inArray(coverPeriods.id, ids));
export const insertCoverTypes = (tx: Transaction, rows: (typeof coverTypes.$inferInsert)[]) =>
  tx.insert(coverTypes).values(rows);
export const updateCoverType = (tx: Transaction, id: string, row: Partial<typeof coverTypes.$inferInsert>) =>
  tx.update(coverTypes).set(row).where(eq(coverTypes.id, id));
export const insertWaste = (tx: Transaction, row: typeof wastePlaced.$inferInsert) =>
  tx.insert(wastePlaced).values(row);
export const insertPlaces = (tx: Transaction, rows: (typeof places.$inferInsert)[]) =>
  tx.insert(places).values(rows);
export const insertSump = (tx: Transaction, row: typeof sumps.$inferInsert) => tx.insert(sumps).values(row);
export const insertMeter = (tx: Transaction, row: typeof meters.$inferInsert) =>
  tx.insert(meters).values(row);
export const insertMeterEvent = (tx: Transaction, row: typeof meterEvents.$inferInsert) =>
  tx.insert(meterEvents).values(row);
export const insertStore = (tx: Transaction, row: typeof stores.$inferInsert) =>
  tx.insert(stores).values(row);
export const insertStoreLevels = (tx: Transaction, rows: (typeof storeLevels.$inferInsert)[]) =>
  tx.insert(storeLevels).values(rows);
export const insertStation = (tx: Transaction, row: typeof stations.$inferInsert) =>
  tx.insert(stations).values(row);
export const insertRoundPoints = (tx: Transaction, rows: (typeof roundPoints.$inferInsert)[]) =>
  tx.insert(roundPoints).values(rows);
