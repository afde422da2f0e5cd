import { describe, expect, it } from 'vitest';
import { monthRange } from '#shared/calendar/month.ts';
import { createForecaster, type ForecastTask } from '#shared/forecast/draw-members.ts';
import { yearStarts } from '#shared/forecast/member-weather.ts';
import { planScenario, PlanRefused } from '#shared/forecast/plan-scenario.ts';
import { simulateStore, type StorePlan } from '#shared/forecast/simulate-store.ts';
import { stormHeadroom } from '#shared/forecast/storm-headroom.ts';
import { summariseMembers } from '#shared/forecast/summarise-members.ts';
import { runWaterBalance } from '#shared/water-balance/run-water-balance.ts';
import { cell, climateMonth, cover, engineInput, plot } from '../../factories/engine-inputs.ts';

const covers = {
  open: cover({ availableWaterMm: 60 }),
  closed: cover({ availableWaterMm: 150, membranePassFraction: 0.01, runoffDestination: 'storm-water' }),
};
const sourceMonths = monthRange('2019-01', '2024-12');
const source = {
  months: sourceMonths,
  precipitationMm: sourceMonths.map((_, index) => 60 + ((index * 29) % 71)),
  tMeanC: sourceMonths.map(() => 12),
  petMm: sourceMonths.map((_, index) => 20 + ((index * 13) % 60)),
};
const fixed = (value: number) => ({ low: value, high: value });
const task = (change: Partial<ForecastTask> = {}): ForecastTask => ({
  input: engineInput({
    covers,
    cells: [
      cell({
        plots: [
          plot({
            periods: [{ coverTypeId: 'open', fromOn: '2025-01-01', toOn: null, initialSoilStoreMm: 30 }],
          }),
        ],
      }),
    ],
  }),
  source,
  firstMonth: '2025-01',
  monthCount: 24,
  grounds: { plot: { soilStoreMm: 30, wasteStoreMm: 12, wasteDeficitMm: 5 } },
  packMm: 0,
  ranges: {
    runoffFactor: { low: 0.8, high: 1.2 },
    petFactor: { low: 0.85, high: 1.15 },
    recessionPerMonth: { low: 0.3, high: 0.8 },
    channelledFraction: { low: 0, high: 0.2 },
  },
  store: null,
  seed: 4182,
  ...change,
});

describe('members of a forecast', () => {
  it('the same seed gives the same numbers, whoever computes which member', () => {
    const whole = createForecaster(task())(0, 60);
    const parts = [createForecaster(task())(0, 17), createForecaster(task())(17, 60)];
    expect(Array.from(whole.leachateM3)).toEqual(parts.flatMap((part) => Array.from(part.leachateM3)));
    const other = createForecaster(task({ seed: 4183 }))(0, 60);
    expect(Array.from(other.leachateM3)).not.toEqual(Array.from(whole.leachateM3));
  });

  it('with one climate year and fixed parameters every member is the run of the engine itself', () => {
    const one = {
      months: sourceMonths.slice(0, 12),
      precipitationMm: source.precipitationMm.slice(0, 12),
      tMeanC: source.tMeanC.slice(0, 12),
      petMm: source.petMm.slice(0, 12),
    };
    const ranges = {
      runoffFactor: fixed(1),
      petFactor: fixed(1),
      recessionPerMonth: fixed(0.5),
      channelledFraction: fixed(0),
    };
    const members = createForecaster(task({ source: one, ranges }))(0, 3);
    const months = monthRange('2025-01', '2026-12');
    const run = runWaterBalance(
      engineInput({
        covers,
        climate: months.map((month, index) =>
          climateMonth(month, {
            precipitationMm: one.precipitationMm[index % 12]!,
            petMm: one.petMm[index % 12]!,
          }),
        ),
        cells: [
          cell({
            initialWasteStoreMm: 12,
            initialWasteDeficitMm: 5,
            plots: [
              plot({
                periods: [{ coverTypeId: 'open', fromOn: '2025-01-01', toOn: null, initialSoilStoreMm: 30 }],
              }),
            ],
          }),
        ],
      }),
    ).steps.map((step) => (step.terms.leachateMm * step.areaM2) / 1000);
    for (const member of [0, 1, 2])
      run.forEach((volume, month) => expect(members.leachateM3[member * 24 + month]!).toBeCloseTo(volume, 9));
  });

  it('draws whole years only, from the month the forecast begins in', () => {
    expect(yearStarts(source, '2025-11').map((index) => sourceMonths[index])).toEqual([
      '2019-11',
      '2020-11',
      '2021-11',
      '2022-11',
      '2023-11',
    ]);
    expect(() =>
      createForecaster(task({ source: { ...source, months: sourceMonths.slice(0, 11) } })),
    ).toThrow('no whole year');
  });

  it('percentiles of eleven members are those of their sorted values', () => {
    // Members 0, 10, …, 100 in one month: quantiles by hand 10, 50 and 90 between the sorted values.
    const values = Float64Array.from([50, 0, 100, 30, 20, 10, 40, 60, 90, 80, 70]);
    const zero = new Float64Array(11);
    const { months, memberCount } = summariseMembers(
      [{ leachateM3: values, levelM: zero, loads: zero, isOver: new Uint8Array(11), spillM3: zero }],
      1,
    );
    expect(memberCount).toBe(11);
    expect(months[0]!.leachateM3).toEqual({ low: 10, middle: 50, high: 90 });
  });
});

describe('a store ahead', () => {
  const points = [
    { levelM: 0, volumeM3: 0, surfaceM2: 1000 },
    { levelM: 3, volumeM3: 3000, surfaceM2: 1000 },
  ];
  const plan: StorePlan = {
    points,
    startLevelM: 1,
    operatingLevelM: 2,
    crestLevelM: 2.8,
    linedAreaM2: 1000,
    evaporationFactor: 1,
    isCovered: false,
    plantM3PerDay: 10,
    loadM3: 20,
    loadsPerDayMax: 1,
  };
  const out = {
    levelM: new Float64Array(2),
    loads: new Float64Array(2),
    isOver: new Uint8Array(2),
    spillM3: new Float64Array(2),
  };

  it('fills, is treated, and hauls what stands above the operating level, as far as trucks go', () => {
    // Month 1, by hand: 1000 + 1500 + 100 − 50 − 300 = 2250; above 2000 by 250, 13 loads of 20, ends at 1990.
    // Month 2: 1990 + 1500 + 100 − 50 − 310 = 3230; 62 loads wanted, 31 days of one truck haul 620, ends at 2610.
    simulateStore(
      plan,
      [
        { inflowM3: 1500, rainMm: 100, petMm: 50, dayCount: 30 },
        { inflowM3: 1500, rainMm: 100, petMm: 50, dayCount: 31 },
      ],
      out,
      0,
    );
    expect([...out.loads]).toEqual([13, 31]);
    expect(out.levelM[0]).toBeCloseTo(1.99, 9);
    expect(out.levelM[1]).toBeCloseTo(2.61, 9);
    expect([...out.isOver]).toEqual([0, 1]);
    expect([...out.spillM3]).toEqual([0, 0]);
  });

  it('what does not fit under the crest runs over and is counted', () => {
    // By hand: 1000 + 2500 − 300 = 3200, no truck; the crest holds 2800, so 400 run over.
    simulateStore(
      { ...plan, loadsPerDayMax: 0 },
      [{ inflowM3: 2500, rainMm: 0, petMm: 0, dayCount: 30 }],
      out,
      0,
    );
    expect(out.spillM3[0]).toBeCloseTo(400, 9);
    expect(out.levelM[0]).toBeCloseTo(2.8, 9);
  });
});

describe('14: storm headroom', () => {
  const points = [
    { levelM: 0, volumeM3: 0, surfaceM2: 3500 },
    { levelM: 3.45, volumeM3: 3.45 * 3500, surfaceM2: 3500 },
  ];
  const storm = (levelM: number) =>
    stormHeadroom({
      stormMm: 127,
      contributing: [
        { areaM2: 16_000, share: 0.9 },
        { areaM2: 3500, share: 1 },
      ],
      levelM,
      limitM: 2.8,
      points,
      loadM3: 20.82,
    });

  it('at 2.10 m 2 450 m³ hold a storm of 2 273, margin +177', () => {
    const found = storm(2.1)!;
    expect(found.stormM3).toBeCloseTo(2273, 0);
    expect(found.headroomM3).toBeCloseTo(2450, 6);
    expect(found.marginM3).toBeCloseTo(177, 0);
    expect(found.loads).toBe(0);
  });

  it('at 2.20 m it is short by 173 m³, 9 loads of 20.82 m³; a level of 22.0 m is not in the table', () => {
    const found = storm(2.2)!;
    expect(found.marginM3).toBeCloseTo(-173, 0);
    expect(found.loads).toBe(9);
    expect(storm(22)).toBeNull();
  });
});

describe('planned cover changes', () => {
  const { input } = task();
  const close = {
    kind: 'cover' as const,
    plotId: 'plot',
    onDay: '2025-10-01',
    coverTypeId: 'closed',
    areaM2: 4000,
  };

  it('covering a part leaves plots that add to the whole, and less leachate', () => {
    const cells = planScenario(input, [close]);
    const live = cells[0]!.plots.filter((one) => one.toOn === null);
    expect(live.map((one) => one.areaM2)).toEqual([4000, 6000]);
    expect(input.cells[0]!.plots).toHaveLength(1);
    const sum = (one: ForecastTask) =>
      createForecaster(one)(0, 40).leachateM3.reduce((total, value) => total + value, 0);
    expect(sum(task({ input: { ...input, cells } }))).toBeLessThan(sum(task()));
  });

  it('a second change of the same plot takes what the first left; a new cell brings its floor', () => {
    const cells = planScenario(input, [
      { ...close, onDay: '2026-03-01', areaM2: 6000 },
      close,
      { kind: 'cell', code: 'C4', onDay: '2026-05-01', coverTypeId: 'open', areaM2: 20_000 },
    ]);
    expect(cells.map((one) => one.code)).toEqual(['C1', 'C4']);
    const covered = cells[0]!.plots.flatMap((one) => (one.toOn ? [] : [one.periods.at(-1)!.coverTypeId]));
    expect(covered).toEqual(['closed', 'closed']);
  });

  it('a plot of another site and a change before the last one are refused in words', () => {
    expect(() => planScenario(input, [{ ...close, plotId: 'other' }])).toThrow(PlanRefused);
    expect(() => planScenario(input, [{ ...close, onDay: '2024-12-01' }])).toThrow('in order');
    expect(() => planScenario(input, [{ ...close, areaM2: 10_001 }])).toThrow(
      /10000 m² of this plot are left .* 10001 m² cannot be covered/,
    );
  });
});
