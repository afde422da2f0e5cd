export interface SnowSettings {
  isOn: boolean;
  tSnowC: number;
  tRainC: number;
  meltMaxFraction: number;
}

export interface SnowMonth {
  rainMm: number;
  snowfallMm: number;
  meltMm: number;
  packMm: number;
  dSnowMm: number;
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
    };
  const warmth = Math.min(1, Math.max(0, (tMeanC - settings.tSnowC) / (settings.tRainC - settings.tSnowC)));
  const rainMm = precipitationMm * warmth;
  const snowfallMm = precipitationMm * (1 - warmth);
  const available = packBeforeMm + snowfallMm;
  const meltsWhole = available < lastPackMm && tMeanC >= settings.tRainC;
  const meltMm = meltsWhole ? available : available * settings.meltMaxFraction * warmth;
  const packMm = meltsWhole ? 0 : available * (1 - settings.meltMaxFraction * warmth);
  return { rainMm, snowfallMm, meltMm, packMm, dSnowMm: packMm - packBeforeMm };
}
