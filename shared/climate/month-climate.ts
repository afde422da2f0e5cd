import { monthDays, type Day } from '../calendar/day.ts';
import { daysInMonth, type Month } from '../calendar/month.ts';
import type { MonthClimate } from '../water-balance/engine-input.ts';

/** One day or month of a station's record, numbers in mm and °C, null where missing. */
export interface ClimateValues {
  precipitationMm: number | null;
  tMinC: number | null;
  tMaxC: number | null;
  tMeanC: number | null;
  petMm: number | null;
}

export interface MonthSummary extends MonthClimate {
  /** Days of the month with precipitation, with temperature, and days in the month. */
  rainDayCount: number;
  temperatureDayCount: number;
  dayCount: number;
  isComplete: boolean;
}

const mean = (values: readonly number[]) =>
  values.length ? values.reduce((sum, value) => sum + value, 0) / values.length : null;
const present = (values: readonly (number | null)[]) =>
  values.filter((value): value is number => value !== null);

/** Mean of a day: recorded, or halfway between minimum and maximum. */
export const dayMeanC = (day: ClimateValues): number | null =>
  day.tMeanC ?? (day.tMinC !== null && day.tMaxC !== null ? (day.tMinC + day.tMaxC) / 2 : null);

/**
 * Adds a daily record up to a month. A month with missing days keeps their count and is never scaled.
 * @param byDay values by day; days without a row are missing
 */
export function summariseMonth(month: Month, byDay: ReadonlyMap<Day, ClimateValues>): MonthSummary {
  const days = monthDays(month).map((day) => byDay.get(day) ?? null);
  const rain = days.map((day) => day?.precipitationMm ?? null);
  const rainDays = present(rain);
  const means = present(days.map((day) => (day ? dayMeanC(day) : null)));
  const pet = present(days.map((day) => day?.petMm ?? null));
  const dayCount = daysInMonth(month);
  return {
    month,
    precipitationMm: rainDays.reduce((sum, value) => sum + value, 0),
    tMeanC: mean(means),
    tMinC: mean(present(days.map((day) => day?.tMinC ?? null))),
    tMaxC: mean(present(days.map((day) => day?.tMaxC ?? null))),
    petMm: pet.length === dayCount ? pet.reduce((sum, value) => sum + value, 0) : null,
    dailyPrecipitationMm: rainDays.length === dayCount ? rainDays : null,
    rainDayCount: rainDays.length,
    temperatureDayCount: means.length,
    dayCount,
    isComplete: rainDays.length === dayCount && means.length === dayCount,
  };
}

/** A month of a monthly record; complete when precipitation and a temperature are there. */
export function monthFromRecord(month: Month, values: ClimateValues): MonthSummary {
  const tMeanC = dayMeanC(values);
  const dayCount = daysInMonth(month);
  const hasRain = values.precipitationMm !== null;
  return {
    month,
    precipitationMm: values.precipitationMm ?? 0,
    tMeanC,
    tMinC: values.tMinC,
    tMaxC: values.tMaxC,
    petMm: values.petMm,
    dailyPrecipitationMm: null,
    rainDayCount: hasRain ? dayCount : 0,
    temperatureDayCount: tMeanC !== null ? dayCount : 0,
    dayCount,
    isComplete: hasRain && (tMeanC !== null || values.petMm !== null),
  };
}

export type GapChoice = 'leave-out' | 'scale-by-days' | 'other-station' | 'station-normal';

/**
 * A month with missing days after the engineer's choice; the choice is stored and printed beside the month.
 * @param normal long-term mean of the same month of the year at the station, or null
 * @returns null when the choice is to leave the month out, or cannot be followed
 */
export function settleGap(
  summary: MonthSummary,
  choice: GapChoice,
  normal: MonthClimate | null,
  other: MonthSummary | null,
): MonthClimate | null {
  if (choice === 'scale-by-days') {
    if (summary.rainDayCount === 0 || summary.tMeanC === null) return null;
    return {
      ...summary,
      precipitationMm: (summary.precipitationMm * summary.dayCount) / summary.rainDayCount,
      dailyPrecipitationMm: null,
    };
  }
  if (choice === 'other-station') return other?.isComplete ? other : null;
  if (choice === 'station-normal')
    return normal && { ...normal, month: summary.month, dailyPrecipitationMm: null };
  return null;
}
