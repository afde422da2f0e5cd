import {
  daylightHours,
  declinationRad,
  extraterrestrialRadiation,
  mmPerMegajoule,
} from './solar-geometry.ts';

/** Saturation vapour pressure, kPa. Source: FAO-56 eq. 11. */
export const saturationPressureKPa = (tC: number): number => 0.6108 * Math.exp((17.27 * tC) / (tC + 237.3));

/** Slope of the vapour pressure curve, kPa/°C. Source: FAO-56 eq. 13. */
export const pressureSlope = (tC: number): number => (4098 * saturationPressureKPa(tC)) / (tC + 237.3) ** 2;

/** Atmospheric pressure, kPa, by height, m. Source: FAO-56 eq. 7. */
export const atmosphericPressureKPa = (elevationM: number): number =>
  101.3 * ((293 - 0.0065 * elevationM) / 293) ** 5.26;

/** Psychrometric constant, kPa/°C. Source: FAO-56 eq. 8. */
export const psychrometricConstant = (elevationM: number): number =>
  0.665e-3 * atmosphericPressureKPa(elevationM);

/** Wind at 2 m from wind at another height, m/s. Source: FAO-56 eq. 47. */
export const windAt2m = (windMPerS: number, heightM: number): number =>
  (windMPerS * 4.87) / Math.log(67.8 * heightM - 5.42);

/** Solar radiation from hours of bright sunshine, MJ/m²·d. Source: FAO-56 eq. 35 with 0.25 and 0.50. */
export const solarRadiationFromSunshine = (
  radiationMjPerM2Day: number,
  sunshineHours: number,
  daylight: number,
): number => (0.25 + 0.5 * (sunshineHours / daylight)) * radiationMjPerM2Day;

/** Clear-sky radiation, MJ/m²·d. Source: FAO-56 eq. 37. */
export const clearSkyRadiation = (radiationMjPerM2Day: number, elevationM: number): number =>
  (0.75 + 2e-5 * elevationM) * radiationMjPerM2Day;

const stefanBoltzmann = 4.903e-9;

/**
 * Net outgoing longwave radiation, MJ/m²·d.
 * @param input.vapourPressureKPa actual vapour pressure @source FAO-56 eq. 39
 */
export function netLongwaveRadiation(input: {
  tMinC: number;
  tMaxC: number;
  vapourPressureKPa: number;
  solarRadiation: number;
  clearSky: number;
}): number {
  const { tMinC, tMaxC, vapourPressureKPa, solarRadiation, clearSky } = input;
  const relative = clearSky > 0 ? Math.min(1, solarRadiation / clearSky) : 0.05;
  return (
    ((stefanBoltzmann * ((tMaxC + 273.16) ** 4 + (tMinC + 273.16) ** 4)) / 2) *
    (0.34 - 0.14 * Math.sqrt(vapourPressureKPa)) *
    (1.35 * relative - 0.35)
  );
}

/** What Penman–Monteith needs of a day or of the mean day of a month; a null is substituted and flagged. */
export interface PenmanMonteithInput {
  latitudeDeg: number;
  elevationM: number;
  dayOfYear: number;
  tMinC: number;
  tMaxC: number;
  vapourPressureKPa: number | null;
  windMPerS: number | null;
  sunshineHours: number | null;
  /** Soil heat flux, MJ/m²·d; 0 for a day. */
  soilHeatFlux: number;
  /** Stand-ins for what is null: wind, m/s, and the coefficient of the temperature range, °C^-0.5. */
  defaults: { windMPerS: number; radiationCoefficient: number };
}

export const substitutionWords = {
  vapour: 'vapour pressure taken at the minimum temperature (FAO-56 eq. 48)',
  wind: 'wind taken as set (FAO-56 p. 63)',
  radiation: 'radiation from the temperature range (FAO-56 eq. 50)',
} as const;
export type Substitution = keyof typeof substitutionWords;

export interface PenmanMonteithDay {
  mmPerDay: number;
  radiationPartMm: number;
  aerodynamicPartMm: number;
  netRadiation: number;
  solarRadiation: number;
  clearSky: number;
  netLongwave: number;
  extraterrestrial: number;
  vapourPressureKPa: number;
  slope: number;
  gamma: number;
  substitutions: Substitution[];
}

/**
 * Reference evapotranspiration of a day, mm, by FAO-56 Penman–Monteith; what is missing follows its chapter 3.
 * ET = [0.408 Δ (Rn − G) + γ 900/(T + 273) u (es − ea)] / [Δ + γ (1 + 0.34 u)]
 * @throws RangeError when the minimum is above the maximum
 * @source Allen, Pereira, Raes & Smith 1998, FAO-56 eq. 6
 * @example Uccle, 6 July, Example 18 p. 72: 3.9 mm
 */
export function penmanMonteith(input: PenmanMonteithInput): PenmanMonteithDay {
  const { latitudeDeg, elevationM, dayOfYear, tMinC, tMaxC } = input;
  if (tMinC > tMaxC)
    throw new RangeError(`The minimum temperature (${tMinC} °C) is above the maximum (${tMaxC} °C).`);
  const meanC = (tMinC + tMaxC) / 2;
  const substitutions: Substitution[] = [];
  if (input.vapourPressureKPa === null) substitutions.push('vapour');
  if (input.windMPerS === null) substitutions.push('wind');
  if (input.sunshineHours === null) substitutions.push('radiation');
  const vapourPressureKPa = input.vapourPressureKPa ?? saturationPressureKPa(tMinC);
  const wind = input.windMPerS ?? input.defaults.windMPerS;
  const extraterrestrial = extraterrestrialRadiation(latitudeDeg, dayOfYear);
  const clearSky = clearSkyRadiation(extraterrestrial, elevationM);
  const solarRadiation =
    input.sunshineHours === null
      ? Math.min(clearSky, input.defaults.radiationCoefficient * Math.sqrt(tMaxC - tMinC) * extraterrestrial)
      : solarRadiationFromSunshine(
          extraterrestrial,
          input.sunshineHours,
          daylightHours(latitudeDeg, declinationRad(dayOfYear)),
        );
  const netLongwave = netLongwaveRadiation({ tMinC, tMaxC, vapourPressureKPa, solarRadiation, clearSky });
  const netRadiation = 0.77 * solarRadiation - netLongwave;
  const slope = pressureSlope(meanC);
  const gamma = psychrometricConstant(elevationM);
  const saturation = (saturationPressureKPa(tMinC) + saturationPressureKPa(tMaxC)) / 2;
  const below = slope + gamma * (1 + 0.34 * wind);
  const radiationPartMm = (mmPerMegajoule * slope * (netRadiation - input.soilHeatFlux)) / below;
  const aerodynamicPartMm =
    (gamma * (900 / (meanC + 273)) * wind * Math.max(0, saturation - vapourPressureKPa)) / below;
  return {
    mmPerDay: Math.max(0, radiationPartMm + aerodynamicPartMm),
    radiationPartMm,
    aerodynamicPartMm,
    netRadiation,
    solarRadiation,
    clearSky,
    netLongwave,
    extraterrestrial,
    vapourPressureKPa,
    slope,
    gamma,
    substitutions,
  };
}

/** Soil heat flux of a month, MJ/m²·d, from the months around it. Source: FAO-56 eq. 43; eq. 44 without the next. */
export const monthlySoilHeatFlux = (tBeforeC: number, tAfterC: number): number => 0.07 * (tAfterC - tBeforeC);
/** Soil heat flux of a month whose next month is not known, MJ/m²·d. Source: FAO-56 eq. 44. */
export const monthlySoilHeatFluxSoFar = (tBeforeC: number, tMeanC: number): number =>
  0.14 * (tMeanC - tBeforeC);
