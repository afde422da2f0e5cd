const mmPerInch = 25.4;

/** Potential retention S, mm, of a curve number. Source: USDA-NRCS TR-55 (1986); NEH-630 ch. 10. */
export const retentionMm = (curveNumber: number): number => (1000 / curveNumber - 10) * mmPerInch;

/**
 * Direct runoff of one day's rain, mm: Q = (P − Ia)² / (P − Ia + S) above the initial abstraction Ia = 0.2 S.
 * Holds for the rain of a day; never for a month's total.
 * @source USDA-NRCS TR-55 (1986), Table 2-1
 * @example curveNumberRunoffMm(127, 75) // 62.1, 2.45 in of Table 2-1
 */
export function curveNumberRunoffMm(rainMm: number, curveNumber: number): number {
  const retention = retentionMm(curveNumber);
  const effective = rainMm - 0.2 * retention;
  return effective > 0 ? (effective * effective) / (effective + retention) : 0;
}

/** Curve number on dry ground (condition I). Source: Chow, Maidment & Mays 1988. */
export const dryCurveNumber = (average: number): number => (4.2 * average) / (10 - 0.058 * average);
/** Curve number on wet ground (condition III). Source: Chow, Maidment & Mays 1988. */
export const wetCurveNumber = (average: number): number => (23 * average) / (10 + 0.13 * average);

/**
 * Curve number of a day by the rain of the five days before.
 * @param fiveDayRainMm null where the days before are not known: average condition
 * @source NEH-4 (1972) limits: 13 and 28 mm in the dormant season, 36 and 53 mm in the growing season (from memory)
 */
export function antecedentCurveNumber(
  average: number,
  fiveDayRainMm: number | null,
  isGrowing: boolean,
): number {
  if (fiveDayRainMm === null) return average;
  const [dry, wet] = isGrowing ? [36, 53] : [13, 28];
  if (fiveDayRainMm < dry) return dryCurveNumber(average);
  return fiveDayRainMm > wet ? wetCurveNumber(average) : average;
}

/** Mean temperature from which a month counts as growing season, °C. @assumed our choice, common practice, no source */
export const growingFromC = 10;

/**
 * Runoff of each day of a month, mm.
 * @param rainMm rain of the days @param before rain of the days before the month, latest last
 */
export function monthCurveRunoffMm(
  rainMm: readonly number[],
  before: readonly number[],
  curveNumber: number,
  isGrowing: boolean,
): number[] {
  const all = [...before.slice(-5), ...rainMm];
  const offset = all.length - rainMm.length;
  return rainMm.map((rain, index) => {
    const end = offset + index;
    let five: number | null = null;
    if (end >= 5) {
      five = 0;
      for (let day = end - 5; day < end; day += 1) five += all[day]!;
    }
    return curveNumberRunoffMm(rain, antecedentCurveNumber(curveNumber, five, isGrowing));
  });
}
