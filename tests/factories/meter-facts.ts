import { createSiteDays, type SiteDays } from '#shared/calendar/site-days.ts';
import { computeDayVolumes, type DayVolume } from '#shared/ledger/day-volumes.ts';
import {
  computeIntervals,
  type AdjustmentFact,
  type Interval,
  type MeterEventFact,
  type MeterFacts,
  type ReadingFact,
} from '#shared/ledger/intervals.ts';
import type { RegisterSpec } from '#shared/ledger/register.ts';

/** A register of seven digits in cubic metres. */
export const sevenDigits: RegisterSpec = { digits: 7, decimals: 0, unit: 'm3', multiplier: '1' };

export const siteDaysFrom = (dayBoundary = '08:00', timeZone = 'Europe/London'): SiteDays =>
  createSiteDays([{ validFromOn: '2020-01-01', timeZone, dayBoundary }]);

/** Instant of a wall-clock text at the site, ms. */
export function atMs(siteDays: SiteDays, local: string): number {
  const read = siteDays.readLocal(local);
  if (read.kind !== 'ok') throw new RangeError(`${local} is not one plain instant here.`);
  return Date.parse(read.observedAt);
}

export const reading = (
  id: string,
  observedAtMs: number,
  registerValue: string,
  answer: ReadingFact['answer'] = 'none',
): ReadingFact => ({ id, observedAtMs, registerValue, answer });

export const replacement = (
  id: string,
  observedAtMs: number,
  change: Partial<MeterEventFact>,
): MeterEventFact => ({
  id,
  kind: 'replace',
  observedAtMs,
  registerBefore: null,
  registerAfter: null,
  digitsAfter: null,
  unitAfter: null,
  multiplierAfter: null,
  ...change,
});

interface MeterStory {
  spec?: RegisterSpec;
  readings: ReadingFact[];
  events?: MeterEventFact[];
  adjustments?: AdjustmentFact[];
  chosen?: string[];
}

export const meterFacts = ({
  spec = sevenDigits,
  readings,
  events = [],
  adjustments = [],
  chosen = [],
}: MeterStory): MeterFacts => ({ spec, readings, events, adjustments, chosenReadingIds: new Set(chosen) });

/** Intervals and day volumes of a meter's story; a day is measured up to intervals of 36 hours. */
export function daysOf(
  story: MeterStory,
  siteDays: SiteDays,
): { intervals: Interval[]; days: DayVolume[]; sentences: string[] } {
  const { intervals, findings } = computeIntervals(meterFacts(story));
  return {
    intervals,
    days: computeDayVolumes(intervals, siteDays, 36),
    sentences: findings.map((finding) => finding.sentence),
  };
}
