import { Decimal } from 'decimal.js';
import { addDays, dayNumber, weekday, type Day } from '#shared/calendar/day.ts';
import { addMonths, monthRange } from '#shared/calendar/month.ts';
import { computeDayVolumes } from '#shared/ledger/day-volumes.ts';
import { planPosting } from '#shared/ledger/post-days.ts';
import { computeIntervals } from '#shared/ledger/intervals.ts';
import { runWaterBalance } from '#shared/water-balance/run-water-balance.ts';
import { sumByCellAndMonth } from '#shared/water-balance/sum-steps.ts';
import { parameterTemplate } from '#shared/water-balance/engine-input.ts';
import { levels, readings } from '../db/schema/ledger.ts';
import { stations } from '../db/schema/climate.ts';
import type { Transaction } from '../db/transaction.ts';
import { buildEngineInput } from '../features/balance/engine-input-service.ts';
import { insertDays } from '../features/climate/climate-repository.ts';
import { insertEntries, listLiveEntriesOfMeter } from '../features/ledger/entry-repository.ts';
import { readMeterFacts } from '../features/ledger/posting-service.ts';
import { createLoadOut } from '../features/loads-out/load-out-service.ts';
import { createNotRead } from '../features/readings/point-service.ts';
import { createEstimate } from '../features/readings/reading-service.ts';
import { addMeterEvent } from '../features/sites/metering-service.ts';
import { readSite, siteDaysOf } from '../features/sites/site-service.ts';
import type { DemoPlan } from './demo-plan.ts';
import type { DemoIds } from './demo-site.ts';
import {
  loadM3,
  morningMs,
  readRegister,
  simulateVolumes,
  type DemoDay,
  type DemoReading,
} from './demo-volumes.ts';
import type { DemoWeatherDay } from './demo-weather.ts';
import type { DemoActors } from './demo-actors.ts';
import type { Random } from './random.ts';

const rowsPerInsert = 2_000;
const iso = (ms: number) => new Date(ms).toISOString();

async function inChunks<T>(rows: T[], insert: (chunk: T[]) => Promise<unknown>): Promise<void> {
  for (let start = 0; start < rows.length; start += rowsPerInsert)
    await insert(rows.slice(start, start + rowsPerInsert));
}

/** Rain from the site's own gauge, temperature from an airfield nearby; one rain day of the running month is missing. */
export async function loadWeather(
  tx: Transaction,
  actors: DemoActors,
  ids: DemoIds,
  weather: DemoWeatherDay[],
  random: Random,
): Promise<void> {
  const operator = actors.as('operator', ids.site);
  const airfield = random.id();
  await tx.insert(stations).values({
    organisationId: operator.organisationId,
    id: airfield,
    siteId: ids.site,
    name: 'Selby Moor airfield',
    kind: 'file',
    priority: 2,
    source: 'invented daily record',
  });
  const missing = weather.at(-4)?.day;
  const fact = (day: Day) => ({
    organisationId: operator.organisationId,
    id: random.id(),
    recordedById: operator.personId,
    siteDay: day,
    recordedAt: `${addDays(day, 1)}T07:20:00Z`,
  });
  await insertDays(
    tx,
    weather
      .filter((one) => one.day !== missing)
      .map((one) => ({
        ...fact(one.day),
        stationId: ids.gauge,
        precipitationMm: one.rainMm.toFixed(1),
        typedText: one.rainMm.toFixed(1),
      })),
  );
  await insertDays(
    tx,
    weather.map((one) => ({
      ...fact(one.day),
      stationId: airfield,
      tMinC: one.tMinC.toFixed(1),
      tMaxC: one.tMaxC.toFixed(1),
    })),
  );
}

/** Leachate that "really" came: the model with a drier young cell and small unrest, so that the comparison has something to say. */
async function trueLeachate(tx: Transaction, ids: DemoIds, plan: DemoPlan, random: Random) {
  const record = await readSite(tx, ids.site);
  const { input } = await buildEngineInput(tx, record, parameterTemplate, addDays(plan.today, 40));
  const drier = {
    ...input,
    parameters: { ...input.parameters, channelledFraction: 0.06, recessionPerMonth: 0.42 },
    cells: input.cells.map((cell) =>
      cell.code === 'C3'
        ? {
            ...cell,
            placedDeficitM3: Object.fromEntries(
              Object.entries(cell.placedDeficitM3).map(([month, value]) => [month, value * 1.5]),
            ),
          }
        : cell,
    ),
  };
  const { steps } = runWaterBalance(drier);
  const sums = sumByCellAndMonth(steps);
  const result = new Map<string, number>();
  for (const cell of record.cells) {
    for (const [key, sum] of sums) {
      const [cellId, month] = key.split(' ') as [string, string];
      if (cellId === cell.id)
        result.set(`${cell.code} ${month}`, sum.volumesM3.leachateMm * Math.exp(random.normal(0, 0.04)));
    }
  }
  // Months whose climate is not complete yet go on as the month before.
  for (const cell of record.cells) {
    for (const month of monthRange(addMonths(plan.anchor, -1), plan.anchor)) {
      if (!result.has(`${cell.code} ${month}`))
        result.set(`${cell.code} ${month}`, result.get(`${cell.code} ${addMonths(month, -1)}`) ?? 0);
    }
  }
  return result;
}

interface MeterPlan {
  meterId: string;
  readings: DemoReading[];
}

function planReadings(
  random: Random,
  plan: DemoPlan,
  days: Awaited<ReturnType<typeof siteDaysOf>>,
  rows: DemoDay[],
  eastFrom: Day,
): Record<'H1' | 'S3' | 'L3' | 'P1' | 'O1', DemoReading[]> {
  const never = () => false;
  const isWeekend = (day: Day) => day === plan.weekend.saturday || day === plan.weekend.sunday;
  const east = rows.filter((one) => one.day >= eastFrom).map((one) => ({ day: one.day, volumeM3: one.east }));
  const beforeSwap = readRegister(
    random,
    days,
    east.filter((one) => one.day <= plan.swapDay),
    { start: '402', digits: 6, unitM3: '1', skip: never, stuckOn: (day) => day === plan.stuckFrom },
  );
  const afterSwap = readRegister(
    random,
    days,
    east.filter((one) => one.day > plan.swapDay),
    { start: '16', digits: 6, unitM3: '0.3785411784', skip: never, stuckOn: (day) => day === plan.stuckFrom },
  );
  return {
    H1: readRegister(
      random,
      days,
      rows.map((one) => ({ day: one.day, volumeM3: one.header })),
      { start: '974210', digits: 6, unitM3: '1', skip: isWeekend },
    ),
    S3: [...beforeSwap, ...afterSwap],
    L3: readRegister(
      random,
      days,
      rows.filter((one) => one.day >= eastFrom).map((one) => ({ day: one.day, volumeM3: one.leakL / 1000 })),
      { start: '118', digits: 6, unitM3: '0.001', skip: (day) => weekday(day) !== 'Monday' },
    ),
    P1: readRegister(
      random,
      days,
      rows.map((one) => ({ day: one.day, volumeM3: one.plant })),
      { start: '1204481', digits: 7, unitM3: '1', skip: never },
    ),
    O1: readRegister(
      random,
      days,
      rows.map((one) => ({ day: one.day, volumeM3: one.outfall })),
      { start: '1171950', digits: 7, unitM3: '1', skip: never },
    ),
  };
}

/** Readings, levels, loads and the events of the story; then every day's entries. */
export async function loadRecord(
  tx: Transaction,
  actors: DemoActors,
  ids: DemoIds,
  plan: DemoPlan,
  weather: DemoWeatherDay[],
  random: Random,
): Promise<void> {
  const operator = actors.as('operator', ids.site);
  const supervisor = actors.as('supervisor', ids.site);
  const days = await siteDaysOf(tx, ids.site);
  const petMmPerDay = (day: Day) =>
    Math.max(0.2, 1.55 - 1.35 * Math.cos((2 * Math.PI * (dayNumber(day) % 365.25)) / 365.25));
  const rows = simulateVolumes(random, plan, weather, await trueLeachate(tx, ids, plan, random), petMmPerDay);
  const record = await readSite(tx, ids.site);
  const eastFrom = record.cells.find((cell) => cell.code === 'C3')!.openedOn;
  const planned = planReadings(random, plan, days, rows, eastFrom);
  const fact = (day: Day, atMs: number) => ({
    organisationId: operator.organisationId,
    id: random.id(),
    recordedById: operator.personId,
    recordedAt: iso(atMs + 40_000),
    observedAt: iso(atMs),
    observedOffsetMinutes: days.offsetMinutes(atMs),
    siteDay: day,
  });
  const meterPlans: MeterPlan[] = (Object.keys(planned) as (keyof typeof planned)[]).map((key) => ({
    meterId: ids.meters[key],
    readings: planned[key],
  }));
  for (const { meterId, readings: own } of meterPlans) {
    await inChunks(
      own.map((one) => ({
        ...fact(one.day, one.observedAtMs),
        meterId,
        typedText: one.text,
        registerValue: one.value,
        answer: one.answer,
      })),
      (chunk) => tx.insert(readings).values(chunk),
    );
  }
  await inChunks(
    rows.map((one) => {
      const levelM = (Math.round(one.levelM * 100) / 100).toFixed(2);
      return {
        ...fact(one.day, morningMs(days, one.day, 5)),
        storeId: ids.pond.store,
        typedText: levelM,
        levelM,
      };
    }),
    (chunk) => tx.insert(levels).values(chunk),
  );

  // The swap: the old register ends at what it showed, the new one starts at 12 and counts hundreds of US gallons.
  const lastOld = planned.S3.filter((one) => one.day <= plan.swapDay).at(-1);
  if (lastOld && plan.swapDay > eastFrom) {
    const swapAt = iso(lastOld.observedAtMs + 2 * 3_600_000);
    const east = rows.find((one) => one.day === plan.swapDay)!.east;
    const registerBefore = new Decimal(lastOld.value).plus(Math.round((east * 2) / 24)).toFixed(0);
    await addMeterEvent(tx, supervisor, actors.at(iso(lastOld.observedAtMs + 3 * 3_600_000)), {
      id: random.id(),
      meterId: ids.meters.S3,
      kind: 'replace',
      observedAt: swapAt,
      registerBefore,
      registerAfter: '12',
      digitsAfter: 6,
      unitAfter: 'gal-us',
      multiplierAfter: '100',
      note: 'New meter, reads hundreds of US gallons.',
    });
  }
  await loadPostings(tx, actors, ids, plan, days, rows);
  await stuckAndHoles(tx, actors, ids, plan, rows, random, planned.S3);
}

/** Entries of every meter, as the ledger computes them, and the truck loads. */
async function loadPostings(
  tx: Transaction,
  actors: DemoActors,
  ids: DemoIds,
  plan: DemoPlan,
  days: Awaited<ReturnType<typeof siteDaysOf>>,
  rows: DemoDay[],
): Promise<void> {
  const operator = actors.as('operator', ids.site);
  const record = await readSite(tx, ids.site);
  const newId = actors.at(`${plan.today}T08:00:00Z`).newId;
  for (const meter of record.meters) {
    const { intervals } = computeIntervals(
      await readMeterFacts(tx, record, meter, '2000-01-01T00:00:00Z', `${plan.today}T23:59:59Z`),
    );
    const live = await listLiveEntriesOfMeter(tx, meter.id, plan.start, plan.today);
    const { postings } = planPosting(
      computeDayVolumes(intervals, days, record.site.measuredIntervalHoursMax),
      live,
      new Set(),
    );
    await insertEntries(
      tx,
      postings.map((day) => ({
        organisationId: operator.organisationId,
        id: newId(),
        recordedById: operator.personId,
        recordedAt: `${addDays(day.siteDay, 1)}T08:00:00Z`,
        siteId: ids.site,
        siteDay: day.siteDay,
        fromPlaceId: meter.fromPlaceId,
        toPlaceId: meter.toPlaceId,
        volumeM3: day.volumeM3.toFixed(6),
        basis: day.basis,
        meterId: meter.id,
        factIds: day.factIds,
        reason: null,
      })),
    );
  }
  let ticket = 4402;
  for (const one of rows.filter((row) => row.hauledLoads > 0)) {
    for (let load = 0; load < one.hauledLoads; load += 1) {
      const at = iso(days.startMs(one.day) + (10 + 2 * load) * 3_600_000);
      const received = (loadM3 * (0.985 + ((ticket % 7) - 3) * 0.002)).toFixed(2);
      await createLoadOut(tx, operator, actors.at(iso(Date.parse(at) + 600_000)), {
        id: newId(),
        ticket: `00${(ticket += 1)}`,
        hauler: 'Dunmere Haulage',
        truck: load ? 'T2' : 'T1',
        fromPlaceId: ids.pond.place,
        toPlaceId: ids.places.haulage,
        nominalVolumeM3: String(loadM3),
        grossMassKg: undefined,
        tareMassKg: undefined,
        densityKgPerM3: undefined,
        receivedVolumeM3: received,
        officialVolume: 'received',
        isConfirmed: true,
        observedAt: at,
      });
    }
  }
}

/** A stuck register with its estimate, and a weekend nobody came. */
async function stuckAndHoles(
  tx: Transaction,
  actors: DemoActors,
  ids: DemoIds,
  plan: DemoPlan,
  rows: DemoDay[],
  random: Random,
  east: DemoReading[],
): Promise<void> {
  const supervisor = actors.as('supervisor', ids.site);
  const from = east.find((one) => one.day === plan.stuckFrom);
  const to = east.find((one) => one.day === addDays(plan.stuckFrom, 1));
  const flow = rows.find((one) => one.day === plan.stuckFrom)?.east ?? 0;
  if (from && to) {
    const hours = Math.max(0.5, Math.round((flow / 15.12) * 10) / 10);
    await createEstimate(tx, supervisor, actors.at(iso(to.observedAtMs + 3_600_000)), {
      id: random.id(),
      meterId: ids.meters.S3,
      fromAt: iso(from.observedAtMs),
      toAt: iso(to.observedAtMs),
      volumeM3: new Decimal(hours).times('15.12').toFixed(3),
      method: 'hours-times-rate',
      inputs: `${hours} h × 15.12 m³/h, draw-down test of ${addDays(plan.stuckFrom, -26)}`,
      reason: 'Register did not move while the pump ran.',
    });
  }
  const record = await readSite(tx, ids.site);
  const point = record.roundPoints.find((one) => one.subjectId === ids.meters.H1)!;
  for (const [day, reasonCode] of [
    [plan.weekend.saturday, 'no-access'],
    [plan.weekend.sunday, 'no-access'],
  ] as const) {
    await createNotRead(
      tx,
      actors.as('operator', ids.site),
      actors.at(`${addDays(plan.weekend.sunday, 1)}T08:00:00Z`),
      {
        id: random.id(),
        roundPointId: point.id,
        siteDay: day,
        reasonCode,
        note: 'Gate at H1 locked over the weekend.',
      },
    );
  }
}
