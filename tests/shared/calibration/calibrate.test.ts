import { describe, expect, it } from 'vitest';
import { monthRange } from '#shared/calendar/month.ts';
import { calibrate, TooFewMonths, type CalibrationChoice } from '#shared/calibration/calibrate.ts';
import { calibratedRegister, type CalibratedName } from '#shared/calibration/calibrated-parameters.ts';
import { pairsNotToldApart } from '#shared/calibration/identifiability.ts';
import { runWaterBalance } from '#shared/water-balance/run-water-balance.ts';
import { cell, climateMonth, cover, engineInput } from '../../factories/engine-inputs.ts';

const months = monthRange('2021-01', '2024-12');
/** Four years with wet winters and dry summers, no two alike. */
const climate = months.map((month, index) =>
  climateMonth(month, {
    precipitationMm: 75 + 35 * Math.cos((index / 6) * Math.PI) + ((index * 37) % 23),
    petMm: 48 - 40 * Math.cos((index / 6) * Math.PI) + ((index * 11) % 7),
  }),
);

const predictWith = (values: Partial<Record<CalibratedName, number>>): number[] => {
  const input = engineInput({
    climate,
    covers: {
      open: cover({
        availableWaterMm: 60,
        runoffCoefficientWet: 0.2,
        runoffCoefficientDry: 0.15,
        runoffDestination: 'storm-water',
      }),
    },
    cells: [
      cell({
        plots: [
          {
            ...cell().plots[0]!,
            fromOn: '2021-01-01',
            periods: [{ coverTypeId: 'open', fromOn: '2021-01-01', toOn: null, initialSoilStoreMm: 30 }],
          },
        ],
      }),
    ],
    parameters: values,
  });
  return runWaterBalance(input).steps.map((step) => (step.terms.leachateMm * step.areaM2) / 1000);
};

const choice = (name: CalibratedName): CalibrationChoice => ({
  name,
  low: calibratedRegister[name].low,
  high: calibratedRegister[name].high,
});

describe('calibration on months made with known parameters', () => {
  const truth = { petFactor: 0.85, recessionPerMonth: 0.9 };
  const measured = predictWith(truth);
  const choices = [choice('petFactor'), choice('recessionPerMonth')];
  const found = calibrate(
    choices,
    [1, 0.5],
    measured,
    ([petFactor, recessionPerMonth]) =>
      predictWith({ petFactor: petFactor!, recessionPerMonth: recessionPerMonth! }),
    false,
  );

  it('finds them again, on the first three quarters of the months', () => {
    expect(found.fitted.monthCount).toBe(36);
    expect(found.heldBack.monthCount).toBe(12);
    expect(found.values[0]!.after).toBeCloseTo(truth.petFactor, 2);
    expect(found.values[1]!.after).toBeCloseTo(truth.recessionPerMonth, 1);
  });

  it('the held-back months fit as well as the fitted ones, and nothing is doubted', () => {
    expect(found.heldBack.after.nashSutcliffe!).toBeGreaterThan(0.999);
    expect(found.heldBack.before.nashSutcliffe!).toBeLessThan(found.heldBack.after.nashSutcliffe!);
    expect(found.values.every((value) => !value.isAtBound)).toBe(true);
    expect(found.doubts).toEqual([]);
  });
});

it('a truth outside the bounds ends at the bound, and says so', () => {
  const measured = predictWith({ petFactor: 0.4 });
  const found = calibrate(
    [choice('petFactor')],
    [1],
    measured,
    ([petFactor]) => predictWith({ petFactor: petFactor! }),
    false,
  );
  expect(found.values[0]).toMatchObject({ isAtBound: true });
  expect(found.values[0]!.after).toBeCloseTo(0.6, 2);
  expect(found.doubts.join(' ')).toContain('ran into its bound');
});

it('a parameter without effect on these months is said to have none', () => {
  // No waste was placed, so its deficit cannot matter.
  const found = calibrate(
    [choice('deficitFactor')],
    [1],
    predictWith({}),
    ([deficitFactor]) => predictWith({ deficitFactor: deficitFactor! }),
    false,
  );
  expect(found.doubts.join(' ')).toContain('next to nothing about the factor on the deficit');
});

it('two parameters that do the same are named as not told apart', () => {
  // A model that knows only the product of its two parameters.
  const drive = Array.from({ length: 20 }, (_, index) => 50 + 20 * Math.sin(index));
  const found = calibrate(
    [
      { name: 'runoffFactor', low: 0.5, high: 2 },
      { name: 'petFactor', low: 0.5, high: 2 },
    ],
    [1, 1],
    drive.map((one) => one * 1.3),
    ([a, b]) => drive.map((one) => one * a! * b!),
    false,
  );
  expect(found.notToldApart).toHaveLength(1);
  expect(found.doubts.join(' ')).toContain('cannot be told apart');
});

it('orthogonal effects are told apart; parallel ones are not', () => {
  expect(
    pairsNotToldApart([
      [1, 0],
      [0, 1],
      [1, 0],
      [0, 1],
    ]),
  ).toEqual([]);
  expect(
    pairsNotToldApart([
      [1, 2],
      [2, 4],
      [3, 6],
    ]),
  ).toMatchObject([{ a: 0, b: 1, correlation: -1 }]);
});

it('fewer than eight months are refused with the count', () => {
  expect(() => calibrate([choice('petFactor')], [1], [1, 2, 3], () => [1, 2, 3], false)).toThrow(
    TooFewMonths,
  );
});
