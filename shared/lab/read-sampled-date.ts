import { isDay, type Day } from '../calendar/day.ts';

export interface SampledDate {
  day: Day;
  time: string | null;
}

const monthNames = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec'];
const century = (year: number) => (year < 100 ? 2000 + year : year);
const pad = (value: number) => String(value).padStart(2, '0');

/** Order of day and month in a file's numeric dates, or null when nothing in it decides. */
export type DateOrder = 'day-first' | 'month-first' | null;

/** Looks at all numeric dates of a file: a part above 12 decides for the whole file. */
export function decideDateOrder(texts: readonly string[]): DateOrder {
  for (const text of texts) {
    const match = /^(\d{1,2})[/.-](\d{1,2})[/.-]\d{2,4}/.exec(text.trim());
    if (!match) continue;
    if (text.includes('.')) return 'day-first';
    if (Number(match[1]) > 12) return 'day-first';
    if (Number(match[2]) > 12) return 'month-first';
  }
  return null;
}

/**
 * Reads a sampling date: ISO, "04-Mar-26 09:10", "4/3/26" by the file's order.
 * @returns null when the text is no date; 'ambiguous' when the order is not known
 */
export function readSampledDate(text: string, order: DateOrder): SampledDate | 'ambiguous' | null {
  const tidy = text.trim();
  const timeMatch = /[T ](\d{1,2}):(\d{2})/.exec(tidy);
  const time = timeMatch ? `${pad(Number(timeMatch[1]))}:${timeMatch[2]}` : null;
  const made = (year: number, month: number, day: number): SampledDate | null => {
    const result = `${century(year)}-${pad(month)}-${pad(day)}`;
    return isDay(result) ? { day: result, time } : null;
  };
  const iso = /^(\d{4})-(\d{2})-(\d{2})/.exec(tidy);
  if (iso) return made(Number(iso[1]), Number(iso[2]), Number(iso[3]));
  const named = /^(\d{1,2})[-\s./]([A-Za-z]{3})[a-z]*[-\s./](\d{2,4})/.exec(tidy);
  if (named) {
    const month = monthNames.indexOf(named[2]!.toLowerCase()) + 1;
    return month ? made(Number(named[3]), month, Number(named[1])) : null;
  }
  const numeric = /^(\d{1,2})[/.-](\d{1,2})[/.-](\d{2,4})/.exec(tidy);
  if (!numeric) return null;
  const [first, second, year] = [Number(numeric[1]), Number(numeric[2]), Number(numeric[3])];
  if (order === null && first <= 12 && second <= 12 && first !== second) return 'ambiguous';
  return order === 'month-first' ? made(year, first, second) : made(year, second, first);
}
