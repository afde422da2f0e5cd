import * as z from 'zod';
import { isTimeZone } from '../calendar/site-days.ts';
import { volumeUnits } from '../units/unit-factors.ts';
import { coverKinds } from '../water-balance/cover-types.ts';
import { defectLeakage } from './balance.ts';
import { dayText, monthText, optionalDay } from './days.ts';
import { optionalNumber, typedNumber, wholeNumber } from './numbers.ts';
import { chosenId, optionalId, optionalText, recordId, requiredText } from './text.ts';

const code = (what: string) =>
  requiredText(what, 20).regex(
    /^[\p{L}\p{N}][\p{L}\p{N} ._-]*$/u,
    'Use letters, digits, spaces, points and dashes.',
  );
const fractionOf = (what: string) =>
  typedNumber({
    what,
    unit: '',
    min: 0,
    max: 1,
    decimals: 6,
    aboveMax: 'Enter a share of one: 0.18, not 18.',
  });

const siteFacts = {
  name: requiredText('the name of the site', 80),
  latitudeDeg: typedNumber({ what: 'the latitude', unit: '°', min: -66, max: 66, decimals: 6 }),
  elevationM: typedNumber({ what: 'the height above the sea', unit: 'm', min: -430, max: 6000 }),
  openedOn: dayText('the day the site opened'),
};

export const siteInput = z.object({
  id: recordId,
  ...siteFacts,
  timeZone: requiredText('the time zone').refine(
    isTimeZone,
    'Enter a time zone by its IANA name, like Europe/London or America/Chicago.',
  ),
  dayBoundary: z
    .string()
    .regex(/^([01]\d|2[0-3]):[0-5]\d$/, 'Enter the time the site day begins, like 00:00 or 08:00.'),
  displayUnits: z.enum(['metric', 'us']).default('metric'),
});
export type SiteInput = z.input<typeof siteInput>;

export const siteSettingsInput = z.object({
  ...siteFacts,
  displayUnits: z.enum(['metric', 'us']),
  reportDueDays: wholeNumber('the days until the report is due', 1, 366),
  certificationText: optionalText(4000),
});
export type SiteSettingsInput = z.input<typeof siteSettingsInput>;

export const plotInput = z.object({
  id: recordId,
  name: requiredText('the name of the plot', 60),
  areaM2: typedNumber({ what: 'the area of the plot', unit: 'm²', minExclusive: 0, max: 2_000_000 }),
  coverTypeId: chosenId('the cover'),
});

export const cellInput = z.object({
  id: recordId,
  code: code('the code of the cell'),
  name: requiredText('the name of the cell', 60),
  linedAreaM2: typedNumber({ what: 'the lined area', unit: 'm²', minExclusive: 0, max: 5_000_000 }),
  openedOn: dayText('the day the cell opened'),
  evidence: requiredText('where the area comes from: a survey or an as-built drawing'),
  plots: z.array(plotInput).min(1, 'Enter at least one plot.'),
  areaReason: optionalText(),
});
export type CellInput = z.input<typeof cellInput>;

export const coverChangeInput = z.object({
  plotId: chosenId('the plot'),
  onDay: dayText('the day the ground was covered'),
  coverTypeId: chosenId('the cover'),
  areaM2: typedNumber({ what: 'the area that was covered', unit: 'm²', minExclusive: 0 }),
  newPlotId: recordId,
  restPlotId: recordId,
  newPlotName: requiredText('a name for the covered part', 60),
  evidence: requiredText('the evidence: a survey, a photo or a certificate'),
  initialSoilStoreMm: optionalNumber({ what: 'the water in the placed soil', unit: 'mm', min: 0, max: 2000 }),
});
export type CoverChangeInput = z.input<typeof coverChangeInput>;

/** What a cover entry should have been: another cover, or nothing, which takes the entry out. */
export const coverCorrectionInput = z.object({
  coverPeriodId: chosenId('the cover entry'),
  coverTypeId: z.union([z.literal('none'), z.uuid()], {
    error: 'Choose the cover that it was, or that it was not covered then.',
  }),
  reason: requiredText('how the error came to light'),
});
export type CoverCorrectionInput = z.input<typeof coverCorrectionInput>;

export const cellNameInput = z.object({
  cellId: chosenId('the cell'),
  code: code('the code of the cell'),
  name: requiredText('the name of the cell', 60),
});
export type CellNameInput = z.input<typeof cellNameInput>;

export const coverTypeInput = z.object({
  id: recordId,
  kind: z.enum(coverKinds, { error: 'Choose the kind of cover.' }),
  name: requiredText('the name of the cover', 60),
  availableWaterMm: typedNumber({ what: 'the available water of the soil', unit: 'mm', min: 0, max: 1500 }),
  membranePassFraction: z.preprocess(
    (typed) => (typed === '' || typed === null ? undefined : typed),
    fractionOf('the share that passes the membrane').optional(),
  ),
  runoffCoefficientWet: fractionOf('the runoff share in the wet season'),
  runoffCoefficientDry: fractionOf('the runoff share in the dry season'),
  membraneDefects: defectLeakage.nullable().default(null),
  curveNumber: optionalNumber({ what: 'the curve number', unit: '', min: 30, max: 100, decimals: 2 }),
  runoffDestination: z.enum(['storm-water', 'leachate'], { error: 'Choose where the runoff goes.' }),
  petFactor: typedNumber({ what: 'the evapotranspiration factor', unit: '', min: 0, max: 1.5 }),
  source: requiredText('the source of these values'),
});
export type CoverTypeInput = z.input<typeof coverTypeInput>;

/** Other values for a cover that stands already, with the reason. */
export const coverTypeChangeInput = coverTypeInput
  .omit({ id: true, kind: true })
  .extend({ reason: requiredText('why the values change') });
export type CoverTypeChangeInput = z.input<typeof coverTypeChangeInput>;

export const wasteInput = z.object({
  id: recordId,
  cellId: chosenId('the cell'),
  month: monthText,
  massT: typedNumber({ what: 'the waste placed', unit: 't', min: 0 }),
  bulkDensityTPerM3: typedNumber({
    what: 'the bulk density',
    unit: 't/m³',
    minExclusive: 0,
    max: 2.5,
    aboveMax: 'Waste in place is rarely above 1.5 t/m³.',
  }),
  moistureFraction: fractionOf('the moisture by wet weight'),
  fieldCapacityFraction: fractionOf('the field capacity by volume'),
  source: requiredText('where the tonnes come from'),
});
export type WasteInput = z.input<typeof wasteInput>;

export const sumpInput = z.object({
  id: recordId,
  placeId: chosenId('the place'),
  cellId: chosenId('the cell'),
  code: code('the code of the sump'),
  kind: z.enum(['primary', 'leak-detection'], { error: 'Choose the kind of sump.' }),
  areaServedM2: typedNumber({ what: 'the area the sump drains', unit: 'm²', minExclusive: 0 }),
  linerLowPointAboveFloorM: typedNumber({
    what: 'the height of the liner’s low point above the sump floor',
    unit: 'm',
    min: 0,
    max: 10,
  }),
  sensorAboveFloorM: typedNumber({
    what: 'the height of the sensor above the sump floor',
    unit: 'm',
    min: 0,
    max: 10,
  }),
  headLimitM: optionalNumber({ what: 'the head limit', unit: 'm', minExclusive: 0, max: 5 }),
  actionRateLPerHaDay: optionalNumber({ what: 'the action rate', unit: 'L/ha·d', minExclusive: 0 }),
});
export type SumpInput = z.input<typeof sumpInput>;

export const placeInput = z.object({
  id: recordId,
  kind: z.enum(['header', 'treatment', 'outfall', 'sewer', 'haulage', 'truck'], {
    error: 'Choose the kind of place.',
  }),
  name: requiredText('the name of the place', 60),
});

export const meterInput = z.object({
  id: recordId,
  code: code('the code of the meter'),
  name: requiredText('the name of the meter', 60),
  fromPlaceId: chosenId('where the water comes from'),
  toPlaceId: chosenId('where the water goes'),
  sumpId: optionalId,
  digits: wholeNumber('the count of digits of the register', 3, 12),
  decimals: wholeNumber('the count of decimals of the register', 0, 4).default(0),
  unit: z.enum(volumeUnits, { error: 'Choose the unit printed on the register.' }),
  multiplier: typedNumber({ what: 'the multiplier', unit: '', minExclusive: 0, max: 100_000, decimals: 6 }),
  rateM3PerDayMax: typedNumber({ what: 'the largest plausible day', unit: 'm³/d', minExclusive: 0 }),
  installedOn: dayText('the day the meter was installed'),
});
export type MeterInput = z.input<typeof meterInput>;

export const storeInput = z.object({
  id: recordId,
  placeId: chosenId('the place'),
  code: code('the code of the store'),
  name: requiredText('the name of the store', 60),
  isCovered: z.boolean(),
  linedAreaM2: typedNumber({ what: 'the lined area draining in', unit: 'm²', min: 0 }),
  crestLevelM: typedNumber({ what: 'the crest level', unit: 'm', minExclusive: 0, max: 50 }),
  operatingLevelM: typedNumber({ what: 'the highest operating level', unit: 'm', minExclusive: 0, max: 50 }),
  strapping: z
    .array(
      z.object({
        levelM: typedNumber({ what: 'a level', unit: 'm', min: 0 }),
        volumeM3: typedNumber({ what: 'a volume', unit: 'm³', min: 0 }),
        surfaceM2: typedNumber({ what: 'a surface', unit: 'm²', min: 0 }),
      }),
    )
    .min(2, 'Enter at least two rows of level, volume and surface.'),
});
export type StoreInput = z.input<typeof storeInput>;

export const closeDateInput = z.object({ toOn: optionalDay('the last day') });
