import * as z from 'zod';
import { calibratedNames } from '../calibration/calibrated-parameters.ts';
import { dayText } from './days.ts';
import { typedNumber, wholeNumber } from './numbers.ts';
import { chosenId, optionalId, recordId, requiredText } from './text.ts';

const number = (what: string, unit: string, min: number, max: number) =>
  typedNumber({ what, unit, min, max, decimals: 4 });

const range = (what: string, max: number) =>
  z
    .object({
      low: number(`the low end of ${what}`, '', 0, max),
      high: number(`the high end of ${what}`, '', 0, max),
    })
    .refine((one) => Number(one.low) <= Number(one.high), {
      path: ['high'],
      message: `The high end of ${what} must not lie below the low end.`,
    });

export const plannedChangeInput = z.discriminatedUnion('kind', [
  z.object({
    kind: z.literal('cover'),
    plotId: chosenId('the plot'),
    onDay: dayText('the day of the change'),
    coverTypeId: chosenId('the cover'),
    areaM2: typedNumber({ what: 'the area to be covered', unit: 'm²', minExclusive: 0 }),
  }),
  z.object({
    kind: z.literal('cell'),
    code: requiredText('the code of the new cell', 20),
    onDay: dayText('the day the cell opens'),
    coverTypeId: chosenId('the cover'),
    areaM2: typedNumber({ what: 'the area of the new cell', unit: 'm²', minExclusive: 0 }),
  }),
]);

export const scenarioInput = z.object({
  name: requiredText('a name for the plan', 60),
  changes: z.array(plannedChangeInput).max(20),
});

/** What a forecast is asked: how far, how many draws, how wide, and what empties the store. */
export const forecastInput = z.object({
  id: recordId,
  monthCount: wholeNumber('the months ahead', 3, 60),
  memberCount: wholeNumber('the count of draws', 50, 2000),
  seed: wholeNumber('the seed', 0, 2_000_000_000),
  storeId: optionalId,
  plantM3PerDay: number('what the plant treats', 'm³/d', 0, 100_000),
  loadM3: number('the volume of a load', 'm³', 0.1, 100),
  loadsPerDayMax: number('the most loads a day', '', 0, 1000),
  stormMm: number('the design storm', 'mm', 0, 1000),
  stormAreaM2: number('the open ground that drains to the store', 'm²', 0, 10_000_000),
  stormShare: number('the share of the storm that arrives from open ground', '', 0, 1),
  ranges: z.object({
    runoffFactor: range('the runoff factor', 3),
    petFactor: range('the evapotranspiration factor', 2),
    recessionPerMonth: range('the recession constant', 5),
    channelledFraction: range('the channelled share', 1),
  }),
  scenarios: z.array(scenarioInput).min(1).max(3),
});
export type ForecastInput = z.input<typeof forecastInput>;

/** Which parameters are fitted to which cell, each within its bounds. */
export const calibrationInput = z.object({
  cellId: chosenId('the cell'),
  choices: z
    .array(
      z
        .object({
          name: z.enum(calibratedNames),
          low: number('the lower bound', '', 0, 10),
          high: number('the upper bound', '', 0, 10),
        })
        .refine((one) => Number(one.low) < Number(one.high), {
          path: ['high'],
          message: 'The upper bound must lie above the lower one.',
        }),
    )
    .min(1, 'Choose at least one parameter to fit.'),
});
export type CalibrationInput = z.input<typeof calibrationInput>;
