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
  panMm: number | null;
  windMPerS: number | null;
  relativeHumidityPercent: number | null;
  sunshineHours: number | null;
}

/** A day or month of which nothing is known. */
export const noClimate: ClimateValues = {
  precipitationMm: null,
  tMinC: null,
  tMaxC: null,
  tMeanC: null,
  petMm: null,
  panMm: null,
  windMPerS: null,
  relativeHumidityPercent: null,
  sunshineHours: null,
};

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
  const days = monthDays(month).map((day) => byDay.get(day) ?? noClimate);
  const dayCount = daysInMonth(month);
  const of = (field: keyof ClimateValues) => present(days.map((day) => day[field]));
  /** Every day of a field, or null when one is missing. */
  const whole = (values: number[]) => (values.length === dayCount ? values : null);
  const sumOf = (field: keyof ClimateValues) =>
    whole(of(field))?.reduce((sum, value) => sum + value, 0) ?? null;
  const meanOf = (field: keyof ClimateValues) => mean(whole(of(field)) ?? []);
  const rainDays = of('precipitationMm');
  const means = present(days.map(dayMeanC));
  return {
    month,
    precipitationMm: rainDays.reduce((sum, value) => sum + value, 0),
    tMeanC: mean(means),
    tMinC: mean(of('tMinC')),
    tMaxC: mean(of('tMaxC')),
    petMm: sumOf('petMm'),
    panMm: sumOf('panMm'),
    windMPerS: meanOf('windMPerS'),
    relativeHumidityPercent: meanOf('relativeHumidityPercent'),
    sunshineHours: meanOf('sunshineHours'),
    days:
      byDay.size === 0
        ? null
        : {
            precipitationMm: whole(rainDays),
            tMinC: whole(of('tMinC')),
            tMaxC: whole(of('tMaxC')),
            tMeanC: whole(means),
            windMPerS: whole(of('windMPerS')),
            relativeHumidityPercent: whole(of('relativeHumidityPercent')),
            sunshineHours: whole(of('sunshineHours')),
          },
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
    ...values,
    month,
    precipitationMm: values.precipitationMm ?? 0,
    tMeanC,
    days: null,
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
      days: summary.days && { ...summary.days, precipitationMm: null },
    };
  }
  if (choice === 'other-station') return other?.isComplete ? other : null;
  if (choice === 'station-normal') return normal && { ...normal, month: summary.month, days: null };
  return null;
}
