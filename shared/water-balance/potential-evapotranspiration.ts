import { dayOfYear, monthDays } from '../calendar/day.ts';
import { monthName, daysInMonth, monthParts, type Month } from '../calendar/month.ts';
import type { BalanceParameters, MonthClimate } from './engine-input.ts';
import { hargreavesMmPerDay } from './hargreaves.ts';
import { daylightHours, declinationRad, extraterrestrialRadiation } from './solar-geometry.ts';
import { annualHeatIndex, thornthwaiteMm } from './thornthwaite.ts';

/** Twelve long-term monthly means of temperature over a record, °C; null when a month of the year never occurs. */
export function longTermMeansC(climate: readonly MonthClimate[]): number[] | null {
  const means: number[] = [];
  for (let monthOfYear = 1; monthOfYear <= 12; monthOfYear += 1) {
    const values = climate
      .filter((row) => monthParts(row.month).monthOfYear === monthOfYear && row.tMeanC !== null)
      .map((row) => row.tMeanC!);
    if (!values.length) return null;
    means.push(values.reduce((sum, value) => sum + value, 0) / values.length);
  }
  return means;
}

/** Mean extraterrestrial radiation over the days of a month, MJ/m²·d. */
export function monthlyRadiation(latitudeDeg: number, month: Month): number {
  const days = monthDays(month);
  return (
    days.reduce((sum, day) => sum + extraterrestrialRadiation(latitudeDeg, dayOfYear(day)), 0) / days.length
  );
}

/** Why a month has no PET, as a sentence. */
export class PetMissing extends Error {}

/**
 * Reference PET of a month, mm, by the method of the parameter set; the cover's factor comes later.
 * @param heatIndex annual heat index over the record, needed by Thornthwaite only
 * @throws PetMissing naming the month and what to bring
 */
export function referencePetMm(
  row: MonthClimate,
  latitudeDeg: number,
  parameters: Pick<BalanceParameters, 'petMethod' | 'hotMonths' | 'petFactor'>,
  heatIndex: number | null,
): number {
  const dayCount = daysInMonth(row.month);
  if (parameters.petMethod === 'given') {
    if (row.petMm === null)
      throw new PetMissing(`${monthName(row.month)} has no given PET. Upload it, or choose another method.`);
    return row.petMm * parameters.petFactor;
  }
  if (parameters.petMethod === 'hargreaves') {
    if (row.tMinC === null || row.tMaxC === null)
      throw new PetMissing(
        `${monthName(row.month)} has no minimum and maximum temperature, which Hargreaves–Samani needs.`,
      );
    const radiationMjPerM2Day = monthlyRadiation(latitudeDeg, row.month);
    return (
      hargreavesMmPerDay({ tMinC: row.tMinC, tMaxC: row.tMaxC, radiationMjPerM2Day }) *
      dayCount *
      parameters.petFactor
    );
  }
  if (row.tMeanC === null)
    throw new PetMissing(`${monthName(row.month)} has no mean temperature, which Thornthwaite needs.`);
  if (heatIndex === null)
    throw new PetMissing(
      'Thornthwaite needs every month of the year at least once in the record for its heat index.',
    );
  const middle = declinationRad(dayOfYear(`${row.month}-15`));
  return (
    thornthwaiteMm({
      tMeanC: row.tMeanC,
      heatIndex,
      daylightHours: daylightHours(latitudeDeg, middle),
      dayCount,
      hotMonths: parameters.hotMonths,
    }) * parameters.petFactor
  );
}

/** Annual heat index of a record, or null when it does not cover the year. */
export function recordHeatIndex(climate: readonly MonthClimate[]): number | null {
  const means = longTermMeansC(climate);
  return means && annualHeatIndex(means);
}
