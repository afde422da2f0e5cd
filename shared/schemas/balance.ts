import * as z from 'zod';
import { petMethods, runoffMethods } from '../water-balance/engine-input.ts';
import { soilConductivityMaxMPerS } from '../water-balance/liner-leakage.ts';
import { chosenId, optionalText, recordId, requiredText } from './text.ts';

const share = (what: string, max = 1) =>
  z.coerce
    .number(`${what} must be a number.`)
    .min(0, `${what} must be 0 or more.`)
    .max(max, `${what} must be ${max} or less.`);

const degrees = (what: string, min: number, max: number) => {
  const sentence = `${what} must be from ${min} to ${max} °C.`;
  return z.coerce.number(sentence).min(min, sentence).max(max, sentence);
};

const within = (what: string, unit: string, min: number, max: number) => {
  const sentence = `${what} must be from ${min} to ${max} ${unit}.`;
  return z.coerce.number(sentence).min(min, sentence).max(max, sentence);
};

/** A membrane with its defects, the soil under it and the drain over it. */
export const defectLeakage = z.object({
  defectsPerHa: within('The count of defects', 'a hectare', 0, 1000),
  defectAreaM2: within('The area of a defect', 'm²', 2e-7, 5e-4),
  contact: z.enum(['good', 'poor'], { error: 'Choose the contact.' }),
  soilThicknessM: within('The thickness of the soil', 'm', 0.005, 10),
  soilConductivityMPerS: z.coerce
    .number('Enter the conductivity in m/s, like 1e-9.')
    .gt(0, 'The conductivity must be above 0.')
    .max(
      soilConductivityMaxMPerS,
      'The formula holds for soil below 1e-6 m/s. On more permeable soil enter a share instead.',
    ),
  drainLengthM: within('The length of the drain', 'm', 0.5, 500),
  slope: within('The slope', '(rise over run)', 0.001, 1.5),
  drainConductivityMPerS: within('The conductivity of the drain', 'm/s', 1e-7, 10),
});

/** Parameters of the model as they are stored, form and wire. */
export const balanceParameters = z.object({
  petMethod: z.enum(petMethods),
  hotMonths: z.enum(['table', 'power']),
  panCoefficient: within('The pan coefficient', '', 0.2, 1.2),
  windMPerS: within('The wind', 'm/s', 0.5, 15),
  radiationCoefficient: within('The radiation coefficient', '', 0.1, 0.25),
  runoffMethod: z.enum(runoffMethods),
  soilLaw: z.enum(['exponential', 'equal-availability', 'linear']),
  wetMonths: z.array(z.number().int().min(1).max(12)),
  runoffFactor: share('The runoff factor', 3),
  petFactor: share('The evapotranspiration factor', 2),
  snow: z
    .object({
      isOn: z.boolean(),
      tSnowC: degrees('The snow temperature', -30, 5),
      tRainC: degrees('The rain temperature', -5, 10),
      meltMaxFraction: share('The largest melt share'),
      meltMmPerCDay: within('The melt of a day', 'mm/°C', 0.5, 10),
    })
    .refine((snow) => snow.tRainC > snow.tSnowC, {
      path: ['tRainC'],
      message: 'The rain temperature must lie above the snow temperature.',
    }),
  isFrostOn: z.boolean(),
  tFrostC: degrees('The frost temperature', -20, 5),
  recessionPerMonth: share('The recession constant', 5),
  channelledFraction: share('The channelled share'),
  deficitFactor: share('The factor on the deficit of placed waste', 5),
  leakMethod: z.enum(['fraction', 'defects']),
  leakFraction: share('The leak share'),
  liner: defectLeakage,
  isSpunUp: z.boolean(),
  percentFloorMm: share('The floor for percent', 100),
});

export const parameterSetInput = z.object({
  id: recordId,
  name: requiredText('a name for the set', 60),
  values: balanceParameters,
});
export type ParameterSetInput = z.input<typeof parameterSetInput>;
export const freezeInput = z.object({ id: recordId, note: optionalText(500) });

export const compareNoteInput = z.object({
  id: recordId,
  cellId: chosenId('the cell'),
  month: z.string().regex(/^\d{4}-\d{2}$/),
  cause: requiredText('a cause', 120),
  state: z.enum(['open', 'explained', 'reconciled'], { error: 'Choose how it stands.' }),
  note: requiredText('the evidence', 2000),
});
export type CompareNoteInput = z.input<typeof compareNoteInput>;

const twelve = z.array(z.coerce.number('Enter a number.')).length(12, 'Enter twelve months.');

/** A balance to try: twelve months of one plot, nothing is stored. */
export const tryBalanceInput = z.object({
  precipitationMm: twelve.refine((values) => values.every((value) => value >= 0), 'Rain must be 0 or more.'),
  petMm: twelve.refine((values) => values.every((value) => value >= 0), 'Potential ET must be 0 or more.'),
  runoffCoefficient: twelve.refine(
    (values) => values.every((value) => value >= 0 && value <= 1),
    'A runoff share lies between 0 and 1.',
  ),
  capacityMm: z.coerce
    .number('Enter the soil store in mm.')
    .min(0, 'The soil store must be 0 or more.')
    .max(2000),
  soilLaw: z.enum(['exponential', 'equal-availability', 'linear']),
  start: z.union([z.literal('spin-up'), z.coerce.number().min(0)]),
});
export type TryBalanceInput = z.input<typeof tryBalanceInput>;
