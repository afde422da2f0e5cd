import { daysBetween, firstDay, type Day } from '../calendar/day.ts';
import { addMonths, type Month } from '../calendar/month.ts';

export interface SumpLevel {
  siteDay: Day;
  levelM: number;
}

/** A level stands for the start of a month when it was read within so many days of it. @assumed our choice */
const nearDays = 3;

function levelAt(levels: readonly SumpLevel[], day: Day): number | null {
  const near = levels
    .map((level) => ({ level, away: Math.abs(daysBetween(day, level.siteDay)) }))
    .filter((one) => one.away <= nearDays)
    .sort((a, b) => a.away - b.away)[0];
  return near?.level.levelM ?? null;
}

/**
 * Change of liquid standing in a sump over a month, m³: level × area of the sump × porosity of its stone.
 * @param levels as read, in any order
 * @returns null when the sump's area or porosity is not known, or no level was read near an end of the month
 * @source method section 9
 */
export function sumpStorageChangeM3(
  sump: { areaM2: number | null; porosityFraction: number | null },
  levels: readonly SumpLevel[],
  month: Month,
): number | null {
  if (sump.areaM2 === null || sump.porosityFraction === null) return null;
  const start = levelAt(levels, firstDay(month));
  const end = levelAt(levels, firstDay(addMonths(month, 1)));
  return start === null || end === null ? null : (end - start) * sump.areaM2 * sump.porosityFraction;
}
