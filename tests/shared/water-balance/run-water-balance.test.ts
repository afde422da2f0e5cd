import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { monthRange } from '#shared/calendar/month.ts';
import { checkClosure } from '#shared/water-balance/check-closure.ts';
import { coverKinds } from '#shared/water-balance/cover-types.ts';
import { recordHeatIndex } from '#shared/water-balance/potential-evapotranspiration.ts';
import { runWaterBalance } from '#shared/water-balance/run-water-balance.ts';
import { sumSteps } from '#shared/water-balance/sum-steps.ts';
import type { EngineInput } from '#shared/water-balance/engine-input.ts';
import { cell, climateMonth, cover, engineInput, plot } from '../../factories/engine-inputs.ts';

const months = monthRange('2025-01', '2026-12');
const depth = (max: number) => fc.double({ min: 0, max, noNaN: true });
const fraction = depth(1);
const anyCover = fc.record({
  kind: fc.constantFrom(...coverKinds),
  name: fc.constant('any'),
  availableWaterMm: fc.oneof(fc.constant(0), depth(400)),
  membranePassFraction: fc.oneof(fc.constant(null), fraction),
  runoffCoefficientWet: depth(0.9),
  runoffCoefficientDry: depth(0.9),
  runoffDestination: fc.constantFrom('storm-water' as const, 'leachate' as const),
  petFactor: depth(1.3),
});
const anyClimate = fc.tuple(
  ...months.map((month) =>
    fc
      .record({
        precipitationMm: fc.oneof(fc.constant(0), depth(300)),
        petMm: depth(220),
        tMeanC: fc.double({ min: -20, max: 32, noNaN: true }),
      })
      .map((row) => climateMonth(month, row)),
  ),
);

/** Any site that a person could enter: a cover change, placed waste, a return, snow or not. */
const anyInput = fc
  .record({
    climate: anyClimate,
    open: anyCover,
    next: anyCover,
    areaM2: fc.double({ min: 100, max: 60_000, noNaN: true }),
    changeDay: fc.integer({ min: 1, max: 28 }),
    deficitM3: fc.double({ min: -500, max: 4000, noNaN: true }),
    returnM3: depth(200),
    law: fc.constantFrom('exponential' as const, 'equal-availability' as const, 'linear' as const),
    recession: depth(3),
    channelled: fraction,
    leak: depth(0.3),
    isSnow: fc.boolean(),
    isFrost: fc.boolean(),
    isSpunUp: fc.boolean(),
    hasSurfaceReturn: fc.boolean(),
  })
  .map((one): EngineInput => {
    const changeOn = `2025-07-${String(one.changeDay).padStart(2, '0')}`;
    return engineInput({
      climate: one.climate,
      covers: { open: one.open, next: one.next },
      cells: [
        cell({
          placedDeficitM3: { '2025-03': one.deficitM3 },
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
              periods: [
                { coverTypeId: 'open', fromOn: '2025-01-01', toOn: changeOn, initialSoilStoreMm: null },
                { coverTypeId: 'next', fromOn: changeOn, toOn: null, initialSoilStoreMm: null },
              ],
            }),
          ],
        }),
      ],
      parameters: {
        soilLaw: one.law,
        recessionPerMonth: one.recession,
        channelledFraction: one.channelled,
        leakFraction: one.leak,
        isFrostOn: one.isFrost,
        isSpunUp: one.isSpunUp,
        snow: { isOn: one.isSnow, tSnowC: -10, tRainC: 3.3, meltMaxFraction: 0.5 },
      },
    });
  });

describe('properties that hold for every input', () => {
  it('every line of every step closes within 1e-9 of its terms', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        for (const { terms } of runWaterBalance(input).steps)
          for (const line of checkClosure(terms))
            expect(Math.abs(line.residualMm), line.line).toBeLessThanOrEqual(line.toleranceMm);
      }),
    );
  });

  it('runoff, evapotranspiration, percolation and drainage are never negative; soil stays between empty and full', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        for (const { terms, coverTypeId } of runWaterBalance(input).steps) {
          for (const name of [
            'runoffToStormMm',
            'runoffToLeachateMm',
            'aetMm',
            'percolationMm',
            'passedMm',
            'absorbedMm',
            'drainedMm',
            'collectedMm',
            'leakedMm',
            'wasteStoreMm',
            'wasteDeficitMm',
          ] as const)
            expect(terms[name], name).toBeGreaterThanOrEqual(-1e-9);
          expect(terms.soilStoreMm).toBeGreaterThanOrEqual(0);
          expect(terms.soilStoreMm).toBeLessThanOrEqual(input.covers[coverTypeId]!.availableWaterMm + 1e-9);
          expect(terms.aetMm).toBeLessThanOrEqual(terms.petMm + 1e-9);
        }
      }),
    );
  });

  it('over all months, what came in equals what went out and what stayed', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        const { steps } = runWaterBalance(input);
        const v = sumSteps(steps).volumesM3;
        const came =
          v.precipitationMm + v.surfaceReturnMm + v.returnToWasteMm + v.soilWaterBroughtMm + v.freeMoistureMm;
        const went =
          v.runoffToStormMm + v.runoffToLeachateMm + v.aetMm + v.coverDrainMm + v.collectedMm + v.leakedMm;
        const stayed = v.dSnowMm + v.dSoilMm + v.absorbedMm + v.dWasteMm;
        expect(Math.abs(came - went - stayed)).toBeLessThanOrEqual(
          1e-9 * Math.max(1, Math.abs(came) + Math.abs(went) + Math.abs(stayed)),
        );
      }),
    );
  });

  it('a cell cut in two equal halves gives the same volumes', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        const only = input.cells[0]!;
        const halves = ['a', 'b'].map((id) => ({ ...only.plots[0]!, id, areaM2: only.plots[0]!.areaM2 / 2 }));
        const whole = sumSteps(runWaterBalance(input).steps).volumesM3;
        const cut = sumSteps(
          runWaterBalance({
            ...input,
            cells: [
              {
                ...only,
                plots: halves,
                returns: only.returns.map((one) => ({ ...one, plotIds: ['a', 'b'] })),
              },
            ],
          }).steps,
        ).volumesM3;
        for (const name of ['leachateMm', 'aetMm', 'percolationMm', 'runoffToStormMm'] as const)
          expect(cut[name]).toBeCloseTo(whole[name], 6);
      }),
    );
  });

  it('more rain, all else equal, never gives less leachate, runoff and storage together', () => {
    fc.assert(
      fc.property(anyInput, fc.integer({ min: 0, max: 23 }), depth(100), (input, index, moreMm) => {
        const total = (one: EngineInput) => {
          const v = sumSteps(runWaterBalance(one).steps).volumesM3;
          return (
            v.runoffToStormMm +
            v.runoffToLeachateMm +
            v.coverDrainMm +
            v.collectedMm +
            v.leakedMm +
            v.dSnowMm +
            v.dSoilMm +
            v.absorbedMm +
            v.dWasteMm
          );
        };
        const wetter = {
          ...input,
          climate: input.climate.map((row, at) =>
            at === index ? { ...row, precipitationMm: row.precipitationMm + moreMm } : row,
          ),
        };
        expect(total(wetter)).toBeGreaterThanOrEqual(
          total(input) - 1e-6 * Math.max(1, Math.abs(total(input))),
        );
      }),
      { numRuns: 60 },
    );
  });
});

describe('laws of a step', () => {
  const oneMonth = (
    parts: Partial<EngineInput['cells'][number]>,
    precipitationMm: number,
    petMm: number,
    parameters = {},
  ) =>
    runWaterBalance(
      engineInput({
        climate: [climateMonth('2025-01', { precipitationMm, petMm })],
        covers: { open: cover({ availableWaterMm: 100 }) },
        cells: [cell(parts)],
        parameters,
      }),
    ).steps.at(-1)!.terms;
  const startingAt = (mm: number) => ({
    plots: [
      plot({ periods: [{ coverTypeId: 'open', fromOn: '2025-01-01', toOn: null, initialSoilStoreMm: mm }] }),
    ],
  });

  it('a surplus fills the store and what is above it percolates', () => {
    expect(oneMonth(startingAt(80), 70, 20)).toMatchObject({
      aetMm: 20,
      soilStoreMm: 100,
      percolationMm: 30,
    });
  });

  it('a shortfall of 50 mm dries a full store of 100 to 100·e^(−0.5) = 60.65 mm', () => {
    const terms = oneMonth(startingAt(100), 10, 60);
    expect(terms.soilStoreMm).toBeCloseTo(60.653_065_97, 6);
    expect(terms.aetMm).toBeCloseTo(10 + 39.346_934_03, 6);
    expect(terms.percolationMm).toBe(0);
  });

  it('cutting a month anywhere gives the same soil and the same waste store under even forcing', () => {
    fc.assert(
      fc.property(
        depth(200),
        depth(200),
        fc.integer({ min: 2, max: 31 }),
        depth(2),
        (rainMm, petMm, day, recessionPerMonth) => {
          const on = `2025-01-${String(day).padStart(2, '0')}`;
          // Below capacity soil percolates nothing, so the waste drains what it held: an even forcing of both stores.
          const whole = oneMonth(
            { ...startingAt(0), initialWasteStoreMm: 120 },
            Math.min(rainMm, 100),
            petMm,
            { recessionPerMonth },
          );
          const cutPeriods = [
            { coverTypeId: 'open', fromOn: '2025-01-01', toOn: on, initialSoilStoreMm: 0 },
            { coverTypeId: 'open', fromOn: on, toOn: null, initialSoilStoreMm: null },
          ];
          const cut = oneMonth(
            { plots: [plot({ periods: cutPeriods })], initialWasteStoreMm: 120 },
            Math.min(rainMm, 100),
            petMm,
            { recessionPerMonth },
          );
          expect(cut.soilStoreMm).toBeCloseTo(whole.soilStoreMm, 8);
          expect(cut.wasteStoreMm).toBeCloseTo(whole.wasteStoreMm, 8);
        },
      ),
    );
  });

  it('placed waste of 1 000 t at 0.8 t/m³, 25 % moisture and 30 % field capacity takes up 125 m³', () => {
    // 1000/0.8 = 1250 m³ of waste × (0.30 − 0.25×0.8) = 125 m³, by hand
    const input = engineInput({
      cells: [cell({ placedDeficitM3: { '2025-01': 125 } })],
      covers: { open: cover({ availableWaterMm: 0 }) },
      parameters: { recessionPerMonth: 0 },
    });
    const absorbed = sumSteps(runWaterBalance(input).steps).volumesM3.absorbedMm;
    expect(absorbed).toBeCloseTo(125, 9);
  });

  it('nothing in drains nothing but what was stored', () => {
    const dry = engineInput({
      climate: months.map((month) => climateMonth(month, { precipitationMm: 0, petMm: 0 })),
      cells: [cell({ initialWasteStoreMm: 100 })],
      parameters: { recessionPerMonth: 0.5 },
    });
    const drained = sumSteps(runWaterBalance(dry).steps).volumesM3.drainedMm;
    expect(drained).toBeCloseTo(1000 * (1 - Math.exp(-0.5 * 24)), 6);
  });

  it('frozen ground percolates nothing and sends the surplus to runoff', () => {
    const terms = runWaterBalance(
      engineInput({
        climate: [climateMonth('2025-01', { precipitationMm: 90, petMm: 0, tMeanC: -3 })],
        covers: { open: cover({ availableWaterMm: 50 }) },
        cells: [cell(startingAt(50))],
        parameters: { isFrostOn: true },
      }),
    ).steps[0]!.terms;
    expect(terms).toMatchObject({ percolationMm: 0, runoffToLeachateMm: 90 });
  });

  it('a month without the temperature its method needs is refused with the month named', () => {
    const input = engineInput({
      climate: [climateMonth('2025-01'), climateMonth('2025-02', { tMeanC: null, tMinC: null, tMaxC: null })],
      parameters: { petMethod: 'thornthwaite' },
    });
    expect(recordHeatIndex(input.climate)).toBeNull();
    expect(() => runWaterBalance(input)).toThrow(
      'Thornthwaite needs every month of the year at least once in the record',
    );
    const year = months.map((month) =>
      climateMonth(month, month === '2026-02' ? { tMeanC: null, tMinC: null, tMaxC: null } : {}),
    );
    expect(() => runWaterBalance({ ...input, climate: year })).toThrow('February 2026');
  });
});
