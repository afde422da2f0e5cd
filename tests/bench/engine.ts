import { monthRange } from '#shared/calendar/month.ts';
import { runWaterBalance } from '#shared/water-balance/run-water-balance.ts';
import { cell, climateMonth, cover, engineInput, plot } from '../factories/engine-inputs.ts';
import { median, timesMs, type Figure } from './measure.ts';

const months = monthRange('1980-01', '2011-12');
const plotCount = 20;

/** The same arithmetic on typed arrays: runoff, exponential soil store, linear reservoir. */
function bareLoop(rain: Float64Array, pet: Float64Array, out: Float64Array): void {
  const [capacity, coefficient, decay] = [110, 0.2, Math.exp(-0.5)];
  const phi = -Math.expm1(-0.5) / 0.5;
  for (let index = 0; index < plotCount; index += 1) {
    let [soil, waste] = [55, 0];
    for (let month = 0; month < rain.length; month += 1) {
      const infiltration = rain[month]! * (1 - coefficient);
      const surplus = infiltration - pet[month]!;
      let percolation = 0;
      if (surplus >= 0) {
        percolation = Math.max(0, soil + surplus - capacity);
        soil = Math.min(capacity, soil + surplus);
      } else soil *= Math.exp(surplus / capacity);
      out[index * rain.length + month] = percolation * (1 - phi) + waste * (1 - decay);
      waste = waste * decay + percolation * phi;
    }
  }
}

/** Nanoseconds of one plot and month, with its 27 terms, closure checks and working kept, beside the bare loop. */
export async function benchEngine(): Promise<Figure[]> {
  const climate = months.map((month, index) =>
    climateMonth(month, { precipitationMm: 60 + 40 * Math.sin(index), petMm: 50 + 45 * Math.sin(index / 2) }),
  );
  const plots = Array.from({ length: plotCount }, (_, index) =>
    plot({
      id: `plot ${index}`,
      fromOn: '1980-01-01',
      periods: [{ coverTypeId: 'open', fromOn: '1980-01-01', toOn: null, initialSoilStoreMm: 55 }],
    }),
  );
  const input = engineInput({
    climate,
    covers: { open: cover({ availableWaterMm: 110, runoffCoefficientWet: 0.2, runoffCoefficientDry: 0.2 }) },
    cells: [cell({ plots })],
    parameters: { recessionPerMonth: 0.5 },
  });
  const rain = Float64Array.from(climate.map((row) => row.precipitationMm));
  const pet = Float64Array.from(climate.map((row) => row.petMm!));
  const out = new Float64Array(plotCount * months.length);
  const steps = plotCount * months.length;
  const repeats = 200;
  const engine = await timesMs(7, () => runWaterBalance(input));
  const bare = await timesMs(7, () => {
    for (let index = 0; index < repeats; index += 1) bareLoop(rain, pet, out);
  });
  return [
    {
      what: `engine, one plot and month (${plotCount} plots × ${months.length} months)`,
      value: (median(engine) * 1e6) / steps,
      unit: 'ns',
      bare: 'typed-array loop of the same arithmetic',
      bareValue: (median(bare) * 1e6) / steps / repeats,
    },
  ];
}
