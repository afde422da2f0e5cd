import { addDays, dayOfYear, firstDay, monthDays } from '../calendar/day.ts';
import { daysInMonth, monthName, monthParts, type Month } from '../calendar/month.ts';
import type { BalanceParameters, MonthClimate } from './engine-input.ts';
import { hargreavesMmPerDay } from './hargreaves.ts';
import {
  monthlySoilHeatFlux,
  monthlySoilHeatFluxSoFar,
  penmanMonteith,
  saturationPressureKPa,
  type Substitution,
} from './penman-monteith.ts';
import { daylightHours, declinationRad, extraterrestrialRadiation } from './solar-geometry.ts';
import {
  annualHeatIndex,
  thornthwaiteExponent,
  thornthwaiteMm,
  thornthwaiteUnadjustedMm,
} from './thornthwaite.ts';

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

/** Annual heat index of a record, or null when it does not cover the year. */
export function recordHeatIndex(climate: readonly MonthClimate[]): number | null {
  const means = longTermMeansC(climate);
  return means && annualHeatIndex(means);
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

/** Beyond this latitude the radiation formulas lose their hold in winter, degrees. Source: FAO-56 p. 48. */
const radiationLatitudeDeg = 55;

export interface MonthPet {
  petMm: number;
  /** PET of each day where the method runs on days; null where the month is the unit. */
  days: number[] | null;
  substitutions: Substitution[];
  isOutsideRadiation: boolean;
  /** What the month's figure was put together from, for its working; empty where it was made of days. */
  parts: PetPart[];
}

export interface PetPart {
  what: string;
  how: string;
  value: number;
  unit: string;
}

export type PetSettings = Pick<
  BalanceParameters,
  'petMethod' | 'hotMonths' | 'panCoefficient' | 'windMPerS' | 'radiationCoefficient'
>;

interface PetSite {
  latitudeDeg: number;
  elevationM: number;
  /** Annual heat index over the record, needed by Thornthwaite only. */
  heatIndex: number | null;
}

const isWinter = (latitudeDeg: number, month: Month): boolean => {
  const { monthOfYear } = monthParts(month);
  return latitudeDeg >= 0 ? monthOfYear <= 2 || monthOfYear >= 11 : monthOfYear >= 5 && monthOfYear <= 8;
};

const temperatureRange = (row: MonthClimate, method: string) => {
  if (row.tMinC === null || row.tMaxC === null)
    throw new PetMissing(
      `${monthName(row.month)} has no minimum and maximum temperature, which ${method} needs.`,
    );
  return { tMinC: row.tMinC, tMaxC: row.tMaxC };
};

function hargreavesMonth(row: MonthClimate, { latitudeDeg }: PetSite): Pick<MonthPet, 'petMm' | 'days'> {
  const first = dayOfYear(firstDay(row.month));
  const { tMinC, tMaxC } = row.days ?? {};
  if (tMinC && tMaxC) {
    const days = tMinC.map((low, index) =>
      hargreavesMmPerDay({
        tMinC: low,
        tMaxC: tMaxC[index]!,
        radiationMjPerM2Day: extraterrestrialRadiation(latitudeDeg, first + index),
      }),
    );
    return { petMm: sum(days), days };
  }
  const range = temperatureRange(row, 'Hargreaves–Samani');
  const radiationMjPerM2Day = monthlyRadiation(latitudeDeg, row.month);
  return {
    petMm: hargreavesMmPerDay({ ...range, radiationMjPerM2Day }) * daysInMonth(row.month),
    days: null,
  };
}

const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0);

const vapourPressureKPa = (tMinC: number, tMaxC: number, humidityPercent: number | null | undefined) =>
  humidityPercent === null || humidityPercent === undefined
    ? null
    : (humidityPercent / 100) * ((saturationPressureKPa(tMinC) + saturationPressureKPa(tMaxC)) / 2);

function penmanMonteithMonth(
  row: MonthClimate,
  { latitudeDeg, elevationM }: PetSite,
  settings: PetSettings,
  neighbours: { before: MonthClimate | undefined; after: MonthClimate | undefined },
): Pick<MonthPet, 'petMm' | 'days' | 'substitutions' | 'parts'> {
  const site = { latitudeDeg, elevationM, defaults: settings };
  const first = dayOfYear(firstDay(row.month));
  const { tMinC: lows, tMaxC: highs } = row.days ?? {};
  if (lows && highs) {
    const days = lows.map((tMinC, index) =>
      penmanMonteith({
        ...site,
        dayOfYear: first + index,
        tMinC,
        tMaxC: highs[index]!,
        vapourPressureKPa: vapourPressureKPa(
          tMinC,
          highs[index]!,
          row.days?.relativeHumidityPercent?.[index],
        ),
        windMPerS: row.days?.windMPerS?.[index] ?? null,
        sunshineHours: row.days?.sunshineHours?.[index] ?? null,
        soilHeatFlux: 0,
      }),
    );
    const depths = days.map((day) => day.mmPerDay);
    return { petMm: sum(depths), days: depths, substitutions: days[0]!.substitutions, parts: [] };
  }
  const range = temperatureRange(row, 'Penman–Monteith');
  const tBeforeC = neighbours.before?.tMeanC ?? null;
  const tAfterC = neighbours.after?.tMeanC ?? null;
  const soilHeatFlux =
    tBeforeC === null || row.tMeanC === null
      ? 0
      : tAfterC === null
        ? monthlySoilHeatFluxSoFar(tBeforeC, row.tMeanC)
        : monthlySoilHeatFlux(tBeforeC, tAfterC);
  const day = penmanMonteith({
    ...site,
    ...range,
    dayOfYear: dayOfYear(addDays(firstDay(row.month), 14)),
    vapourPressureKPa: vapourPressureKPa(range.tMinC, range.tMaxC, row.relativeHumidityPercent),
    windMPerS: row.windMPerS,
    sunshineHours: row.sunshineHours,
    soilHeatFlux,
  });
  const part = (what: string, how: string, value: number, unit = 'MJ/m²·d'): PetPart => ({
    what,
    how,
    value,
    unit,
  });
  return {
    petMm: day.mmPerDay * daysInMonth(row.month),
    days: null,
    substitutions: day.substitutions,
    parts: [
      part('Extraterrestrial radiation, Ra', 'of the 15th, FAO-56 eq. 21', day.extraterrestrial),
      part(
        'Solar radiation, Rs',
        'from sunshine, eq. 35, or the temperature range, eq. 50',
        day.solarRadiation,
      ),
      part('Net radiation, Rn', '0.77 × Rs − net longwave, eq. 39 and 40', day.netRadiation),
      part('Soil heat flux, G', 'from the months around it, eq. 43 or 44', soilHeatFlux),
      part(
        'Actual vapour pressure, ea',
        'eq. 19, or at the minimum temperature, eq. 48',
        day.vapourPressureKPa,
        'kPa',
      ),
      part('Slope of the vapour pressure, Δ', 'eq. 13', day.slope, 'kPa/°C'),
      part('Psychrometric constant, γ', 'eq. 8', day.gamma, 'kPa/°C'),
      part('Reference evapotranspiration', 'radiation part + aerodynamic part, eq. 6', day.mmPerDay, 'mm/d'),
    ],
  };
}

/**
 * Reference PET of a month, mm, by the method of the parameter set; the factors of set and cover come later.
 * @throws PetMissing naming the month and what to bring
 */
export function referencePet(
  row: MonthClimate,
  site: PetSite,
  settings: PetSettings,
  neighbours: { before: MonthClimate | undefined; after: MonthClimate | undefined },
): MonthPet {
  const plain = { days: null, substitutions: [], isOutsideRadiation: false, parts: [] };
  const usesRadiation = settings.petMethod === 'hargreaves' || settings.petMethod === 'penman-monteith';
  const isOutsideRadiation =
    usesRadiation &&
    Math.abs(site.latitudeDeg) > radiationLatitudeDeg &&
    isWinter(site.latitudeDeg, row.month);
  switch (settings.petMethod) {
    case 'given':
      if (row.petMm === null)
        throw new PetMissing(
          `${monthName(row.month)} has no given PET. Upload it, or choose another method.`,
        );
      return { ...plain, petMm: row.petMm };
    case 'pan':
      if (row.panMm === null)
        throw new PetMissing(
          `${monthName(row.month)} has no pan evaporation. Upload it, or choose another method.`,
        );
      return { ...plain, petMm: row.panMm * settings.panCoefficient };
    case 'hargreaves':
      return { ...plain, ...hargreavesMonth(row, site), isOutsideRadiation };
    case 'penman-monteith':
      return { ...penmanMonteithMonth(row, site, settings, neighbours), isOutsideRadiation };
    case 'thornthwaite': {
      if (row.tMeanC === null)
        throw new PetMissing(`${monthName(row.month)} has no mean temperature, which Thornthwaite needs.`);
      if (site.heatIndex === null)
        throw new PetMissing(
          'Thornthwaite needs every month of the year at least once in the record for its heat index.',
        );
      const middle = declinationRad(dayOfYear(`${row.month}-15`));
      const daylight = daylightHours(site.latitudeDeg, middle);
      return {
        ...plain,
        petMm: thornthwaiteMm({
          tMeanC: row.tMeanC,
          heatIndex: site.heatIndex,
          daylightHours: daylight,
          dayCount: daysInMonth(row.month),
          hotMonths: settings.hotMonths,
        }),
        parts: [
          {
            what: 'Exponent, a',
            how: '6.75·10⁻⁷ I³ − 7.71·10⁻⁵ I² + 0.01792 I + 0.49239',
            value: thornthwaiteExponent(site.heatIndex),
            unit: '',
          },
          {
            what: 'PET of 30 days of 12 hours',
            how: '16 × (10 T ÷ I)^a, 0 at or below freezing; the hot months as set',
            value: thornthwaiteUnadjustedMm(row.tMeanC, site.heatIndex, settings.hotMonths),
            unit: 'mm',
          },
        ],
      };
    }
  }
}
