import { once } from 'node:events';
import { Worker } from 'node:worker_threads';
import { createModelPool } from '#server/workers/model-pool.ts';
import { monthRange, type Month } from '#shared/calendar/month.ts';
import type { ForecastTask } from '#shared/forecast/draw-members.ts';
import type { EngineInput } from '#shared/water-balance/engine-input.ts';
import { planWaterBalance, runPlan } from '#shared/water-balance/run-water-balance.ts';
import { cell, climateMonth, cover, engineInput, plot } from '../factories/engine-inputs.ts';
import { median, timesMs, type Figure } from './measure.ts';

const plotCount = 20;
const termCount = 28;

/**
 * The same arithmetic on typed arrays and nothing else: snow, runoff, exponential soil store, membrane, waste, drain,
 * every term of a step written down. No dates, no covers that change, no check that a line closes.
 */
function bareLoop(
  climate: { rain: Float64Array; snowfall: Float64Array; melt: Float64Array; pet: Float64Array },
  plots: number,
  out: Float64Array,
): void {
  const [capacity, coefficient, recession, channelled, leak] = [110, 0.2, 0.5, 0.1, 0.01];
  const { rain, snowfall, melt, pet } = climate;
  for (let plotIndex = 0; plotIndex < plots; plotIndex += 1) {
    let [soil, waste, deficit] = [55, 0, 40];
    for (let month = 0; month < rain.length; month += 1) {
      const at = (plotIndex * rain.length + month) * termCount;
      const surface = rain[month]! + melt[month]!;
      const runoff = Math.min(1, coefficient) * surface;
      const infiltration = surface - runoff;
      const surplus = infiltration - pet[month]!;
      const before = soil;
      let [percolation, aet] = [0, pet[month]!];
      if (surplus >= 0) {
        percolation = Math.max(0, soil + surplus - capacity);
        soil = Math.min(capacity, soil + surplus);
      } else {
        aet = infiltration + soil * -Math.expm1(surplus / capacity);
        soil *= Math.exp(surplus / capacity);
      }
      const absorbed = Math.min(deficit, percolation * (1 - channelled));
      deficit -= absorbed;
      const inflow = percolation - absorbed;
      const lost = -Math.expm1(-recession);
      const kept = lost / recession;
      const wasteBefore = waste;
      const drained = inflow * (1 - kept) + waste * lost;
      waste = waste * Math.exp(-recession) + inflow * kept;
      const leaked = drained * leak;
      const collected = drained * (1 - leak);
      out[at] = rain[month]! + snowfall[month]!;
      out[at + 1] = rain[month]!;
      out[at + 2] = snowfall[month]!;
      out[at + 3] = melt[month]!;
      out[at + 4] = snowfall[month]! - melt[month]!;
      out[at + 5] = pet[month]!;
      out[at + 6] = 0;
      out[at + 7] = 0;
      out[at + 8] = runoff;
      out[at + 9] = 0;
      out[at + 10] = infiltration;
      out[at + 11] = aet;
      out[at + 12] = soil - before;
      out[at + 13] = soil;
      out[at + 14] = percolation;
      out[at + 15] = percolation;
      out[at + 16] = 0;
      out[at + 17] = 0;
      out[at + 18] = 0;
      out[at + 19] = absorbed;
      out[at + 20] = waste - wasteBefore;
      out[at + 21] = waste;
      out[at + 22] = deficit;
      out[at + 23] = drained;
      out[at + 24] = 0;
      out[at + 25] = collected;
      out[at + 26] = leaked;
      out[at + 27] = collected;
    }
  }
}

const climateOf = (months: readonly Month[]) =>
  months.map((month, index) =>
    climateMonth(month, { precipitationMm: 60 + 40 * Math.sin(index), petMm: 50 + 45 * Math.sin(index / 2) }),
  );

/** Sites of cells with four plots each, all under one cover. */
function siteOf(months: readonly Month[], cellCount: number, plotsPerCell: number): EngineInput {
  const fromOn = `${months[0]!}-01`;
  return engineInput({
    climate: climateOf(months),
    covers: {
      open: cover({
        availableWaterMm: 110,
        runoffCoefficientWet: 0.2,
        runoffCoefficientDry: 0.2,
        runoffDestination: 'storm-water',
      }),
    },
    cells: Array.from({ length: cellCount }, (_, cellIndex) =>
      cell({
        id: `cell ${cellIndex}`,
        initialWasteDeficitMm: 40,
        plots: Array.from({ length: plotsPerCell }, (_plot, index) =>
          plot({
            id: `plot ${cellIndex} ${index}`,
            fromOn,
            periods: [{ coverTypeId: 'open', fromOn, toOn: null, initialSoilStoreMm: 55 }],
          }),
        ),
      }),
    ),
    parameters: { recessionPerMonth: 0.5, channelledFraction: 0.1, leakFraction: 0.01 },
  });
}

/** Nanoseconds of one plot and month, with every term, every line checked, beside the bare loop. */
export async function benchEngine(): Promise<Figure[]> {
  const months = monthRange('1980-01', '2011-12');
  const input = siteOf(months, 1, plotCount);
  const rain = Float64Array.from(input.climate.map((row) => row.precipitationMm));
  const pet = Float64Array.from(input.climate.map((row) => row.petMm!));
  const none = new Float64Array(months.length);
  const out = new Float64Array(plotCount * months.length * termCount);
  const steps = plotCount * months.length;
  const { plan } = planWaterBalance(input);
  let totalMm = 0;
  const repeats = 20;
  const engine = await timesMs(7, () => {
    for (let index = 0; index < repeats; index += 1)
      runPlan(plan, (_step, terms) => {
        totalMm += terms.leachateMm;
      });
  });
  const planned = await timesMs(7, () => planWaterBalance(input));
  const bare = await timesMs(7, () => {
    for (let index = 0; index < repeats; index += 1)
      bareLoop({ rain, snowfall: none, melt: none, pet }, plotCount, out);
  });
  if (!(totalMm > 0)) throw new RangeError('The engine computed nothing.');
  const bareNs = (median(bare) * 1e6) / steps / repeats;
  return [
    {
      what: `engine, one plot and month (${plotCount} plots × ${months.length} months), laid out before`,
      value: (median(engine) * 1e6) / steps / repeats,
      unit: 'ns',
      bare: 'typed-array loop of the same arithmetic',
      bareValue: bareNs,
    },
    {
      what: 'laying a run out: climate, PET, covers and dates, per plot and month',
      value: (median(planned) * 1e6) / steps,
      unit: 'ns',
      bare: 'typed-array loop of the same arithmetic',
      bareValue: bareNs,
    },
    ...(await benchMembers()),
    ...(await benchGrowth()),
  ];
}

/** Cost of laying out and running against size: tenfold cells, tenfold years; linear growth is 10 and 100. */
async function benchGrowth(): Promise<Figure[]> {
  const cost = async (cellCount: number, years: number) => {
    const input = siteOf(monthRange('1900-01', `${1899 + years}-12`), cellCount, 1);
    return median(await timesMs(5, () => runPlan(planWaterBalance(input).plan, () => undefined)));
  };
  const small = await cost(10, 10);
  return [
    {
      what: '100 cells × 10 years, laid out and run',
      value: await cost(100, 10),
      unit: 'ms',
      bare: '10 cells × 10 years (linear: 10)',
      bareValue: small,
    },
    {
      what: '100 cells × 100 years, laid out and run',
      value: await cost(100, 100),
      unit: 'ms',
      bare: '10 cells × 10 years (linear: 100)',
      bareValue: small,
    },
  ];
}

const memberCount = 1000;

/** Members of a forecast in the worker threads, beside the bare loop over as many plot-months on the same processors. */
async function benchMembers(): Promise<Figure[]> {
  const months = monthRange('1980-01', '2011-12');
  const input = siteOf(monthRange('2012-01', '2012-12'), 8, 1);
  const monthCount = 360;
  const fixed = (low: number, high: number) => ({ low, high });
  const task: ForecastTask = {
    input: { ...input, climate: [] },
    source: {
      months,
      precipitationMm: climateOf(months).map((row) => row.precipitationMm),
      tMeanC: months.map(() => 12),
      petMm: climateOf(months).map((row) => row.petMm!),
    },
    firstMonth: '2012-01',
    monthCount,
    grounds: {},
    packMm: 0,
    ranges: {
      runoffFactor: fixed(0.8, 1.2),
      petFactor: fixed(0.9, 1.1),
      recessionPerMonth: fixed(0.3, 0.8),
      channelledFraction: fixed(0, 0.2),
    },
    store: null,
    seed: 1,
  };
  const pool = createModelPool();
  const spanCount = pool.threadCount * 4;
  const spansOf = (scenarioId: string) =>
    Array.from({ length: spanCount }, (_, index) => ({
      scenarioId,
      task,
      from: Math.floor((index * memberCount) / spanCount),
      to: Math.floor(((index + 1) * memberCount) / spanCount),
    }));
  let round = 0;
  const members = await timesMs(5, () =>
    Promise.all(spansOf(`forecast ${(round += 1)}`).map((span) => pool.drawSpan(span))),
  );
  await pool.close();
  const bare = await timesInThreads(pool.threadCount, memberCount / pool.threadCount, monthCount);
  return [
    {
      what: `${memberCount} members × 8 plots × ${monthCount} months in ${pool.threadCount} threads`,
      value: median(members),
      unit: 'ms',
      bare: `the bare loop over as many, in ${pool.threadCount} threads`,
      bareValue: median(bare),
    },
  ];
}

/** Milliseconds of the bare loop in threads of its own, started before the clock runs. */
async function timesInThreads(
  threadCount: number,
  membersEach: number,
  monthCount: number,
): Promise<number[]> {
  const code = `const { parentPort } = require('node:worker_threads');
    const __name = (one) => one;
    const termCount = ${termCount};
    ${bareLoop.toString()}
    const series = (base, swing, step) => Float64Array.from({ length: ${monthCount} }, (_, index) => base + swing * Math.sin(index / step));
    const climate = { rain: series(60, 40, 1), pet: series(50, 45, 2), snowfall: series(0, 0, 1), melt: series(0, 0, 1) };
    const out = new Float64Array(8 * ${monthCount} * termCount);
    parentPort.on('message', () => {
      for (let member = 0; member < ${membersEach}; member += 1) bareLoop(climate, 8, out);
      parentPort.postMessage('done');
    });`;
  const threads = Array.from({ length: threadCount }, () => new Worker(code, { eval: true }));
  const times = await timesMs(5, () =>
    Promise.all(
      threads.map((thread) => {
        const done = once(thread, 'message');
        thread.postMessage('go');
        return done;
      }),
    ),
  );
  await Promise.all(threads.map((thread) => thread.terminate()));
  return times;
}
