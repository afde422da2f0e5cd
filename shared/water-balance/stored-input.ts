import { noClimate } from '../climate/month-climate.ts';
import { completeParameters, type EngineInput, type MonthClimate } from './engine-input.ts';

/** A month as engine 1 kept it. */
type EarlierMonth = MonthClimate & { dailyPrecipitationMm?: number[] | null };

/**
 * The input of a frozen run as the engine of today takes it: what came later stands at the value that changes nothing.
 * @param text canonical JSON as it was frozen, by this engine or an earlier one
 */
export function readStoredInput(text: string): EngineInput {
  const stored = JSON.parse(text) as EngineInput;
  return {
    ...stored,
    climate: stored.climate.map(({ dailyPrecipitationMm, ...row }: EarlierMonth) => ({
      ...noClimate,
      ...row,
      days: dailyPrecipitationMm
        ? {
            precipitationMm: dailyPrecipitationMm,
            tMinC: null,
            tMaxC: null,
            tMeanC: null,
            windMPerS: null,
            relativeHumidityPercent: null,
            sunshineHours: null,
          }
        : (row.days ?? null),
    })),
    covers: Object.fromEntries(
      Object.entries(stored.covers).map(([id, cover]) => [
        id,
        { ...cover, membraneDefects: cover.membraneDefects ?? null, curveNumber: cover.curveNumber ?? null },
      ]),
    ),
    cells: stored.cells.map((cell) => ({
      ...cell,
      condensateM3: cell.condensateM3 ?? {},
      measuredHeadM: cell.measuredHeadM ?? {},
    })),
    parameters: completeParameters(stored.parameters),
  };
}
