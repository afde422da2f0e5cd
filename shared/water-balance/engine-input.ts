import type { Day } from '../calendar/day.ts';
import type { Month } from '../calendar/month.ts';
import type { CoverKind } from './cover-types.ts';
import type { DefectLeakage } from './liner-leakage.ts';
import type { SnowSettings } from './snow.ts';
import type { SoilLaw } from './soil-store.ts';
import type { HotMonths } from './thornthwaite.ts';

export const petMethods = ['thornthwaite', 'hargreaves', 'penman-monteith', 'pan', 'given'] as const;
export type PetMethod = (typeof petMethods)[number];

export const runoffMethods = ['coefficient', 'curve-number'] as const;
export type RunoffMethod = (typeof runoffMethods)[number];

/** Parameters of the model. A default is a template until an engineer of the site confirms it. */
export interface BalanceParameters {
  petMethod: PetMethod;
  hotMonths: HotMonths;
  /** Class A pan to reference evapotranspiration. */
  panCoefficient: number;
  /** Wind at 2 m where no wind is recorded, m/s. */
  windMPerS: number;
  /** Radiation from the temperature range where neither radiation nor sunshine is recorded, °C^-0.5. */
  radiationCoefficient: number;
  runoffMethod: RunoffMethod;
  soilLaw: SoilLaw;
  /** Months of the year, 1–12, with the wet-season runoff share. */
  wetMonths: number[];
  runoffFactor: number;
  petFactor: number;
  snow: SnowSettings;
  isFrostOn: boolean;
  tFrostC: number;
  recessionPerMonth: number;
  channelledFraction: number;
  /** Factor on the deficit to field capacity that placed waste brings. */
  deficitFactor: number;
  /** Share of the drained water that leaks, or leakage through defects by the head on the liner. */
  leakMethod: 'fraction' | 'defects';
  leakFraction: number;
  liner: DefectLeakage;
  isSpunUp: boolean;
  /** Percent differences are muted while the prediction is below this depth, mm. */
  percentFloorMm: number;
}

/**
 * Values a new site starts with.
 * @assumed recession 0.5 per month (our choice, no published constant), channelled share 0.1, wet months by the
 * northern winter, pan coefficient 0.7 (within FAO-56 Table 5), 2 defects of 1 cm² a hectare (common practice, no
 * source); wind 2 m/s and 0.16 for the interior are FAO-56 p. 63 and eq. 50
 */
export const parameterTemplate: BalanceParameters = {
  petMethod: 'thornthwaite',
  hotMonths: 'table',
  panCoefficient: 0.7,
  windMPerS: 2,
  radiationCoefficient: 0.16,
  runoffMethod: 'coefficient',
  soilLaw: 'exponential',
  wetMonths: [11, 12, 1, 2, 3, 4],
  runoffFactor: 1,
  petFactor: 1,
  snow: { isOn: true, tSnowC: -10, tRainC: 3.3, meltMaxFraction: 0.5, meltMmPerCDay: 2.74 },
  isFrostOn: false,
  tFrostC: 0,
  recessionPerMonth: 0.5,
  channelledFraction: 0.1,
  deficitFactor: 1,
  leakMethod: 'fraction',
  leakFraction: 0,
  liner: {
    defectsPerHa: 2,
    defectAreaM2: 0.0001,
    contact: 'good',
    soilThicknessM: 0.6,
    soilConductivityMPerS: 1e-9,
    drainLengthM: 30,
    slope: 0.02,
    drainConductivityMPerS: 0.001,
  },
  isSpunUp: true,
  percentFloorMm: 5,
};

/** A stored set with the settings that came later at their templates. */
export const completeParameters = (stored: Partial<BalanceParameters>): BalanceParameters => ({
  ...parameterTemplate,
  ...stored,
  snow: { ...parameterTemplate.snow, ...stored.snow },
  liner: { ...parameterTemplate.liner, ...stored.liner },
});

/** Values of the days of a month, in order; a series with a gap is null. */
export interface MonthDays {
  precipitationMm: number[] | null;
  tMinC: number[] | null;
  tMaxC: number[] | null;
  tMeanC: number[] | null;
  windMPerS: number[] | null;
  relativeHumidityPercent: number[] | null;
  sunshineHours: number[] | null;
}

export interface MonthClimate {
  month: Month;
  precipitationMm: number;
  tMeanC: number | null;
  tMinC: number | null;
  tMaxC: number | null;
  petMm: number | null;
  panMm: number | null;
  windMPerS: number | null;
  relativeHumidityPercent: number | null;
  sunshineHours: number | null;
  /** Days of the month where a daily record exists; each of its series without gaps, or null. */
  days: MonthDays | null;
}

export interface EngineCover {
  kind: CoverKind;
  name: string;
  availableWaterMm: number;
  /** Share that passes the membrane, or null without one. */
  membranePassFraction: number | null;
  /** Leakage through defects instead of a share; null where the share is entered. */
  membraneDefects: DefectLeakage | null;
  runoffCoefficientWet: number;
  runoffCoefficientDry: number;
  /** Curve number at average antecedent condition; null where only a share is known. */
  curveNumber: number | null;
  runoffDestination: 'storm-water' | 'leachate';
  petFactor: number;
}

export interface EnginePeriod {
  coverTypeId: string;
  fromOn: Day;
  toOn: Day | null;
  initialSoilStoreMm: number | null;
}

export interface EnginePlot {
  id: string;
  parentId: string | null;
  areaM2: number;
  fromOn: Day;
  toOn: Day | null;
  periods: EnginePeriod[];
}

export interface EngineCell {
  id: string;
  code: string;
  initialWasteDeficitMm: number;
  initialWasteStoreMm: number;
  plots: EnginePlot[];
  /** Deficit that the waste of a month adds, m³; negative is free moisture. */
  placedDeficitM3: Record<Month, number>;
  returns: { siteDay: Day; plotIds: string[]; isAtSurface: boolean; volumeM3: number }[];
  /** Gas condensate led to the drainage layer, m³ by month. */
  condensateM3: Record<Month, number>;
  /** Mean head on the liner as measured, m by month; the computed head stands in where there is none. */
  measuredHeadM: Record<Month, number>;
}

/** The complete input of a run; frozen runs store it as canonical JSON. */
export interface EngineInput {
  latitudeDeg: number;
  elevationM: number;
  climate: MonthClimate[];
  covers: Record<string, EngineCover>;
  cells: EngineCell[];
  parameters: BalanceParameters;
}

export const engineVersion = '2.0.0';
