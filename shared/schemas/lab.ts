import * as z from 'zod';
import { qualifierMeanings } from '../lab/qualifier-meanings.ts';
import { dayText, optionalDay } from './days.ts';
import { optionalWholeNumber, wholeNumber } from './numbers.ts';
import { chosenId, optionalId, optionalText, recordId, requiredText } from './text.ts';

export const laboratoryInput = z.object({
  id: recordId,
  name: requiredText('the name of the laboratory', 80),
});
export const labUploadInput = z.object({ id: recordId, laboratoryId: recordId });
export const labAnswerInput = z
  .object({
    kind: z.enum(['sample-point', 'analyte', 'unit', 'qualifier', 'date-order', 'equal-to-limit']),
    fromText: requiredText('the text of the sheet'),
    toValue: requiredText('the answer'),
  })
  .superRefine((input, context) => {
    const choices: Partial<Record<typeof input.kind, readonly string[]>> = {
      qualifier: qualifierMeanings,
      'date-order': ['day-first', 'month-first'],
      'equal-to-limit': ['below', 'measured'],
    };
    if (choices[input.kind] && !choices[input.kind]!.includes(input.toValue))
      context.addIssue({ code: 'custom', path: ['toValue'], message: 'Choose one of the answers offered.' });
    if (
      (input.kind === 'sample-point' || input.kind === 'analyte') &&
      !recordId.safeParse(input.toValue).success
    )
      context.addIssue({ code: 'custom', path: ['toValue'], message: 'Choose one of the answers offered.' });
  });
export type LabAnswerInput = z.input<typeof labAnswerInput>;

export const samplePointInput = z.object({
  id: recordId,
  placeId: optionalId,
  code: requiredText('the code of the sample point', 30),
  name: requiredText('the name of the sample point', 80),
  kind: z.enum(['raw-leachate', 'leak-detection', 'influent', 'effluent', 'storm-water', 'groundwater'], {
    error: 'Choose what is sampled.',
  }),
  aliases: z.array(z.string().trim().min(1)).max(20).default([]),
});
export type SamplePointInput = z.input<typeof samplePointInput>;

export const permitInput = z
  .object({
    id: recordId,
    number: requiredText('the number of the permit', 40),
    authority: requiredText('the authority', 120),
    regime: z.enum(['direct', 'sewer', 'other'], { error: 'Choose where the water goes.' }),
    fromOn: dayText('the first day of the permit'),
    toOn: optionalDay('the last day of the permit'),
  })
  .refine((input) => !input.toOn || input.toOn > input.fromOn, {
    path: ['toOn'],
    message: 'The permit must end after it begins.',
  });
export type PermitInput = z.input<typeof permitInput>;

const limitValue = z.preprocess(
  (typed) => (typed === '' || typed === null ? undefined : typed),
  z
    .string()
    .trim()
    .regex(/^\d*\.?\d+$/, 'Enter the limit as the permit prints it, like 0.20.')
    .optional(),
);

export const limitInput = z
  .object({
    id: recordId,
    permitId: chosenId('the permit'),
    samplePointId: chosenId('the sample point'),
    analyteId: chosenId('the parameter'),
    fraction: z.string().trim().default(''),
    flowPlaceId: optionalId,
    statistic: z.enum(['daily-maximum', 'daily-minimum', 'monthly-average', 'range'], {
      error: 'Choose how the limit is meant.',
    }),
    quantity: z.enum(['concentration', 'load']),
    valueText: limitValue,
    lowText: limitValue,
    highText: limitValue,
    unit: requiredText('the unit', 20),
    isInclusive: z.boolean().default(true),
    samplesMin: wholeNumber('the count of samples required a month', 0, 31),
    belowDetectionRule: z.enum(['zero', 'half', 'full', 'carried']),
    roundingMode: z.enum(['half-up', 'half-even']).default('half-up'),
    decimals: wholeNumber('the count of decimals of the limit', 0, 4),
    citation: requiredText('the page or part of the permit'),
    noticeHours: optionalWholeNumber('the hours until the call', 1, 720),
    writtenNoticeDays: optionalWholeNumber('the days until the letter', 1, 90),
    resampleDays: optionalWholeNumber('the days until the repeat sample', 1, 180),
    fromOn: dayText('the first day of the limit'),
    toOn: optionalDay('the last day of the limit'),
  })
  .superRefine((input, context) => {
    const issue = (path: string, message: string) =>
      context.addIssue({ code: 'custom', path: [path], message });
    if (input.statistic === 'range') {
      if (!input.lowText) issue('lowText', 'Enter the lower end of the range.');
      if (!input.highText) issue('highText', 'Enter the upper end of the range.');
      if (input.lowText && input.highText && Number(input.lowText) >= Number(input.highText))
        issue('highText', 'The upper end must lie above the lower.');
    } else if (!input.valueText) issue('valueText', 'Enter the limit as the permit prints it.');
    if (input.quantity === 'load' && !input.flowPlaceId)
      issue('flowPlaceId', 'Choose where the flow of the load is measured.');
    if (input.quantity === 'load' && input.unit !== 'kg/d' && input.unit !== 'lb/d')
      issue('unit', 'A load is in kg/d or lb/d.');
    if (input.toOn && input.toOn <= input.fromOn) issue('toOn', 'The limit must end after it begins.');
  });
export type LimitInput = z.input<typeof limitInput>;

export const clockDoneInput = z.object({ note: requiredText('what was done') });
export const exceedanceNoteInput = z.object({ id: recordId, note: requiredText('the note', 2000) });
export const exceedanceCloseInput = z.object({ cause: requiredText('the cause and what was done', 2000) });

export const closeMonthInput = z.object({ id: recordId, reason: optionalText(1000) });
export const reopenMonthInput = z.object({
  id: recordId,
  reason: requiredText('the reason for reopening', 1000),
});
export const signReportInput = z.object({
  id: recordId,
  isConfirmed: z.literal(true, { error: 'Confirm that you have read the certification.' }),
  reason: optionalText(1000),
});
