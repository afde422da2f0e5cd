export interface SnowSettings {
  isOn: boolean;
  tSnowC: number;
  tRainC: number;
  meltMaxFraction: number;
  /** Melt of a day of a daily record, mm for each °C above freezing. */
  meltMmPerCDay: number;
}

export interface SnowMonth {
  rainMm: number;
  snowfallMm: number;
  meltMm: number;
  packMm: number;
  dSnowMm: number;
  /** Rain, snowfall and melt of each day where the month was computed by days. */
  days: { rainMm: number[]; snowfallMm: number[]; meltMm: number[] } | null;
}

/** A smaller pack melts whole in a month at or above the rain temperature: our choice. */
const lastPackMm = 1;

/**
 * Snow of one month: all snow at or below tSnow, all rain at or above tRain, linear between; the month's snow is added first.
 * @param packBeforeMm water in the pack at the start of the month, mm
 * @source McCabe & Markstrom 2007, USGS OFR 2007-1088 (equations from memory); tRain 3.3 °C and melt 0.5 read there
 */
export function computeSnow(
  packBeforeMm: number,
  precipitationMm: number,
  tMeanC: number,
  settings: SnowSettings,
): SnowMonth {
  if (!settings.isOn)
    return {
      rainMm: precipitationMm,
      snowfallMm: 0,
      meltMm: packBeforeMm,
      packMm: 0,
      dSnowMm: -packBeforeMm,
      days: null,
    };
  const warmth = Math.min(1, Math.max(0, (tMeanC - settings.tSnowC) / (settings.tRainC - settings.tSnowC)));
  const rainMm = precipitationMm * warmth;
  const snowfallMm = precipitationMm * (1 - warmth);
  const available = packBeforeMm + snowfallMm;
  const meltsWhole = available < lastPackMm && tMeanC >= settings.tRainC;
  const meltMm = meltsWhole ? available : available * settings.meltMaxFraction * warmth;
  const packMm = meltsWhole ? 0 : available * (1 - settings.meltMaxFraction * warmth);
  return { rainMm, snowfallMm, meltMm, packMm, dSnowMm: packMm - packBeforeMm, days: null };
}

const freezingC = 0;

/**
 * Snow of one month by days, degree-day method: snow at or below freezing, melt in proportion to the degrees above.
 * @param precipitationMm @param tMeanC values of the days, in order
 * @source USDA-NRCS NEH-630 ch. 11 (second-hand), 2.74 mm/°C·d where nothing else is known
 */
export function computeDailySnow(
  packBeforeMm: number,
  precipitationMm: readonly number[],
  tMeanC: readonly number[],
  meltMmPerCDay: number,
): SnowMonth {
  const days = { rainMm: [] as number[], snowfallMm: [] as number[], meltMm: [] as number[] };
  const month = { rainMm: 0, snowfallMm: 0, meltMm: 0 };
  let packMm = packBeforeMm;
  precipitationMm.forEach((depth, index) => {
    const t = tMeanC[index]!;
    const isSnow = t <= freezingC;
    const snowfallMm = isSnow ? depth : 0;
    const rainMm = isSnow ? 0 : depth;
    const meltMm = Math.min(packMm + snowfallMm, Math.max(0, meltMmPerCDay * (t - freezingC)));
    packMm += snowfallMm - meltMm;
    days.rainMm.push(rainMm);
    days.snowfallMm.push(snowfallMm);
    days.meltMm.push(meltMm);
    month.rainMm += rainMm;
    month.snowfallMm += snowfallMm;
    month.meltMm += meltMm;
  });
  return { ...month, packMm, dSnowMm: packMm - packBeforeMm, days };
}
