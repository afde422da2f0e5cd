/** From this mean temperature on, the hot-month setting applies, °C. */
const hotFromC = 26.5;
/** The table form is not given above this temperature, °C. */
const tableEndC = 37.5;

/** Monthly heat index of a mean temperature. Source: Thornthwaite 1948. */
export const monthlyHeatIndex = (tMeanC: number): number => (tMeanC > 0 ? (tMeanC / 5) ** 1.514 : 0);

/**
 * Annual heat index I over the record's long-term monthly means.
 * @param monthlyMeansC twelve means, °C
 * @source Thornthwaite 1948
 */
export const annualHeatIndex = (monthlyMeansC: readonly number[]): number =>
  monthlyMeansC.reduce((sum, mean) => sum + monthlyHeatIndex(mean), 0);

/** Exponent a of Thornthwaite's law, constants at full length. Source: Thornthwaite 1948. */
export const thornthwaiteExponent = (heatIndex: number): number =>
  6.75e-7 * heatIndex ** 3 - 7.71e-5 * heatIndex ** 2 + 1.792e-2 * heatIndex + 0.49239;

export type HotMonths = 'table' | 'power';

/**
 * PET of a month of 30 days of 12 hours, mm.
 * Hot months: *table* −415.85 + 32.24 T − 0.43 T² (Willmott, Rowe & Mintz 1985), or the *power* law throughout.
 * @param tMeanC mean temperature of the month, °C; 0 at or below freezing
 */
export function thornthwaiteUnadjustedMm(tMeanC: number, heatIndex: number, hotMonths: HotMonths): number {
  if (tMeanC <= 0 || heatIndex <= 0) return 0;
  if (tMeanC >= hotFromC && hotMonths === 'table') {
    const t = Math.min(tMeanC, tableEndC);
    return -415.85 + 32.24 * t - 0.43 * t * t;
  }
  return 16 * ((10 * tMeanC) / heatIndex) ** thornthwaiteExponent(heatIndex);
}

/** PET of a month, mm: the unadjusted value × daylight/12 × days/30. Source: Thornthwaite 1948. */
export function thornthwaiteMm(input: {
  tMeanC: number;
  heatIndex: number;
  daylightHours: number;
  dayCount: number;
  hotMonths: HotMonths;
}): number {
  return (
    thornthwaiteUnadjustedMm(input.tMeanC, input.heatIndex, input.hotMonths) *
    (input.daylightHours / 12) *
    (input.dayCount / 30)
  );
}
