import { daysInMonth, monthName, type Month } from './month.ts';

/** A calendar day as text, 'YYYY-MM-DD'. */
export type Day = string;

const dayPattern = /^(\d{4})-(0[1-9]|1[0-2])-(\d{2})$/;
const weekdays = ['Sunday', 'Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday'];

export function isDay(text: string): boolean {
  const match = dayPattern.exec(text);
  return (
    match !== null && Number(match[3]) >= 1 && Number(match[3]) <= daysInMonth(`${match[1]}-${match[2]}`)
  );
}

/** Days since 1 January 1970 in the proleptic Gregorian calendar. @throws RangeError for text that is no day */
export function dayNumber(day: Day): number {
  if (!isDay(day)) throw new RangeError(`"${day}" is not a day like 2026-03-04.`);
  return (
    Date.UTC(Number(day.slice(0, 4)), Number(day.slice(5, 7)) - 1, Number(day.slice(8, 10))) / 86_400_000
  );
}

export const dayFromNumber = (number: number): Day =>
  new Date(number * 86_400_000).toISOString().slice(0, 10);
export const addDays = (day: Day, count: number): Day => dayFromNumber(dayNumber(day) + count);
/** Days from the first to the second; negative when the second is earlier. */
export const daysBetween = (from: Day, to: Day): number => dayNumber(to) - dayNumber(from);
export const monthOfDay = (day: Day): Month => day.slice(0, 7);
export const firstDay = (month: Month): Day => `${month}-01`;
export const lastDay = (month: Month): Day => `${month}-${String(daysInMonth(month)).padStart(2, '0')}`;

export function monthDays(month: Month): Day[] {
  return Array.from(
    { length: daysInMonth(month) },
    (_, index) => `${month}-${String(index + 1).padStart(2, '0')}`,
  );
}

/** Day of the year, 1 to 366. */
export const dayOfYear = (day: Day): number => daysBetween(`${day.slice(0, 4)}-01-01`, day) + 1;

export const weekday = (day: Day): string => weekdays[(((dayNumber(day) + 4) % 7) + 7) % 7]!;

/** @example dayName('2026-03-01') // '1 March 2026' */
export const dayName = (day: Day): string => `${Number(day.slice(8, 10))} ${monthName(day.slice(0, 7))}`;
/** @example dayNameShort('2026-03-01') // '1 Mar' */
export const dayNameShort = (day: Day): string =>
  `${Number(day.slice(8, 10))} ${monthName(day.slice(0, 7)).slice(0, 3)}`;
