import { Decimal } from 'decimal.js';
import type { Day } from '../calendar/day.ts';
import { addDays } from '../calendar/day.ts';
import type { SiteDays } from '../calendar/site-days.ts';
import type { Interval } from './intervals.ts';

export interface DayVolume {
  siteDay: Day;
  basis: 'measured' | 'apportioned' | 'estimated';
  volumeM3: Decimal;
  factIds: string[];
}

/** Part of an interval that falls on one site day. */
export interface DayPart {
  siteDay: Day;
  volumeM3: Decimal;
  fromMs: number;
  toMs: number;
}

const smallestM3 = 6;

/**
 * Spreads an interval's volume evenly over elapsed time and cuts it at the site's day boundaries.
 * Days of 23 and 25 hours count as they are. Parts are rounded to 1e-6 m³ and the last takes the remainder.
 * @returns parts that add exactly to the interval's volume; none while the volume is held
 * @source method section 12
 */
export function splitInterval(
  interval: Pick<Interval, 'fromMs' | 'toMs' | 'volumeM3'>,
  siteDays: SiteDays,
): DayPart[] {
  const { fromMs, toMs, volumeM3 } = interval;
  if (volumeM3 === null || toMs <= fromMs) return [];
  const total = volumeM3.toDecimalPlaces(smallestM3, Decimal.ROUND_HALF_UP);
  const parts: DayPart[] = [];
  let day = siteDays.dayOf(fromMs);
  let startMs = fromMs;
  let given = new Decimal(0);
  while (startMs < toMs) {
    const endMs = Math.min(siteDays.startMs(addDays(day, 1)), toMs);
    const isLast = endMs >= toMs;
    const share = isLast
      ? total.minus(given)
      : total
          .times(endMs - startMs)
          .div(toMs - fromMs)
          .toDecimalPlaces(smallestM3, Decimal.ROUND_HALF_UP);
    parts.push({ siteDay: day, volumeM3: share, fromMs: startMs, toMs: endMs });
    given = given.plus(share);
    startMs = endMs;
    day = addDays(day, 1);
  }
  return parts;
}

/**
 * Day volumes of a meter. A day is measured when all its parts come from intervals of at most `measuredHoursMax`,
 * else apportioned; estimated parts stay apart.
 * @returns one row per site day and basis, in order
 */
export function computeDayVolumes(
  intervals: readonly Interval[],
  siteDays: SiteDays,
  measuredHoursMax: number,
): DayVolume[] {
  const rows = new Map<string, DayVolume>();
  const apportionedDays = new Set<Day>();
  const parts = intervals.flatMap((interval) =>
    splitInterval(interval, siteDays).map((part) => ({ part, interval })),
  );
  for (const { part, interval } of parts) {
    if (interval.basis === 'measured' && interval.toMs - interval.fromMs > measuredHoursMax * 3_600_000)
      apportionedDays.add(part.siteDay);
  }
  for (const { part, interval } of parts) {
    const basis =
      interval.basis === 'estimated'
        ? 'estimated'
        : apportionedDays.has(part.siteDay)
          ? 'apportioned'
          : 'measured';
    const key = `${part.siteDay} ${basis}`;
    const row = rows.get(key);
    rows.set(key, {
      siteDay: part.siteDay,
      basis,
      volumeM3: (row?.volumeM3 ?? new Decimal(0)).plus(part.volumeM3),
      factIds: [...new Set([...(row?.factIds ?? []), ...interval.factIds])],
    });
  }
  return [...rows.values()].sort((a, b) => (a.siteDay < b.siteDay ? -1 : a.siteDay > b.siteDay ? 1 : 0));
}
