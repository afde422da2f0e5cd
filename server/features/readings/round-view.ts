import { addDays, type Day } from '#shared/calendar/day.ts';
import type { PointDone, RoundPointView, RoundView } from '#shared/views/round-view.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { listEntries, listLoadsOut } from '../ledger/entry-repository.ts';
import { listNames } from '../people/people-repository.ts';
import { readSite, siteDaysOf, siteOf, type SiteRecord } from '../sites/site-service.ts';
import * as repository from './reading-repository.ts';
import { registerAt } from './reading-service.ts';

const usualDays = 21;

/** The operator's list for a day, in walking order: what was seen last, what is usual, what is in already. */
export async function readRound(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  day: Day,
): Promise<RoundView> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const days = await siteDaysOf(tx, siteId);
  const names = await listNames(tx);
  const startMs = days.startMs(day);
  const endMs = days.startMs(addDays(day, 1));
  const entries = await listEntries(tx, siteId, addDays(day, -usualDays), addDays(day, -1));
  const notRead = await repository.listNotRead(tx, siteId, day, day);
  const local = (at: string) => days.localTime(Date.parse(at));
  const points: RoundPointView[] = [];
  for (const point of record.roundPoints) {
    const skipped = notRead.find((one) => one.roundPointId === point.id);
    const common = {
      id: point.id,
      position: point.position,
      kind: point.kind,
      subjectId: point.subjectId,
      everyDays: point.everyDays,
      notRead: skipped ? { reasonCode: skipped.reasonCode, note: skipped.note } : null,
    };
    if (point.kind === 'meter')
      points.push({
        ...common,
        ...(await meterPoint(tx, record, point.subjectId, startMs, endMs, entries, names, local)),
      });
    else if (point.kind === 'level')
      points.push({
        ...common,
        ...(await levelPoint(tx, record, point.subjectId, startMs, endMs, names, local)),
      });
    else if (point.kind === 'rain')
      points.push({ ...common, ...(await rainPoint(tx, record, point.subjectId, day, names, local)) });
  }
  const loads = await listLoadsOut(tx, siteId, day, day);
  const stores = record.places.filter((place) => place.kind === 'store' || place.kind === 'treatment');
  const destinations = record.places.filter((place) => place.kind === 'haulage' || place.kind === 'sewer');
  return {
    day,
    today: days.dayOf(deps.now().getTime()),
    nowLocal: days.localTime(deps.now().getTime()),
    points,
    loads: loads.map((load) => ({
      id: load.id,
      ticket: load.ticket,
      hauler: load.hauler,
      at: local(load.observedAt),
      nominalVolumeM3: load.nominalVolumeM3,
      receivedVolumeM3: load.receivedVolumeM3,
      officialVolume: load.officialVolume,
    })),
    loadPlaces: {
      from: stores.map((place) => ({ id: place.id, name: place.name })),
      to: destinations.map((place) => ({ id: place.id, name: place.name })),
    },
    notes: (await repository.listRoundNotes(tx, siteId, day)).map((note) => ({
      id: note.id,
      siteDay: note.siteDay,
      note: note.note,
      by: names.get(note.recordedById) ?? '',
    })),
  };
}

const iso = (ms: number) => new Date(ms).toISOString();

async function meterPoint(
  tx: Transaction,
  record: SiteRecord,
  meterId: string,
  startMs: number,
  endMs: number,
  entries: Awaited<ReturnType<typeof listEntries>>,
  names: Map<string, string>,
  local: (at: string) => string,
) {
  const meter = record.meters.find((one) => one.id === meterId)!;
  const ofDay = (await repository.listReadings(tx, [meterId], iso(startMs), iso(endMs - 1))).filter(
    (one) => Date.parse(one.observedAt) >= startMs,
  );
  const chosen = new Set((await repository.listDisputes(tx, [meterId])).map((one) => one.chosenReadingId));
  const last = await repository.lastReadingBefore(tx, meterId, iso(startMs));
  const usual = entries
    .filter((one) => one.meterId === meterId && one.reversesId === null && one.basis === 'measured')
    .map((one) => Number(one.volumeM3))
    .sort((a, b) => a - b);
  const event = record.meterEvents
    .filter(
      (one) =>
        one.meterId === meterId &&
        one.registerAfter !== null &&
        Date.parse(one.observedAt) < endMs &&
        (!last || one.observedAt > last.observedAt),
    )
    .at(-1);
  const lastSeen = event
    ? { text: event.registerAfter!, value: event.registerAfter!, observedAt: event.observedAt }
    : last && { text: last.typedText, value: last.registerValue, observedAt: last.observedAt };
  const done = ofDay.map((one): PointDone => {
    const rivals = ofDay.filter(
      (other) => other.observedAt === one.observedAt && other.registerValue !== one.registerValue,
    );
    return {
      id: one.id,
      text: one.typedText,
      at: local(one.observedAt),
      observedAt: one.observedAt,
      by: names.get(one.recordedById) ?? '',
      state:
        one.answer === 'held'
          ? 'held'
          : rivals.length && ![one, ...rivals].some((other) => chosen.has(other.id))
            ? 'dispute'
            : 'stored',
    };
  });
  return {
    name: `${meter.code} ${meter.name}`,
    code: meter.code,
    register: registerAt(record, meterId, endMs),
    rateM3PerDayMax: Number(meter.rateM3PerDayMax),
    last: lastSeen ? { ...lastSeen, at: local(lastSeen.observedAt) } : null,
    usual:
      usual.length >= 5
        ? { lowM3: usual[Math.floor(usual.length * 0.1)]!, highM3: usual[Math.ceil(usual.length * 0.9) - 1]! }
        : null,
    done,
  };
}

async function levelPoint(
  tx: Transaction,
  record: SiteRecord,
  storeId: string,
  startMs: number,
  endMs: number,
  names: Map<string, string>,
  local: (at: string) => string,
) {
  const store = record.stores.find((one) => one.id === storeId);
  const rows = await repository.listLevels(
    tx,
    { storeIds: [storeId] },
    iso(startMs - 20 * 86_400_000),
    iso(endMs - 1),
  );
  const last = rows.filter((one) => Date.parse(one.observedAt) < startMs).at(-1);
  const name = record.places.find((place) => place.id === store?.placeId)?.name ?? store?.code ?? '';
  return {
    name,
    code: store?.code ?? '',
    operatingLevelM: store ? Number(store.operatingLevelM) : null,
    crestLevelM: store ? Number(store.crestLevelM) : null,
    last: last
      ? { text: last.typedText, value: last.levelM, observedAt: last.observedAt, at: local(last.observedAt) }
      : null,
    done: rows
      .filter((one) => Date.parse(one.observedAt) >= startMs)
      .map((one): PointDone => ({
        id: one.id,
        text: `${Number(one.levelM)} m`,
        at: local(one.observedAt),
        observedAt: one.observedAt,
        by: names.get(one.recordedById) ?? '',
        state: 'stored',
      })),
  };
}

/** Rain read on a morning belongs to the 24 hours before it. */
async function rainPoint(
  tx: Transaction,
  record: SiteRecord,
  stationId: string,
  day: Day,
  names: Map<string, string>,
  local: (at: string) => string,
) {
  const station = record.stations.find((one) => one.id === stationId);
  const rows = await repository.listRainDays(tx, [stationId], addDays(day, -2), addDays(day, -1));
  const mine = rows.filter((one) => one.siteDay === addDays(day, -1) && one.precipitationMm !== null);
  const before = rows.find((one) => one.siteDay === addDays(day, -2));
  const words = (row: (typeof rows)[number]) =>
    row.kind === 'trace'
      ? 'trace'
      : `${Number(row.precipitationMm)} mm${row.accumulatedDays ? ` over ${row.accumulatedDays} days` : ''}`;
  return {
    name: station?.name ?? '',
    code: '',
    last: before?.precipitationMm
      ? {
          text: words(before),
          value: before.precipitationMm,
          observedAt: before.recordedAt,
          at: addDays(day, -1),
        }
      : null,
    done: mine.map((one): PointDone => ({
      id: one.id,
      text: words(one),
      at: local(one.recordedAt),
      observedAt: one.recordedAt,
      by: names.get(one.recordedById) ?? '',
      state: 'stored',
    })),
  };
}
