import fc from 'fast-check';
import { daysInMonth, monthRange, type Month } from '#shared/calendar/month.ts';
import { coverKinds } from '#shared/water-balance/cover-types.ts';
import {
  parameterTemplate,
  type EngineInput,
  type MonthClimate,
} from '#shared/water-balance/engine-input.ts';
import { cell, climateMonth, engineInput, plot } from './engine-inputs.ts';

const months = monthRange('2025-01', '2026-12');
export const depth = (max: number) => fc.double({ min: 0, max, noNaN: true });
const fraction = depth(1);

const membrane = {
  ...parameterTemplate.liner,
  defectsPerHa: 5,
};

const anyCover = fc.record({
  kind: fc.constantFrom(...coverKinds),
  name: fc.constant('any'),
  availableWaterMm: fc.oneof(fc.constant(0), fc.double({ min: 1, max: 400, noNaN: true })),
  membranePassFraction: fc.oneof(fc.constant(null), fraction),
  membraneDefects: fc.constantFrom(null, null, membrane),
  runoffCoefficientWet: depth(0.9),
  runoffCoefficientDry: depth(0.9),
  curveNumber: fc.constantFrom(null, 61, 85),
  runoffDestination: fc.constantFrom('storm-water' as const, 'leachate' as const),
  petFactor: depth(1.3),
});

/** A month by days or as one figure; days add up to the month. */
const anyMonth = (month: Month) => {
  const count = daysInMonth(month);
  const shared = { petMm: depth(220), tMeanC: fc.double({ min: -20, max: 32, noNaN: true }) };
  const monthly = fc.record({ precipitationMm: fc.oneof(fc.constant(0), depth(300)), ...shared });
  const daily = fc
    .record({
      ...shared,
      wetDays: fc.uniqueArray(fc.integer({ min: 0, max: count - 1 }), { maxLength: 6 }),
      rain: depth(60),
    })
    .map(({ petMm, tMeanC, wetDays, rain }): Partial<MonthClimate> => {
      const precipitationMm = Array.from({ length: count }, (_, day) => (wetDays.includes(day) ? rain : 0));
      return {
        petMm,
        tMeanC,
        precipitationMm: precipitationMm.reduce((sum, one) => sum + one, 0),
        days: {
          precipitationMm,
          tMinC: null,
          tMaxC: null,
          tMeanC: precipitationMm.map((_, day) => tMeanC + (day % 5) - 2),
          windMPerS: null,
          relativeHumidityPercent: null,
          sunshineHours: null,
        },
      };
    });
  return fc.oneof(monthly, daily).map((row) => climateMonth(month, row));
};

const parts = fc.record({
  climate: fc.tuple(...months.map(anyMonth)),
  open: anyCover,
  next: anyCover,
  areaM2: fc.double({ min: 100, max: 60_000, noNaN: true }),
  coveredShare: fc.double({ min: 0.1, max: 0.9, noNaN: true }),
  changeDay: fc.integer({ min: 1, max: 28 }),
  splitDay: fc.integer({ min: 1, max: 28 }),
  deficitM3: fc.double({ min: -500, max: 4000, noNaN: true }),
  returnM3: depth(200),
  condensateM3: depth(30),
  headM: fc.oneof(fc.constant(null), depth(1)),
  law: fc.constantFrom('exponential' as const, 'equal-availability' as const, 'linear' as const),
  recession: depth(3),
  channelled: fraction,
  leak: depth(0.3),
  isByDefects: fc.boolean(),
  isByCurve: fc.boolean(),
  isSnow: fc.boolean(),
  isFrost: fc.boolean(),
  hasSurfaceReturn: fc.boolean(),
});

/** Any site that a person could enter: a cover change, a divided plot, placed waste, a return, snow or not. */
export const anyInput: fc.Arbitrary<EngineInput> = parts.map((one) => {
  const changeOn = `2025-07-${String(one.changeDay).padStart(2, '0')}`;
  const splitOn = `2026-02-${String(one.splitDay).padStart(2, '0')}`;
  const period = (coverTypeId: string, fromOn: string, toOn: string | null) => ({
    coverTypeId,
    fromOn,
    toOn,
    initialSoilStoreMm: null,
  });
  const child = (id: string, coverTypeId: string, areaM2: number) =>
    plot({ id, parentId: 'plot', areaM2, fromOn: splitOn, periods: [period(coverTypeId, splitOn, null)] });
  const coveredM2 = one.areaM2 * one.coveredShare;
  return engineInput({
    climate: one.climate,
    covers: { open: one.open, next: one.next },
    cells: [
      cell({
        placedDeficitM3: { '2025-03': one.deficitM3 },
        condensateM3: { '2025-06': one.condensateM3 },
        measuredHeadM: one.headM === null ? {} : { '2025-04': one.headM },
        returns: [
          {
            siteDay: '2025-05-10',
            plotIds: ['plot'],
            isAtSurface: one.hasSurfaceReturn,
            volumeM3: one.returnM3,
          },
        ],
        plots: [
          plot({
            areaM2: one.areaM2,
            toOn: splitOn,
            periods: [period('open', '2025-01-01', changeOn), period('next', changeOn, splitOn)],
          }),
          child('covered', 'open', coveredM2),
          child('rest', 'next', one.areaM2 - coveredM2),
        ],
      }),
    ],
    parameters: {
      soilLaw: one.law,
      runoffMethod: one.isByCurve ? 'curve-number' : 'coefficient',
      recessionPerMonth: one.recession,
      channelledFraction: one.channelled,
      leakMethod: one.isByDefects ? 'defects' : 'fraction',
      leakFraction: one.leak,
      isFrostOn: one.isFrost,
      snow: { ...parameterTemplate.snow, isOn: one.isSnow },
    },
  });
});
