import { Decimal } from 'decimal.js';
import { addDays, dayNumber, monthDays, monthOfDay, weekday, type Day } from '#shared/calendar/day.ts';
import type { SiteDays } from '#shared/calendar/site-days.ts';
import { rectangularPondTable, storeAtLevel } from '#shared/ledger/store-volume.ts';
import type { DemoPlan } from './demo-plan.ts';
import { pondShape } from './demo-site.ts';
import type { DemoWeatherDay } from './demo-weather.ts';
import type { Random } from './random.ts';

/** Water of one day of the demo, m³. */
export interface DemoDay {
  day: Day;
  header: number;
  east: number;
  leakL: number;
  plant: number;
  outfall: number;
  hauledLoads: number;
  /** Level of the pond on the morning of the day, m. */
  levelM: number;
}

export const loadM3 = 20.8;

/** Spreads a month's leachate over its days with a little unrest; the month keeps its sum. */
function spreadMonth(random: Random, monthM3: number, days: Day[], rainByDay: Map<Day, number>): number[] {
  const weights = days.map(
    (day) => Math.exp(random.normal(0, 0.09)) * (1 + 0.012 * (rainByDay.get(addDays(day, -1)) ?? 0)),
  );
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  return weights.map((weight) => (monthM3 * weight) / total);
}

function levelOf(volumeM3: number, table: ReturnType<typeof rectangularPondTable>): number {
  let [low, high] = [0, pondShape.depthM];
  for (let step = 0; step < 40; step += 1) {
    const middle = (low + high) / 2;
    if ((storeAtLevel(table, middle)?.volumeM3 ?? 0) < volumeM3) low = middle;
    else high = middle;
  }
  return low;
}

/**
 * Simulates the pumps, the pond and the plant day by day.
 * @param trueM3 leachate that really came, by `cell code month`
 */
export function simulateVolumes(
  random: Random,
  plan: DemoPlan,
  weather: DemoWeatherDay[],
  trueM3: ReadonlyMap<string, number>,
  petMmPerDay: (day: Day) => number,
): DemoDay[] {
  const rainByDay = new Map(weather.map((one) => [one.day, one.rainMm]));
  const flows = new Map<Day, { header: number; east: number }>();
  for (const month of new Set(weather.map((one) => monthOfDay(one.day)))) {
    const days = monthDays(month);
    const header = spreadMonth(
      random,
      (trueM3.get(`C1 ${month}`) ?? 0) + (trueM3.get(`C2 ${month}`) ?? 0),
      days,
      rainByDay,
    );
    const east = spreadMonth(random, trueM3.get(`C3 ${month}`) ?? 0, days, rainByDay);
    days.forEach((day, index) => flows.set(day, { header: header[index]!, east: east[index]! }));
  }
  const table = rectangularPondTable(pondShape);
  let volume = storeAtLevel(table, 1.5)!.volumeM3;
  return weather.map(({ day, rainMm }) => {
    const levelM = levelOf(volume, table);
    const surfaceM2 = storeAtLevel(table, levelM)!.surfaceM2;
    const { header, east } = flows.get(day)!;
    const leakL = day >= plan.leakFrom ? 6 + (dayNumber(day) % 5) : 0;
    const plant = Math.max(18, Math.min(185, 70 + (levelM - 1.4) * 110 + random.normal(0, 5)));
    const hauledLoads = levelM > 2.2 && !['Saturday', 'Sunday'].includes(weekday(day)) ? 2 : 0;
    volume +=
      header +
      east +
      leakL / 1000 +
      (rainMm * 3400) / 1000 -
      (petMmPerDay(day) * surfaceM2) / 1000 -
      plant -
      hauledLoads * loadM3;
    volume = Math.max(400, Math.min(7200, volume));
    return {
      day,
      header,
      east,
      leakL,
      plant,
      outfall: plant * random.between(0.975, 0.99),
      hauledLoads,
      levelM,
    };
  });
}

export interface DemoReading {
  day: Day;
  observedAtMs: number;
  text: string;
  value: string;
  answer: 'none' | 'rollover';
}

/** Morning of a day at the meter: between 07:15 and 07:55 on the site's clock. */
export function morningMs(days: SiteDays, day: Day, minute: number): number {
  return days.startMs(day) + (7 * 60 + minute) * 60_000;
}

/**
 * Readings of a register each morning: the flow of a day runs evenly, the register shows whole units and wraps at its digits.
 * @param skip days on which nobody read it
 */
export function readRegister(
  random: Random,
  days: SiteDays,
  rows: { day: Day; volumeM3: number }[],
  register: {
    start: string;
    digits: number;
    unitM3: string;
    skip: (day: Day) => boolean;
    stuckOn?: (day: Day) => boolean;
  },
): DemoReading[] {
  const modulus = new Decimal(10).pow(register.digits);
  let total = new Decimal(register.start).times(register.unitM3);
  let last = new Decimal(-1);
  const readings: DemoReading[] = [];
  rows.forEach(({ day, volumeM3 }, index) => {
    const minute = 15 + Math.floor(random.next() * 40);
    const share = (7 * 60 + minute) / 1440;
    const wasStuck = index > 0 && (register.stuckOn?.(rows[index - 1]!.day) ?? false);
    // A stuck register misses everything from one morning to the next.
    const atReading = wasStuck ? total : total.plus(volumeM3 * share);
    total = register.stuckOn?.(day) ? atReading : atReading.plus(volumeM3 * (1 - share));
    if (register.skip(day)) return;
    const shown = atReading.div(register.unitM3).floor().mod(modulus);
    const value = shown.toFixed(0);
    readings.push({
      day,
      observedAtMs: morningMs(days, day, minute),
      text: value.padStart(register.digits, '0'),
      value,
      answer: shown.lt(last) ? 'rollover' : 'none',
    });
    last = shown;
  });
  return readings;
}
