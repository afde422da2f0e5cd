import type * as z from 'zod';
import type { Day } from '#shared/calendar/day.ts';
import { monthOfDay } from '#shared/calendar/day.ts';
import { monthName, monthParts, monthRange, type Month } from '#shared/calendar/month.ts';
import {
  monthFromRecord,
  noClimate,
  settleGap,
  summariseMonth,
  type ClimateValues,
  type MonthSummary,
} from '#shared/climate/month-climate.ts';
import { fieldProblem } from '#shared/problems.ts';
import type { gapChoiceInput } from '#shared/schemas/climate.ts';
import type { MonthClimate, MonthDays } from '#shared/water-balance/engine-input.ts';
import type { ClimateView } from '#shared/views/site-view.ts';
import { recordChange } from '../../audit/record-change.ts';
import { remembered } from '../../db/remembered-reads.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context } from '../../http/route.ts';
import { listImports } from '../imports/import-repository.ts';
import { siteOf } from '../sites/site-service.ts';
import * as repository from './climate-repository.ts';

/** Climate of a site's month, with where each part comes from and what was chosen about its gaps. */
export interface SiteMonthClimate extends MonthSummary {
  rainStation: string | null;
  temperatureStation: string | null;
  choice: string | null;
  /** The month as the balance takes it; null while a gap is open or the month is left out. */
  settled: MonthClimate | null;
}

interface StationRecord {
  id: string;
  name: string;
  days: Map<Day, ClimateValues>;
  months: Map<Month, ClimateValues>;
  monthsWithDays: Set<Month>;
}

const fields = Object.keys(noClimate) as (keyof ClimateValues)[];
const valuesOf = (row: Record<keyof ClimateValues, string | null>): ClimateValues =>
  Object.fromEntries(
    fields.map((field) => [field, row[field] === null ? null : Number(row[field])]),
  ) as unknown as ClimateValues;

/** An accumulated reading is spread over its days and stays marked; its sum is kept. */
function spreadAccumulated(
  days: Map<Day, ClimateValues>,
  siteDay: Day,
  count: number,
  values: ClimateValues,
): void {
  const end = Date.parse(`${siteDay}T00:00Z`);
  for (let back = 0; back < count; back += 1) {
    const day = new Date(end - back * 86_400_000).toISOString().slice(0, 10);
    days.set(day, { ...(days.get(day) ?? values), precipitationMm: (values.precipitationMm ?? 0) / count });
  }
}

async function readStations(tx: Transaction, siteId: string): Promise<StationRecord[]> {
  const stations = await repository.listStations(tx, siteId);
  if (!stations.length) return [];
  const ids = stations.map((station) => station.id);
  const records = new Map(
    stations.map((station) => [
      station.id,
      {
        id: station.id,
        name: station.name,
        days: new Map(),
        months: new Map(),
        monthsWithDays: new Set<Month>(),
      } as StationRecord,
    ]),
  );
  for (const row of await repository.listLiveDays(tx, ids)) {
    const record = records.get(row.stationId)!;
    if (row.kind === 'accumulated' && row.accumulatedDays)
      spreadAccumulated(record.days, row.siteDay, row.accumulatedDays, valuesOf(row));
    else record.days.set(row.siteDay, valuesOf(row));
    record.monthsWithDays.add(monthOfDay(row.siteDay));
  }
  for (const row of await repository.listLiveMonths(tx, ids))
    records.get(row.stationId)!.months.set(row.month, valuesOf(row));
  return [...records.values()];
}

function monthOfStation(station: StationRecord, month: Month): MonthSummary | null {
  const monthly = station.months.get(month);
  if (monthly) return monthFromRecord(month, monthly);
  return station.monthsWithDays.has(month) ? summariseMonth(month, station.days) : null;
}

/** Days of rain from one station with the temperatures and weather of another, as far as both have them. */
function joinDays(rain: MonthDays | null, warm: MonthDays | null): MonthDays | null {
  if (!rain && !warm) return null;
  return { ...(rain ?? warm)!, ...warm, precipitationMm: rain?.precipitationMm ?? null };
}

/** Rain from the first station that has any, temperature from the first that has any; both are named. */
function joinStations(
  stations: StationRecord[],
  month: Month,
): Omit<SiteMonthClimate, 'choice' | 'settled'> | null {
  const found = stations
    .map((station) => ({ station, summary: monthOfStation(station, month) }))
    .filter((one) => one.summary !== null);
  const rain = found.find(({ summary }) => summary!.rainDayCount > 0);
  const warm = found.find(({ summary }) => summary!.temperatureDayCount > 0);
  const first = (field: 'petMm' | 'panMm' | 'windMPerS' | 'relativeHumidityPercent' | 'sunshineHours') =>
    found.find(({ summary }) => summary![field] !== null)?.summary![field] ?? null;
  const base = rain?.summary ?? warm?.summary;
  if (!base) return null;
  return {
    ...base,
    tMeanC: warm?.summary!.tMeanC ?? null,
    tMinC: warm?.summary!.tMinC ?? null,
    tMaxC: warm?.summary!.tMaxC ?? null,
    petMm: first('petMm'),
    panMm: first('panMm'),
    windMPerS: first('windMPerS'),
    relativeHumidityPercent: first('relativeHumidityPercent'),
    sunshineHours: first('sunshineHours'),
    days: joinDays(rain?.summary?.days ?? null, warm?.summary?.days ?? null),
    temperatureDayCount: warm?.summary!.temperatureDayCount ?? 0,
    isComplete:
      base.rainDayCount === base.dayCount && (warm?.summary!.temperatureDayCount ?? 0) === base.dayCount,
    rainStation: rain?.station.name ?? null,
    temperatureStation: warm?.station.name ?? null,
  };
}

function stationNormal(months: readonly MonthSummary[], month: Month): MonthClimate | null {
  const same = months.filter(
    (one) => one.isComplete && monthParts(one.month).monthOfYear === monthParts(month).monthOfYear,
  );
  if (!same.length) return null;
  const mean = (pick: (row: MonthSummary) => number | null) => {
    const values = same.map(pick).filter((value): value is number => value !== null);
    return values.length ? values.reduce((sum, value) => sum + value, 0) / values.length : null;
  };
  return {
    month,
    precipitationMm: mean((row) => row.precipitationMm) ?? 0,
    tMeanC: mean((row) => row.tMeanC),
    tMinC: mean((row) => row.tMinC),
    tMaxC: mean((row) => row.tMaxC),
    petMm: mean((row) => row.petMm),
    panMm: mean((row) => row.panMm),
    windMPerS: mean((row) => row.windMPerS),
    relativeHumidityPercent: mean((row) => row.relativeHumidityPercent),
    sunshineHours: mean((row) => row.sunshineHours),
    days: null,
  };
}

/** Every month of a site that has any climate, in order. */
export const listSiteClimate = (tx: Transaction, siteId: string): Promise<SiteMonthClimate[]> =>
  remembered(tx, `climate ${siteId}`, () => joinSiteClimate(tx, siteId));

const joinedMax = 50;
/** Months of the sites asked about last, each with the stamp of the rows they were made from. */
const joinedBySite = new Map<string, { stamp: string; months: SiteMonthClimate[] }>();

/** The same months again while no row of them has changed: a long daily record is read and added up once. */
async function joinSiteClimate(tx: Transaction, siteId: string): Promise<SiteMonthClimate[]> {
  const stations = await repository.listStations(tx, siteId);
  if (!stations.length) return [];
  const rows = await repository.climateStamp(
    tx,
    siteId,
    stations.map((station) => station.id),
  );
  const stamp = `${stations.map((station) => `${station.id} ${station.priority} ${station.name}`).join()} ${rows}`;
  const known = joinedBySite.get(siteId);
  if (known?.stamp === stamp) return known.months;
  const months = await readSiteClimate(tx, siteId);
  joinedBySite.delete(siteId);
  joinedBySite.set(siteId, { stamp, months });
  for (const oldest of [...joinedBySite.keys()].slice(0, Math.max(0, joinedBySite.size - joinedMax)))
    joinedBySite.delete(oldest);
  return months;
}

async function readSiteClimate(tx: Transaction, siteId: string): Promise<SiteMonthClimate[]> {
  const stations = await readStations(tx, siteId);
  const named = stations.flatMap((station) => [...station.months.keys(), ...station.monthsWithDays]).sort();
  if (!named.length) return [];
  const choices = new Map((await repository.listGapChoices(tx, siteId)).map((row) => [row.month, row]));
  const joined = monthRange(named[0]!, named.at(-1)!).map((month) => ({
    month,
    summary: joinStations(stations, month),
  }));
  const complete = joined.flatMap(({ summary }) => (summary ? [summary] : []));
  return joined.map(({ month, summary }) => {
    const empty = { ...summariseMonth(month, new Map()), rainStation: null, temperatureStation: null };
    const row = summary ?? empty;
    const choice = choices.get(month);
    if (row.isComplete) return { ...row, choice: null, settled: row };
    const other = stations.find((station) => station.id === choice?.otherStationId);
    const settled = choice
      ? settleGap(
          row,
          choice.choice,
          stationNormal(complete, month),
          other ? monthOfStation(other, month) : null,
        )
      : null;
    return { ...row, choice: choice?.choice ?? null, settled };
  });
}

const cannotFill = {
  'scale-by-days': 'it has no day with rain to scale from, or no temperature',
  'other-station': 'that station does not have the whole month',
  'station-normal': 'no year of the record has this month whole',
} as const;

/**
 * Stores what an engineer chose for a month with missing days; the newest choice holds.
 * @throws Problem when the choice cannot fill the month
 */
export async function chooseForGap(
  tx: Transaction,
  context: Context,
  input: z.output<typeof gapChoiceInput>,
) {
  const siteId = siteOf(context);
  const row = (await listSiteClimate(tx, siteId)).find((one) => one.month === input.month);
  if (!row) throw fieldProblem('/month', `There is no climate record around ${monthName(input.month)}.`);
  if (row.isComplete) throw fieldProblem('/month', `${monthName(input.month)} has no missing days.`);
  if (input.choice === 'other-station' && !input.otherStationId)
    throw fieldProblem('/otherStationId', 'Choose the station to fill from.');
  await repository.insertGapChoice(tx, {
    organisationId: context.organisationId,
    id: input.id,
    recordedById: context.personId,
    siteId,
    month: input.month,
    variable: 'precipitation',
    choice: input.choice,
    otherStationId: input.otherStationId ?? null,
    reason: input.reason,
  });
  const after = (await joinSiteClimate(tx, siteId)).find((one) => one.month === input.month);
  if (input.choice !== 'leave-out' && !after?.settled)
    throw fieldProblem(
      input.choice === 'other-station' ? '/otherStationId' : '/choice',
      `This does not fill ${monthName(input.month)}: ${cannotFill[input.choice]}. Make another choice, or upload the missing days.`,
    );
  await recordChange(tx, context, {
    action: 'choose',
    subjectType: 'climate-months',
    subjectId: input.id,
    sentence: `Missing climate of ${monthName(input.month)}: ${input.choice.replaceAll('-', ' ')}.`,
    reason: input.reason,
    after: input,
  });
  return { id: input.id };
}

/** Climate of the site by month, with what is missing, and the uploads it came from. */
export async function readClimate(tx: Transaction, context: Context): Promise<ClimateView> {
  const climate = await listSiteClimate(tx, siteOf(context));
  const uploads = await listImports(tx, siteOf(context), 'climate', null);
  return {
    months: climate.map(({ settled, days: _days, ...row }) => ({
      ...row,
      isSettled: settled !== null,
    })),
    uploads: uploads.map((row) => ({
      id: row.id,
      fileName: row.fileName,
      uploadedAt: row.uploadedAt,
      counts: row.counts as { read: number; held: number },
      confirmedAt: row.confirmedAt,
      undoneAt: row.undoneAt,
    })),
  };
}
