import { describe, expect, it } from 'vitest';
import { checkPlotAreas } from '#shared/site/check-plot-areas.ts';
import { splitPlot } from '#shared/site/split-plot.ts';
import { runWaterBalance } from '#shared/water-balance/run-water-balance.ts';
import { cell, climateMonth, cover, engineInput, plot } from '../factories/engine-inputs.ts';

/** Acceptance scenario 16: 0.8 ha goes from working area to intermediate soil on 12 June; both at capacity all month. */
describe('16: a cover change in mid-month', () => {
  const june = climateMonth('2026-06', { precipitationMm: 100, petMm: 60 });
  const input = engineInput({
    climate: [june],
    covers: {
      open: cover({ availableWaterMm: 0 }),
      soil: cover({
        kind: 'intermediate-soil',
        availableWaterMm: 0,
        runoffCoefficientWet: 0.18,
        runoffCoefficientDry: 0.18,
        runoffDestination: 'storm-water',
      }),
    },
    cells: [
      cell({
        plots: [
          plot({
            areaM2: 8000,
            fromOn: '2026-01-01',
            periods: [
              { coverTypeId: 'open', fromOn: '2026-01-01', toOn: '2026-06-12', initialSoilStoreMm: 0 },
              { coverTypeId: 'soil', fromOn: '2026-06-12', toOn: null, initialSoilStoreMm: 0 },
            ],
          }),
        ],
      }),
    ],
  });

  it('percolation is 8 × (40×11/30 + 22×19/30) = 228.8 m³, not 320 or 176', () => {
    const { steps } = runWaterBalance(input);
    expect(steps.map((step) => [step.fromOn, step.dayCount])).toEqual([
      ['2026-06-01', 11],
      ['2026-06-12', 19],
    ]);
    const volumeM3 = steps.reduce((sum, step) => sum + (step.terms.percolationMm * step.areaM2) / 1000, 0);
    expect(volumeM3).toBeCloseTo(228.8, 9);
  });

  it('a part that is covered ends the plot, and its children add exactly to it', () => {
    expect(
      splitPlot(
        { areaM2: '16000.000', fromOn: '2025-01-01', toOn: null, name: 'Face' },
        { areaM2: '8000', onDay: '2026-06-12' },
      ),
    ).toEqual({ coveredAreaM2: '8000', restAreaM2: '8000' });
    expect(
      splitPlot(
        { areaM2: '8000', fromOn: '2025-01-01', toOn: null, name: 'Face' },
        { areaM2: '8000', onDay: '2026-06-12' },
      ),
    ).toEqual({ coveredAreaM2: '8000', restAreaM2: null });
  });

  it('more than the plot has, or a day before it began, is refused with the reason', () => {
    const face = { areaM2: '8000', fromOn: '2026-06-01', toOn: null, name: 'Face' };
    expect(splitPlot(face, { areaM2: '8001', onDay: '2026-06-12' })).toEqual({
      refused: 'Plot Face has 8000 m²; 8001 m² cannot be covered on it.',
    });
    expect(splitPlot(face, { areaM2: '1', onDay: '2026-05-31' })).toMatchObject({
      refused: expect.stringContaining('began on 1 June 2026') as string,
    });
  });

  it('plots of 4.6 ha on a lined area of 4.2 are +9.5 % and refused; under 1 % asks for a reason', () => {
    expect(checkPlotAreas(['16000', '14000', '8000', '4000'], '42000')).toEqual({ kind: 'agrees' });
    expect(checkPlotAreas(['16000', '14000', '12000', '4000'], '42000')).toMatchObject({
      kind: 'refuse',
      sentence: expect.stringContaining('+9.5 %') as string,
    });
    expect(checkPlotAreas(['16000', '14000', '8300', '4000'], '42000')).toMatchObject({ kind: 'ask' });
  });
});
