import { uniformInt } from 'pure-rand/distribution/uniformInt';
import type { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';
import { addMonths, monthParts, type Month } from '../calendar/month.ts';
import type { BalanceParameters } from '../water-balance/engine-input.ts';
import { computeSnow } from '../water-balance/snow.ts';

export type Random = ReturnType<typeof xoroshiro128plus>;

/** Months the draws take their weather from: whole years in order, with the PET of the method in force. */
export interface SourceClimate {
  months: Month[];
  precipitationMm: number[];
  tMeanC: (number | null)[];
  petMm: number[];
}

/** First months of the whole years that a draw may start from, as positions in the source. */
export function yearStarts(source: Pick<SourceClimate, 'months'>, firstMonth: Month): number[] {
  const { monthOfYear } = monthParts(firstMonth);
  return source.months.flatMap((month, index) =>
    monthParts(month).monthOfYear === monthOfYear && source.months[index + 11] === addMonths(month, 11)
      ? [index]
      : [],
  );
}

/** Weather of one member, month by month; written over by the next member. */
export interface MemberWeather {
  rainMm: Float64Array;
  snowfallMm: Float64Array;
  meltMm: Float64Array;
  dSnowMm: Float64Array;
  petMm: Float64Array;
  isFrozen: Uint8Array;
}

/**
 * Draws whole climate years, one after another, and what snow makes of them from the pack of today.
 * @param starts where whole years begin in the source
 */
export function createWeather(
  source: SourceClimate,
  starts: readonly number[],
  packMmAtStart: number,
  monthCount: number,
  { snow: settings, isFrostOn, tFrostC }: Pick<BalanceParameters, 'snow' | 'isFrostOn' | 'tFrostC'>,
): { weather: MemberWeather; draw: (random: Random) => void } {
  const weather: MemberWeather = {
    rainMm: new Float64Array(monthCount),
    snowfallMm: new Float64Array(monthCount),
    meltMm: new Float64Array(monthCount),
    dSnowMm: new Float64Array(monthCount),
    petMm: new Float64Array(monthCount),
    isFrozen: new Uint8Array(monthCount),
  };
  const draw = (random: Random): void => {
    let packMm = packMmAtStart;
    for (let month = 0; month < monthCount; month += 12) {
      const start = starts[uniformInt(random, 0, starts.length - 1)]!;
      for (let index = month; index < Math.min(monthCount, month + 12); index += 1) {
        const at = start + index - month;
        const tMeanC = source.tMeanC[at] ?? 20;
        const snow = computeSnow(packMm, source.precipitationMm[at]!, tMeanC, settings);
        packMm = snow.packMm;
        weather.rainMm[index] = snow.rainMm;
        weather.snowfallMm[index] = snow.snowfallMm;
        weather.meltMm[index] = snow.meltMm;
        weather.dSnowMm[index] = snow.dSnowMm;
        weather.petMm[index] = source.petMm[at]!;
        weather.isFrozen[index] = isFrostOn && tMeanC <= tFrostC ? 1 : 0;
      }
    }
  };
  return { weather, draw };
}
