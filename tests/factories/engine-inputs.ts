import { monthRange, type Month } from '#shared/calendar/month.ts';
import {
  parameterTemplate,
  type BalanceParameters,
  type EngineCell,
  type EngineCover,
  type EngineInput,
  type EnginePlot,
  type MonthClimate,
} from '#shared/water-balance/engine-input.ts';

export const cover = (change: Partial<EngineCover> = {}): EngineCover => ({
  kind: 'working-area',
  name: 'working area',
  availableWaterMm: 60,
  membranePassFraction: null,
  membraneDefects: null,
  curveNumber: null,
  runoffCoefficientWet: 0,
  runoffCoefficientDry: 0,
  runoffDestination: 'leachate',
  petFactor: 1,
  ...change,
});

export const plot = (change: Partial<EnginePlot> & { coverTypeId?: string } = {}): EnginePlot => {
  const { coverTypeId = 'open', ...rest } = change;
  return {
    id: 'plot',
    parentId: null,
    areaM2: 10_000,
    fromOn: '2025-01-01',
    toOn: null,
    periods: [{ coverTypeId, fromOn: '2025-01-01', toOn: null, initialSoilStoreMm: null }],
    ...rest,
  };
};

export const cell = (change: Partial<EngineCell> = {}): EngineCell => ({
  id: 'cell',
  code: 'C1',
  initialWasteDeficitMm: 0,
  initialWasteStoreMm: 0,
  plots: [plot()],
  placedDeficitM3: {},
  returns: [],
  condensateM3: {},
  measuredHeadM: {},
  ...change,
});

export const climateMonth = (month: Month, change: Partial<MonthClimate> = {}): MonthClimate => ({
  month,
  precipitationMm: 80,
  tMeanC: 12,
  tMinC: 8,
  tMaxC: 16,
  petMm: 40,
  panMm: null,
  windMPerS: null,
  relativeHumidityPercent: null,
  sunshineHours: null,
  days: null,
  ...change,
});

/** Input of a run with given PET, no snow and no delay in the waste unless asked. */
export function engineInput(
  change: Partial<Omit<EngineInput, 'parameters'>> & { parameters?: Partial<BalanceParameters> } = {},
): EngineInput {
  const { parameters, ...rest } = change;
  return {
    latitudeDeg: 53.4,
    elevationM: 118,
    climate: monthRange('2025-01', '2025-12').map((month) => climateMonth(month)),
    covers: { open: cover() },
    cells: [cell()],
    parameters: {
      ...parameterTemplate,
      petMethod: 'given',
      channelledFraction: 0,
      isSpunUp: false,
      ...parameters,
      snow: { ...parameterTemplate.snow, isOn: false, ...parameters?.snow },
    },
    ...rest,
  };
}
