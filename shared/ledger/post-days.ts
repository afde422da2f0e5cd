import { Decimal } from 'decimal.js';
import { monthOfDay, type Day } from '../calendar/day.ts';
import type { Month } from '../calendar/month.ts';
import type { DayVolume } from './day-volumes.ts';

/** A live entry of one meter: neither reversed nor a reversal. */
export interface LiveEntry {
  id: string;
  siteDay: Day;
  basis: string;
  volumeM3: string;
}

export interface Posting {
  reversals: LiveEntry[];
  postings: DayVolume[];
  /** Months whose days would change but are closed: nothing is posted there. */
  pendingMonths: Month[];
}

/**
 * Compares recomputed days with the live entries and says what to reverse and what to post.
 * @param days recomputed volumes of the affected days only
 * @param live live entries of the same meter on the same days
 */
export function planPosting(
  days: readonly DayVolume[],
  live: readonly LiveEntry[],
  closedMonths: ReadonlySet<Month>,
): Posting {
  const key = (row: { siteDay: Day; basis: string }) => `${row.siteDay} ${row.basis}`;
  const liveByKey = new Map(live.map((entry) => [key(entry), entry]));
  const wantedKeys = new Set(days.map(key));
  const reversals: LiveEntry[] = [];
  const postings: DayVolume[] = [];
  for (const day of days) {
    const entry = liveByKey.get(key(day));
    if (entry && new Decimal(entry.volumeM3).eq(day.volumeM3)) continue;
    if (entry) reversals.push(entry);
    postings.push(day);
  }
  reversals.push(...live.filter((entry) => !wantedKeys.has(key(entry))));
  const isClosed = (row: { siteDay: Day }) => closedMonths.has(monthOfDay(row.siteDay));
  const pendingMonths = [
    ...new Set([...reversals, ...postings].filter(isClosed).map((row) => monthOfDay(row.siteDay))),
  ].sort();
  return {
    reversals: reversals.filter((row) => !isClosed(row)),
    postings: postings.filter((row) => !isClosed(row)),
    pendingMonths,
  };
}
