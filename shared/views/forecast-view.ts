import type { Calibration } from '../calibration/calibrate.ts';
import type { StormHeadroom } from '../forecast/storm-headroom.ts';
import type { ForecastSummary } from '../forecast/summarise-members.ts';

export interface ForecastScenarioView {
  name: string;
  /** What is planned, in sentences with their days. */
  changes: { onDay: string; sentence: string }[];
  /** Ground under each cover at the end of the forecast, ha. */
  endAreas: { cellCode: string; coverName: string; areaHa: number }[];
}

export interface ForecastAbout {
  firstMonth: string;
  monthCount: number;
  memberCount: number;
  seed: number;
  /** Whole climate years that the draws come from. */
  yearCount: number;
  sourceFirst: string;
  sourceLast: string;
  scenarios: ForecastScenarioView[];
  store: {
    code: string;
    name: string;
    startLevelM: number;
    startedOn: string;
    operatingLevelM: number;
    crestLevelM: number;
    plantM3PerDay: number;
    loadM3: number;
    loadsPerDayMax: number;
  } | null;
  storm: (StormHeadroom & { stormMm: number; openAreaM2: number; share: number }) | null;
  parameterSet: { name: string; version: number };
  cautions: string[];
}

export interface ForecastView {
  id: string;
  state: 'running' | 'done' | 'cancelled' | 'failed';
  doneCount: number;
  wantedCount: number;
  failure: string | null;
  about: ForecastAbout;
  /** One for each scenario; empty until all are done. */
  summaries: ForecastSummary[];
}

/** What the page needs to offer a forecast. */
export interface ForecastStartView {
  firstMonth: string;
  /** Values of the current set, as the middle of the ranges. */
  parameters: {
    runoffFactor: number;
    petFactor: number;
    recessionPerMonth: number;
    channelledFraction: number;
  };
  /** Working area and lined floor that drain to leachate today, m². */
  openAreaM2: number;
  /** Mean volume that left the store a day over the last twelve months, m³/d; null where nothing was read. */
  treatedM3PerDay: number | null;
  plots: { id: string; cellCode: string; name: string; areaM2: string; coverName: string }[];
  coverTypes: { id: string; name: string }[];
  stores: { id: string; code: string; name: string }[];
}

export interface CalibrationView extends Calibration {
  cell: { id: string; code: string; name: string };
  firstMonth: string;
  lastMonth: string;
  heldBackFrom: string;
  leftOutCount: number;
  baseSet: { name: string; version: number };
}
