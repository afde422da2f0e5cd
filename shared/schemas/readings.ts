import * as z from 'zod';
import { isDay } from '../calendar/day.ts';
import { volumeUnits } from '../units/unit-factors.ts';
import { dayText } from './days.ts';
import { optionalNumber, optionalWholeNumber, typedNumber } from './numbers.ts';
import { chosenId, optionalId, optionalText, recordId, requiredText } from './text.ts';

const wallTimeHint = 'Enter the day and time of the reading, like 2026-03-04 07:50.';

/** When something was seen: an instant from the device, or a wall-clock time at the site. */
export const observedFields = {
  observedAt: z.iso.datetime({ offset: true, error: 'Enter the time of the reading.' }).optional(),
  observedLocal: z.preprocess(
    (typed) => (typeof typed === 'string' ? typed.trim().replace(' ', 'T') : typed),
    z
      .string()
      .regex(/^\d{4}-\d{2}-\d{2}T([01]\d|2[0-3]):[0-5]\d$/, wallTimeHint)
      .refine((text) => isDay(text.slice(0, 10)), wallTimeHint)
      .optional(),
  ),
  /** Which of the two, when the clock shows an hour twice. */
  repeatedHour: z.enum(['earlier', 'later']).optional(),
  deviceId: z.string().max(80).optional(),
};

export const readingInput = z.object({
  id: recordId,
  meterId: chosenId('the meter'),
  registerText: z
    .string({ error: 'Enter what the register shows.' })
    .trim()
    .min(1, 'Enter what the register shows.')
    .max(40),
  answer: z.enum(['none', 'rollover', 'confirmed', 'held']).default('none'),
  note: optionalText(),
  supersedesId: optionalId,
  reason: optionalText(),
  ...observedFields,
});
export type ReadingInput = z.input<typeof readingInput>;

export const levelInput = z.object({
  id: recordId,
  storeId: optionalId,
  sumpId: optionalId,
  levelText: z.string({ error: 'Enter the level.' }).trim().min(1, 'Enter the level.').max(40),
  isConfirmed: z.boolean().default(false),
  note: optionalText(),
  supersedesId: optionalId,
  reason: optionalText(),
  ...observedFields,
});
export type LevelInput = z.input<typeof levelInput>;

export const rainInput = z.object({
  id: recordId,
  stationId: chosenId('the gauge'),
  kind: z.enum(['measured', 'trace', 'accumulated', 'snow-water']).default('measured'),
  depthText: z.string().trim().max(40).default(''),
  unit: z.enum(['mm', 'in']).default('mm'),
  accumulatedDays: optionalWholeNumber('the days since the gauge was last emptied', 2, 31),
  isConfirmed: z.boolean().default(false),
  ...observedFields,
});
export type RainInput = z.input<typeof rainInput>;

export const notReadReasons = [
  'no-access',
  'locked-out',
  'frozen',
  'power-failure',
  'meter-away',
  'other',
] as const;
export const notReadReasonNames: Record<(typeof notReadReasons)[number], string> = {
  'no-access': 'No access',
  'locked-out': 'Locked out',
  frozen: 'Frozen',
  'power-failure': 'Power failure',
  'meter-away': 'Meter away',
  other: 'Another reason',
};

export const notReadInput = z
  .object({
    id: recordId,
    roundPointId: chosenId('the point of the round'),
    siteDay: dayText('the day'),
    reasonCode: z.enum(notReadReasons, { error: 'Choose why it was not read.' }),
    note: optionalText(),
  })
  .refine((input) => input.reasonCode !== 'other' || input.note, {
    path: ['note'],
    message: 'Write down the reason.',
  });
export type NotReadInput = z.input<typeof notReadInput>;

export const roundNoteInput = z.object({
  id: recordId,
  siteDay: dayText('the day'),
  note: requiredText('the note', 2000),
});

export const loadOutInput = z
  .object({
    id: recordId,
    ticket: requiredText('the ticket number', 40),
    hauler: requiredText('the hauler', 80),
    truck: optionalText(40),
    fromPlaceId: chosenId('where the water comes from'),
    toPlaceId: chosenId('where the water goes'),
    nominalVolumeM3: optionalNumber({
      what: 'the nominal volume',
      unit: 'm³',
      min: 0,
      max: 60,
      aboveMax: 'A tanker holds 15 to 30 m³.',
    }),
    grossMassKg: optionalNumber({ what: 'the gross mass', unit: 'kg', min: 0, max: 80_000 }),
    tareMassKg: optionalNumber({ what: 'the tare mass', unit: 'kg', min: 0, max: 80_000 }),
    densityKgPerM3: optionalNumber({ what: 'the density', unit: 'kg/m³', min: 900, max: 1300 }),
    receivedVolumeM3: optionalNumber({ what: 'the received volume', unit: 'm³', min: 0, max: 60 }),
    officialVolume: z.enum(['nominal', 'weighed', 'received']).default('nominal'),
    isConfirmed: z.boolean().default(false),
    ...observedFields,
  })
  .superRefine((input, context) => {
    const issue = (path: string, message: string) =>
      context.addIssue({ code: 'custom', path: [path], message });
    const gross = input.grossMassKg === undefined ? undefined : Number(input.grossMassKg);
    const tare = input.tareMassKg === undefined ? undefined : Number(input.tareMassKg);
    if (gross !== undefined && tare !== undefined && tare >= gross)
      issue('tareMassKg', `The tare (${tare} kg) must be less than the gross mass (${gross} kg).`);
    if (input.officialVolume === 'nominal' && input.nominalVolumeM3 === undefined)
      issue('nominalVolumeM3', 'Enter the nominal volume in m³.');
    if (input.officialVolume === 'received' && input.receivedVolumeM3 === undefined)
      issue('receivedVolumeM3', 'Enter the received volume in m³.');
    if (input.officialVolume === 'weighed' && (gross === undefined || tare === undefined))
      issue('grossMassKg', 'Enter gross and tare in kg to use the weighed volume.');
  });
export type LoadOutInput = z.input<typeof loadOutInput>;

export const voidInput = z.object({ id: recordId, reason: requiredText('the reason', 2000) });

const registerText = z.preprocess(
  (typed) => (typed === '' ? undefined : typed),
  z
    .string()
    .trim()
    .regex(/^\d+(\.\d+)?$/, 'Enter what the register shows, digits only.')
    .optional(),
);

export const meterEventInput = z
  .object({
    id: recordId,
    meterId: chosenId('the meter'),
    kind: z.enum(
      ['replace', 'rollover', 'reset', 'power-loss', 'multiplier-changed', 'bypassed', 'suspect'],
      { error: 'Choose what happened.' },
    ),
    registerBefore: registerText,
    registerAfter: registerText,
    digitsAfter: optionalWholeNumber('the count of digits of the new register', 3, 12),
    unitAfter: z.preprocess((typed) => (typed === '' ? undefined : typed), z.enum(volumeUnits).optional()),
    multiplierAfter: optionalNumber({ what: 'the new multiplier', unit: '', minExclusive: 0, decimals: 6 }),
    note: optionalText(),
    ...observedFields,
  })
  .superRefine((input, context) => {
    const needsBoth = ['replace', 'reset', 'power-loss', 'multiplier-changed'].includes(input.kind);
    if (!needsBoth) return;
    if (input.registerBefore === undefined)
      context.addIssue({
        code: 'custom',
        path: ['registerBefore'],
        message: 'Enter what the register showed last.',
      });
    if (input.registerAfter === undefined)
      context.addIssue({
        code: 'custom',
        path: ['registerAfter'],
        message: 'Enter what the register shows now.',
      });
    if (input.kind === 'multiplier-changed' && input.multiplierAfter === undefined)
      context.addIssue({ code: 'custom', path: ['multiplierAfter'], message: 'Enter the new multiplier.' });
  });
export type MeterEventInput = z.input<typeof meterEventInput>;

export const estimateMethods = {
  'second-meter': 'second register on the same line',
  'hours-times-rate': 'hours run × tested rate',
  'tank-balance': 'balance of the tank or pond',
  'neighbour-days': 'mean of comparable days either side',
  judgement: 'engineer’s judgement',
} as const;

export const estimateInput = z.object({
  id: recordId,
  meterId: chosenId('the meter'),
  fromAt: z.iso.datetime({ offset: true, error: 'Enter the start of the span.' }),
  toAt: z.iso.datetime({ offset: true, error: 'Enter the end of the span.' }),
  volumeM3: typedNumber({ what: 'the estimated volume', unit: 'm³', min: 0 }),
  method: z.enum(Object.keys(estimateMethods) as [keyof typeof estimateMethods], {
    error: 'Choose the method.',
  }),
  inputs: requiredText('what the estimate rests on', 1000),
  reason: requiredText('the reason', 1000),
});
export type EstimateInput = z.input<typeof estimateInput>;

export const settleInput = z.object({
  id: recordId,
  chosenReadingId: chosenId('one of the two readings'),
  reason: requiredText('the reason', 1000),
});
