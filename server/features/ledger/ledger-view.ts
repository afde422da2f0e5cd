import { firstDay, lastDay } from '#shared/calendar/day.ts';
import type { SiteDays } from '#shared/calendar/site-days.ts';
import { addMonths, type Month } from '#shared/calendar/month.ts';
import { balanceStore, type Flow } from '#shared/ledger/balance-store.ts';
import { storeAtLevel } from '#shared/ledger/store-volume.ts';
import type { LedgerView } from '#shared/views/month-view.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context } from '../../http/route.ts';
import { referencePetOfMonth } from '../balance/month-pet.ts';
import { listSiteClimate } from '../climate/climate-service.ts';
import { listNames } from '../people/people-repository.ts';
import * as readingRepository from '../readings/reading-repository.ts';
import { readSite, siteDaysOf, siteOf, type SiteRecord } from '../sites/site-service.ts';
import * as repository from './entry-repository.ts';

type Store = SiteRecord['stores'][number];
type Entry = Awaited<ReturnType<typeof repository.listEntries>>[number];

/** Accuracy of a ticket, our template; a meter carries its own. */
const ticketAccuracyFraction = 0.01;
const levelWindowMs = 4 * 86_400_000;

interface StoreState {
  volumeM3: number;
  surfaceM2: number;
  levelM: number;
}

/** Level of a store at an instant, straight between the readings before and after it; null when either is missing. */
async function storeStateAt(
  tx: Transaction,
  record: SiteRecord,
  store: Store,
  atMs: number,
): Promise<StoreState | null> {
  const iso = (ms: number) => new Date(ms).toISOString();
  const levels = await readingRepository.listLevels(
    tx,
    { storeIds: [store.id] },
    iso(atMs - levelWindowMs),
    iso(atMs + levelWindowMs),
  );
  const before = levels.findLast((level) => Date.parse(level.observedAt) <= atMs);
  const after = levels.find((level) => Date.parse(level.observedAt) >= atMs);
  if (!before || !after) return null;
  const spanMs = Date.parse(after.observedAt) - Date.parse(before.observedAt);
  const share = spanMs === 0 ? 0 : (atMs - Date.parse(before.observedAt)) / spanMs;
  const levelM = Number(before.levelM) + (Number(after.levelM) - Number(before.levelM)) * share;
  const table = record.storeLevels
    .filter((row) => row.storeId === store.id)
    .map((row) => ({
      levelM: Number(row.levelM),
      volumeM3: Number(row.volumeM3),
      surfaceM2: Number(row.surfaceM2),
    }));
  const found = storeAtLevel(table, levelM);
  return found && { ...found, levelM };
}

/** Net flows of a store in the month, one per meter or kind, each with its accuracy. */
function flowsOf(
  record: SiteRecord,
  entries: readonly Entry[],
  side: 'fromPlaceId' | 'toPlaceId',
  placeId: string,
): Flow[] {
  const sums = new Map<string, Flow>();
  for (const entry of entries.filter((one) => one[side] === placeId)) {
    const meter = record.meters.find((one) => one.id === entry.meterId);
    const key = entry.meterId ?? 'tickets';
    const known = sums.get(key) ?? {
      volumeM3: 0,
      accuracyFraction: meter ? Number(meter.accuracyFraction) : ticketAccuracyFraction,
    };
    sums.set(key, { ...known, volumeM3: known.volumeM3 + Number(entry.volumeM3) });
  }
  return [...sums.values()];
}

async function storeView(
  tx: Transaction,
  record: SiteRecord,
  store: Store,
  days: SiteDays,
  month: Month,
  entries: readonly Entry[],
  climate: { rainMm: number | null; petMm: number | null },
): Promise<LedgerView['stores'][number]> {
  const opening = await storeStateAt(tx, record, store, days.startMs(firstDay(month)));
  const closing = await storeStateAt(tx, record, store, days.startMs(firstDay(addMonths(month, 1))));
  const name = record.places.find((place) => place.id === store.placeId)?.name ?? store.code;
  const common = {
    id: store.id,
    placeId: store.placeId,
    code: store.code,
    name,
    openingLevelM: opening?.levelM ?? null,
    closingLevelM: closing?.levelM ?? null,
  };
  if (!opening || !closing)
    return {
      ...common,
      balance: null,
      weather: '',
      missing: `No level was read around the ${opening ? 'end' : 'start'} of the month.`,
    };
  if (!store.isCovered && climate.rainMm === null)
    return { ...common, balance: null, weather: '', missing: 'Rain of the month is not complete.' };
  const evaporationMm = store.isCovered ? 0 : (climate.petMm ?? 0) * Number(store.evaporationFactor);
  const balance = balanceStore({
    openingM3: opening.volumeM3,
    closingMeasuredM3: closing.volumeM3,
    inflows: flowsOf(record, entries, 'toPlaceId', store.placeId),
    outflows: flowsOf(record, entries, 'fromPlaceId', store.placeId),
    rainMm: store.isCovered ? 0 : climate.rainMm!,
    evaporationMm,
    linedAreaM2: Number(store.linedAreaM2),
    surfaceM2: (opening.surfaceM2 + closing.surfaceM2) / 2,
    openingSurfaceM2: opening.surfaceM2,
    closingSurfaceM2: closing.surfaceM2,
    levelResolutionM: Number(store.levelResolutionM),
  });
  const weather = store.isCovered
    ? 'covered: no rain, no evaporation'
    : climate.petMm === null
      ? 'evaporation not known, taken as 0'
      : `rain ${climate.rainMm!.toFixed(1)} mm, evaporation ${evaporationMm.toFixed(1)} mm on the water surface`;
  return { ...common, balance, missing: null, weather };
}

/** The month's water from place to place, its stores from opening to closing, and every entry behind it. */
export async function readLedger(tx: Transaction, context: Context, month: Month): Promise<LedgerView> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const days = await siteDaysOf(tx, siteId);
  const entries = await repository.listEntries(tx, siteId, firstDay(month), lastDay(month));
  const climate = (await listSiteClimate(tx, siteId)).find((row) => row.month === month);
  const monthPet = await referencePetOfMonth(tx, siteId, month);
  const rainMm = climate && climate.rainDayCount === climate.dayCount ? climate.precipitationMm : null;
  const placeName = (id: string) => record.places.find((place) => place.id === id)?.name ?? '';
  const flows = new Map<
    string,
    {
      fromPlaceId: string;
      toPlaceId: string;
      from: string;
      to: string;
      volumeM3: number;
      bases: Record<string, number>;
    }
  >();
  for (const entry of entries) {
    const key = `${entry.fromPlaceId} ${entry.toPlaceId}`;
    const flow = flows.get(key) ?? {
      fromPlaceId: entry.fromPlaceId,
      toPlaceId: entry.toPlaceId,
      from: placeName(entry.fromPlaceId),
      to: placeName(entry.toPlaceId),
      volumeM3: 0,
      bases: {},
    };
    flow.volumeM3 += Number(entry.volumeM3);
    flow.bases[entry.basis] = (flow.bases[entry.basis] ?? 0) + Number(entry.volumeM3);
    flows.set(key, flow);
  }
  const stores = [];
  for (const store of record.stores)
    stores.push(await storeView(tx, record, store, days, month, entries, { rainMm, petMm: monthPet }));
  const names = await listNames(tx);
  const loads = await repository.listLoadsOut(tx, siteId, firstDay(month), lastDay(month));
  const sum = (pick: (load: (typeof loads)[number]) => string | null) =>
    loads.reduce((total, load) => total + Number(pick(load) ?? 0), 0);
  return {
    month,
    flows: [...flows.values()]
      .filter((flow) => Math.abs(flow.volumeM3) > 1e-9)
      .sort((a, b) => b.volumeM3 - a.volumeM3),
    stores,
    entries: [...entries].reverse().map((entry) => ({
      id: entry.id,
      siteDay: entry.siteDay,
      from: placeName(entry.fromPlaceId),
      to: placeName(entry.toPlaceId),
      volumeM3: entry.volumeM3,
      basis: entry.basis,
      reason: entry.reason,
      meterCode: record.meters.find((meter) => meter.id === entry.meterId)?.code ?? null,
      by: names.get(entry.recordedById) ?? '',
      recordedAt: entry.recordedAt,
      reversesId: entry.reversesId,
    })),
    loads: {
      count: loads.length,
      nominalM3: sum((load) => load.nominalVolumeM3),
      receivedM3: sum((load) => load.receivedVolumeM3),
      receivedCount: loads.filter((load) => load.receivedVolumeM3 !== null).length,
      rows: loads.map((load) => ({
        id: load.id,
        siteDay: load.siteDay,
        ticket: load.ticket,
        hauler: load.hauler,
        nominalVolumeM3: load.nominalVolumeM3,
        receivedVolumeM3: load.receivedVolumeM3,
        officialVolume: load.officialVolume,
      })),
    },
    pending: (await repository.listPendingChanges(tx, siteId)).filter((change) => change.month === month),
    act: (await repository.listMonthActs(tx, siteId)).get(month)?.act ?? null,
  };
}
