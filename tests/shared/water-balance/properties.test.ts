import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { addDays } from '#shared/calendar/day.ts';
import { addMonths } from '#shared/calendar/month.ts';
import { checkClosure } from '#shared/water-balance/check-closure.ts';
import type { EngineInput } from '#shared/water-balance/engine-input.ts';
import { runWaterBalance } from '#shared/water-balance/run-water-balance.ts';
import { sumSteps } from '#shared/water-balance/sum-steps.ts';
import { termNames } from '#shared/water-balance/terms.ts';
import { anyInput, depth } from '../../factories/any-input.ts';

/** 500 on every commit; `PROPERTY_RUNS=10000 npx vitest run --project pure properties` on demand. */
const numRuns = Number(process.env['PROPERTY_RUNS'] ?? 500);
const always = { numRuns };
/** Properties that run the engine twice. */
const twice = { numRuns: Math.ceil(numRuns / 2) };

const volumes = (input: EngineInput) => sumSteps(runWaterBalance(input).steps).volumesM3;
const near = (a: number, b: number, relative = 1e-9) =>
  expect(Math.abs(a - b)).toBeLessThanOrEqual(relative * Math.max(1, Math.abs(a), Math.abs(b)));

describe('what holds for every input', { timeout: 5_000 + numRuns * 30 }, () => {
  it('conservation: every line of every step closes within 1e-9 of its terms', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        for (const { terms } of runWaterBalance(input).steps)
          for (const line of checkClosure(terms))
            expect(Math.abs(line.residualMm), line.line).toBeLessThanOrEqual(line.toleranceMm);
      }),
      always,
    );
  });

  it('bounds: no flow below 0, soil between empty and full, evapotranspiration within PET and the water there is', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        for (const { terms: t, coverTypeId } of runWaterBalance(input).steps) {
          for (const name of [
            'runoffToStormMm',
            'runoffToLeachateMm',
            'aetMm',
            'percolationMm',
            'passedMm',
            'coverDrainMm',
            'absorbedMm',
            'drainedMm',
            'collectedMm',
            'leakedMm',
            'wasteStoreMm',
            'wasteDeficitMm',
          ] as const)
            expect(t[name], name).toBeGreaterThanOrEqual(-1e-9);
          const soilBeforeMm = t.soilStoreMm - t.dSoilMm + t.soilWaterBroughtMm;
          expect(t.soilStoreMm).toBeGreaterThanOrEqual(0);
          expect(t.soilStoreMm).toBeLessThanOrEqual(input.covers[coverTypeId]!.availableWaterMm + 1e-9);
          expect(t.aetMm).toBeLessThanOrEqual(Math.min(t.petMm, t.infiltrationMm + soilBeforeMm) + 1e-9);
          expect(t.percolationMm).toBeLessThanOrEqual(t.infiltrationMm + soilBeforeMm + 1e-9);
        }
      }),
      always,
    );
  });

  it('over all months, what came in equals what went out and what stayed', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        const v = volumes(input);
        const came =
          v.precipitationMm +
          v.surfaceReturnMm +
          v.returnToWasteMm +
          v.soilWaterBroughtMm +
          v.freeMoistureMm +
          v.condensateMm;
        const went =
          v.runoffToStormMm + v.runoffToLeachateMm + v.aetMm + v.coverDrainMm + v.collectedMm + v.leakedMm;
        const stayed = v.dSnowMm + v.dSoilMm + v.absorbedMm + v.dWasteMm;
        expect(Math.abs(came - went - stayed)).toBeLessThanOrEqual(
          1e-9 * Math.max(1, Math.abs(came) + Math.abs(went) + Math.abs(stayed)),
        );
      }),
      always,
    );
  });

  it('area split: every plot cut in two equal halves gives the same volumes', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        const only = input.cells[0]!;
        const halves = ['a', 'b'].flatMap((half) =>
          only.plots.map((one) => ({
            ...one,
            id: `${one.id} ${half}`,
            parentId: one.parentId && `${one.parentId} ${half}`,
            areaM2: one.areaM2 / 2,
          })),
        );
        const cut = volumes({
          ...input,
          cells: [
            {
              ...only,
              plots: halves,
              returns: only.returns.map((one) => ({ ...one, plotIds: ['plot a', 'plot b'] })),
            },
          ],
        });
        const whole = volumes(input);
        for (const name of termNames) near(cut[name], whole[name]);
      }),
      twice,
    );
  });

  it('unit invariance: areas in acres and volumes in the same measure give the same depths', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        const factor = 1 / 4046.8564224;
        const other = {
          ...input,
          cells: input.cells.map((one) => ({
            ...one,
            plots: one.plots.map((plot) => ({ ...plot, areaM2: plot.areaM2 * factor })),
            placedDeficitM3: Object.fromEntries(
              Object.entries(one.placedDeficitM3).map(([month, volume]) => [month, volume * factor]),
            ),
            condensateM3: Object.fromEntries(
              Object.entries(one.condensateM3).map(([month, volume]) => [month, volume * factor]),
            ),
            returns: one.returns.map((back) => ({ ...back, volumeM3: back.volumeM3 * factor })),
          })),
        };
        const [a, b] = [runWaterBalance(input).steps, runWaterBalance(other).steps];
        a.forEach((step, index) => {
          for (const name of termNames) near(step.terms[name], b[index]!.terms[name], 1e-12 * 100);
        });
      }),
      twice,
    );
  });

  it('time shift: the same forcing 28 years later gives the same answer', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        const years = 28;
        const days = 28 * 365 + 7;
        const day = (text: string) => addDays(text, days);
        const monthKeys = <T>(record: Record<string, T>) =>
          Object.fromEntries(
            Object.entries(record).map(([key, value]) => [addMonths(key, years * 12), value]),
          );
        const shifted: EngineInput = {
          ...input,
          climate: input.climate.map((row) => ({ ...row, month: addMonths(row.month, years * 12) })),
          cells: input.cells.map((one) => ({
            ...one,
            placedDeficitM3: monthKeys(one.placedDeficitM3),
            condensateM3: monthKeys(one.condensateM3),
            measuredHeadM: monthKeys(one.measuredHeadM),
            returns: one.returns.map((back) => ({ ...back, siteDay: day(back.siteDay) })),
            plots: one.plots.map((plot) => ({
              ...plot,
              fromOn: day(plot.fromOn),
              toOn: plot.toOn && day(plot.toOn),
              periods: plot.periods.map((period) => ({
                ...period,
                fromOn: day(period.fromOn),
                toOn: period.toOn && day(period.toOn),
              })),
            })),
          })),
        };
        const [a, b] = [runWaterBalance(input).steps, runWaterBalance(shifted).steps];
        expect(b.map((step) => step.terms)).toEqual(a.map((step) => step.terms));
      }),
      twice,
    );
  });

  it('order independence: cells and covers in any order give the same steps', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        const second = {
          ...input.cells[0]!,
          id: 'second',
          returns: [],
          plots: input.cells[0]!.plots.map((one) => ({
            ...one,
            id: `second ${one.id}`,
            parentId: one.parentId && `second ${one.parentId}`,
          })),
        };
        const both = { ...input, cells: [...input.cells, second] };
        const turned = {
          ...both,
          cells: [...both.cells].reverse(),
          covers: Object.fromEntries(Object.entries(both.covers).reverse()),
        };
        const keyed = (one: EngineInput) =>
          new Map(runWaterBalance(one).steps.map((step) => [`${step.plotId} ${step.fromOn}`, step.terms]));
        expect(keyed(turned)).toEqual(keyed(both));
      }),
      twice,
    );
  });

  it('monotone: more rain never gives less runoff, leachate and storage together', () => {
    const total = (input: EngineInput) => {
      const v = volumes(input);
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
    fc.assert(
      fc.property(anyInput, fc.integer({ min: 0, max: 23 }), depth(100), (input, index, moreMm) => {
        // A day's record grows on its last day, so that the days still add up to the month.
        const climate = input.climate.map((row, at) => {
          if (at !== index) return row;
          const days = row.days && {
            ...row.days,
            precipitationMm: row.days.precipitationMm!.map((rain, day, all) =>
              day === all.length - 1 ? rain + moreMm : rain,
            ),
          };
          return { ...row, days, precipitationMm: row.precipitationMm + moreMm };
        });
        // Spinning up on a wetter year starts from another store, which is another question.
        const fixed = { ...input, parameters: { ...input.parameters, isSpunUp: false } };
        const before = total(fixed);
        expect(total({ ...fixed, climate })).toBeGreaterThanOrEqual(
          before - 1e-6 * Math.max(1, Math.abs(before)),
        );
      }),
      twice,
    );
  });

  it('monotone: a larger runoff share never gives more percolation', () => {
    fc.assert(
      fc.property(anyInput, depth(0.1), (input, more) => {
        const plain = { ...input, parameters: { ...input.parameters, runoffMethod: 'coefficient' as const } };
        const steeper = {
          ...plain,
          covers: Object.fromEntries(
            Object.entries(plain.covers).map(([id, one]) => [
              id,
              {
                ...one,
                runoffCoefficientWet: one.runoffCoefficientWet + more,
                runoffCoefficientDry: one.runoffCoefficientDry + more,
              },
            ]),
          ),
        };
        expect(volumes(steeper).percolationMm).toBeLessThanOrEqual(volumes(plain).percolationMm + 1e-6);
      }),
      twice,
    );
  });

  it('nothing in: only what was stored leaves, nothing out of nothing', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        const dry: EngineInput = {
          ...input,
          climate: input.climate.map((row) => ({ ...row, precipitationMm: 0, days: null })),
          cells: input.cells.map((one) => ({ ...one, placedDeficitM3: {}, condensateM3: {}, returns: [] })),
        };
        const v = volumes(dry);
        const stored = v.soilWaterBroughtMm - v.dSoilMm - v.dWasteMm;
        const left = v.aetMm + v.coverDrainMm + v.collectedMm + v.leakedMm + v.absorbedMm + v.runoffToStormMm;
        near(left + v.runoffToLeachateMm, stored);
      }),
      always,
    );
  });
});
