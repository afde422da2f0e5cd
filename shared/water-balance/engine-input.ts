import type { Day } from '../calendar/day.ts';
import type { Month } from '../calendar/month.ts';
import type { CoverKind } from './cover-types.ts';
import type { SnowSettings } from './snow.ts';
import type { SoilLaw } from './soil-store.ts';
import type { HotMonths } from './thornthwaite.ts';

export const petMethods = ['thornthwaite', 'hargreaves', 'given'] as const;
export type PetMethod = (typeof petMethods)[number];

/** Parameters of the model. A default is a template until an engineer of the site confirms it. */
export interface BalanceParameters {
  petMethod: PetMethod;
  hotMonths: HotMonths;
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
  leakFraction: number;
  isSpunUp: boolean;
  /** Percent differences are muted while the prediction is below this depth, mm. */
  percentFloorMm: number;
}

/**
 * Values a new site starts with.
 * @assumed recession 0.5 per month (our choice, no published constant), channelled share 0.1, wet months by the northern winter
 */
export const parameterTemplate: BalanceParameters = {
  petMethod: 'thornthwaite',
  hotMonths: 'table',
  soilLaw: 'exponential',
  wetMonths: [11, 12, 1, 2, 3, 4],
  runoffFactor: 1,
  petFactor: 1,
  snow: { isOn: true, tSnowC: -10, tRainC: 3.3, meltMaxFraction: 0.5 },
  isFrostOn: false,
  tFrostC: 0,
  recessionPerMonth: 0.5,
  channelledFraction: 0.1,
  leakFraction: 0,
  isSpunUp: true,
  percentFloorMm: 5,
};

export interface MonthClimate {
  month: Month;
  precipitationMm: number;
  tMeanC: number | null;
  tMinC: number | null;
  tMaxC: number | null;
  petMm: number | null;
  /** Rain of each day of the month, mm, where a daily record without gaps exists. */
  dailyPrecipitationMm: number[] | null;
}

export interface EngineCover {
  kind: CoverKind;
  name: string;
  availableWaterMm: number;
  membranePassFraction: number | null;
  runoffCoefficientWet: number;
  runoffCoefficientDry: number;
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

export const engineVersion = '1.0.0';
