import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { monthRange } from '#shared/calendar/month.ts';
import { recordHeatIndex } from '#shared/water-balance/potential-evapotranspiration.ts';
import { checkClosure } from '#shared/water-balance/check-closure.ts';
import { curveNumberRunoffMm, monthCurveRunoffMm } from '#shared/water-balance/curve-number.ts';
import { runWaterBalance } from '#shared/water-balance/run-water-balance.ts';
import { sumSteps } from '#shared/water-balance/sum-steps.ts';
import type { EngineInput } from '#shared/water-balance/engine-input.ts';
import { depth } from '../../factories/any-input.ts';
import { cell, climateMonth, cover, engineInput, plot } from '../../factories/engine-inputs.ts';

const months = monthRange('2025-01', '2026-12');
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

  it('60 mm on curve number 80 run off by the five days before: 4.90 mm on dry ground, 36.16 on wet, in the growing season', () => {
    // By hand: dry, number 62.69, S 151.19 mm, (60 − 30.24)² ÷ (29.76 + 151.19); wet, 90.20, S 27.61, 54.48² ÷ 82.09.
    const storm = [0, 0, 0, 0, 0, 60];
    expect(monthCurveRunoffMm(storm, [], 80, true).at(-1)).toBeCloseTo(4.895, 3);
    const wet = [12, 12, 12, 12, 12, 60];
    expect(monthCurveRunoffMm(wet, [], 80, true).at(-1)).toBeCloseTo(36.155, 2);
    // Without the days before, the average condition stands; those of the month before count where they are known.
    expect(monthCurveRunoffMm([60], [], 80, true)[0]).toBeCloseTo(curveNumberRunoffMm(60, 80), 12);
    expect(monthCurveRunoffMm([60], [0, 0, 0, 0, 0], 80, true)[0]).toBeCloseTo(4.895, 3);
  });

  it('a line that does not close gives no result, and is named', () => {
    const terms = runWaterBalance(engineInput()).steps[0]!.terms;
    expect(checkClosure(terms).every((one) => one.isClosed)).toBe(true);
    expect(checkClosure({ ...terms, aetMm: terms.aetMm + 0.001 }).find((one) => !one.isClosed)!.line).toBe(
      'soil',
    );
    const holed = engineInput({ climate: [climateMonth('2025-01', { precipitationMm: NaN })] });
    expect(() => runWaterBalance(holed)).toThrow(/The .*soil.* line does not close/);
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
