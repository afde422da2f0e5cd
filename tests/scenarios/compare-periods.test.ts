import { describe, expect, it } from 'vitest';
import { netPairOf } from '#server/features/compare/net-pair.ts';
import hydrologyCases from '#data/published/hydrology-cases.json' with { type: 'json' };
import { monthRange } from '#shared/calendar/month.ts';
import { compareMonths, type ComparedInput } from '#shared/reconciliation/compare-months.ts';
import { findMassBreak, type MassPair } from '#shared/reconciliation/double-mass.ts';
import { compareFindings } from '#shared/reconciliation/findings.ts';
import { periodTotals } from '#shared/reconciliation/period-totals.ts';
import { sumpStorageChangeM3 } from '#shared/reconciliation/sump-storage.ts';
import type { EngineInput } from '#shared/water-balance/engine-input.ts';
import { runWaterBalance } from '#shared/water-balance/run-water-balance.ts';
import { sumSteps } from '#shared/water-balance/sum-steps.ts';
import { cell, engineInput } from '../factories/engine-inputs.ts';

const areaM2 = 42_000;

describe('17: one month in every unit', () => {
  const [month] = periodTotals(
    [{ month: '2026-03', areaM2, rainMm: 96, predictedM3: 2016, measuredM3: 2310 }],
    5,
  );

  it('2 016 m³ predicted against 2 310 pumped is +294 m³, +7.0 mm, +14.6 %', () => {
    expect(month!.differenceM3).toBe(294);
    expect(month!.differenceMm).toBeCloseTo(7.0, 9);
    expect(month!.percent).toBeCloseTo(14.6, 1);
    expect(month!.predicted!.depthMm).toBeCloseTo(48, 9);
    expect(month!.measured!.depthMm).toBeCloseTo(55, 9);
  });

  it('50.0 % of the rain against 57.3 %, and 1 897 gal/ac·d', () => {
    expect(month!.predicted!.percentOfRain).toBeCloseTo(50.0, 1);
    expect(month!.measured!.percentOfRain).toBeCloseTo(57.3, 1);
    expect(month!.measured!.galPerAcreDay).toBeCloseTo(1897, 0);
  });
});

describe('18: a year with a delay, and with a month missing', () => {
  const predicted = [2184, 1932, 2016, 1260, 504, 168, 84, 126, 588, 1428, 2100, 2352];
  const pumped = [2351, 2201, 2059, 1839, 1045, 406, 146, 104, 302, 926, 1746, 2298];
  const rows = monthRange('2025-01', '2025-12').map((month, index): ComparedInput => ({
    month,
    areaM2,
    rainMm: 80,
    predictedM3: predicted[index]!,
    measuredM3: pumped[index]!,
  }));

  it('twelve months and the calendar year end at +4.6 %', () => {
    const [, twelve, year] = periodTotals(rows, 5);
    expect(twelve!.percent).toBeCloseTo(4.6, 1);
    expect(year!.percent).toBeCloseTo(4.6, 1);
    expect(twelve!.countedCount).toBe(12);
  });

  it('a missing month is 11 of 12 and counts on neither side', () => {
    const [, twelve] = periodTotals(
      rows.map((row) => (row.month === '2025-06' ? { ...row, measuredM3: null } : row)),
      5,
    );
    expect(twelve).toMatchObject({ countedCount: 11, monthCount: 12 });
    expect(twelve!.predicted!.volumeM3).toBe(14_742 - 168);
    expect(twelve!.measured!.volumeM3).toBe(15_423 - 406);
  });

  it('the delay of one month is said with its correlations, 0.977 against 0.930, and June raises no alarm of its own', () => {
    const findings = compareFindings(compareMonths(rows, 5), 'C3', null);
    const delay = findings.find((one) => one.code === 'lag')!;
    expect(delay.sentence).toContain('0.977');
    expect(delay.sentence).toContain('0.930');
    expect(delay.sentence).toContain('11 pairs');
    expect(findings.filter((one) => one.sentence.includes('June'))).toEqual([]);
  });
});

describe('19: a wrong multiplier bends the double-mass curve', () => {
  const months = monthRange('2025-07', '2026-06');
  const before = [380, 420, 510, 440, 350, 330];
  const after = [360, 400, 460, 430, 400, 335];
  // The totals of the scenario, 2 475 of 2 430 before and 2 990 of 2 385 after, month by month at their slopes.
  const pairs: MassPair[] = months.map((month, index) => {
    const predictedM3 = [...before, ...after][index]!;
    const slope = index < 6 ? 2475 / 2430 : 2990 / 2385;
    return { month, predictedM3, measuredM3: predictedM3 * slope + (index % 2 ? 4 : -4) };
  });

  it('the totals of the months are the totals of the scenario', () => {
    expect(before.reduce((sum, one) => sum + one, 0)).toBe(2430);
    expect(after.reduce((sum, one) => sum + one, 0)).toBe(2385);
  });

  it('the break is flagged in the month of the swap, ratio 1.23, with the meter event before the cover', () => {
    const found = findMassBreak(pairs, [
      { onDay: '2025-12-20', kind: 'cover', sentence: '0.8 ha became intermediate soil' },
      { onDay: '2026-01-03', kind: 'meter', sentence: 'S3 meter: replace' },
      { onDay: '2025-08-01', kind: 'meter', sentence: 'S3 meter: calibrate' },
    ])!;
    expect(found.month).toBe('2026-01');
    expect(found.slopeBefore).toBeCloseTo(1.019, 2);
    expect(found.slopeAfter).toBeCloseTo(1.254, 2);
    expect(found.ratio).toBeCloseTo(1.23, 2);
    expect(found.events.map((one) => one.sentence)).toEqual([
      'S3 meter: replace',
      '0.8 ha became intermediate soil',
    ]);
  });

  it('without an event near, the sentence lists storm water, a neighbour cell, condensate and return', () => {
    const rows = compareMonths(
      pairs.map((pair) => ({ ...pair, areaM2, rainMm: 60 })),
      5,
    );
    const sentence = compareFindings(rows, 'C3', findMassBreak(pairs, [])).find(
      (one) => one.code === 'slope-break',
    )!.sentence;
    for (const words of ['storm water', 'neighbour cell', 'condensate', 'returned'])
      expect(sentence).toContain(words);
  });

  it('one slope throughout has no break', () => {
    const even = pairs.map((pair, index) => ({
      ...pair,
      measuredM3: pair.predictedM3 * 1.05 + (index % 3) * 6,
    }));
    expect(findMassBreak(even, [])).toBeNull();
  });
});

it('double mass, constructed on Searcy & Hardison 1960: slopes 1.2 and 0.9 are found where they meet, factor 0.75', () => {
  const constructed = hydrologyCases.find((one) => one.id === 'double-mass-constructed')!;
  const reference = (constructed.inputs as unknown as { ref: { value: number[] } }).ref.value;
  const pairs = monthRange('2025-01', '2026-08').map((month, index) => ({
    month,
    predictedM3: reference[index]!,
    measuredM3: reference[index]! * (index < 10 ? 1.2 : 0.9),
  }));
  const found = findMassBreak(pairs, [])!;
  expect(found.month).toBe('2025-11');
  expect(found.slopeBefore).toBeCloseTo(1.2, 9);
  expect(found.slopeAfter).toBeCloseTo(0.9, 9);
  expect(found.ratio).toBeCloseTo(0.75, 9);
});

describe('20: liquid returned into a cell', () => {
  const months = monthRange('2025-01', '2025-12');
  const returns = [{ siteDay: '2025-05-10', plotIds: ['plot'], isAtSurface: false, volumeM3: 350 }];
  const input = engineInput({ cells: [cell({ returns })], parameters: { recessionPerMonth: 0.5 } });
  const measuredOf = (volumeM3: number) => ({
    volumeM3,
    estimatedM3: 0,
    apportionedM3: 0,
    allocatedM3: 0,
    dividedByPredictionM3: 0,
    receivedM3: 0,
    sumpStorageM3: null,
  });
  const measured = new Map(months.map((month) => [`cell ${month}`, measuredOf(400)]));

  it('the net pair takes the return off what was pumped and runs without it; the gross run has it', () => {
    const net = netPairOf(input, 'cell', months, measured)!;
    const total = (one: EngineInput) => sumSteps(runWaterBalance(one).steps).volumesM3.leachateMm;
    expect(net).toMatchObject({ monthCount: 12, pumpedM3: 4800, returnedM3: 350, netM3: 4450 });
    expect(net.predictedM3).toBeCloseTo(total({ ...input, cells: [cell()] }), 6);
    expect(total(input)).toBeGreaterThan(net.predictedM3);
  });

  it('no return in the months, no net pair', () => {
    expect(netPairOf(input, 'cell', ['2025-08'], measured)).toBeNull();
  });
});

describe('liquid standing in a sump', () => {
  const levels = [
    { siteDay: '2026-03-01', levelM: 0.4 },
    { siteDay: '2026-04-02', levelM: 0.9 },
  ];

  it('0.5 m more in 6 m² of stone with 40 % pores is 1.2 m³', () => {
    expect(sumpStorageChangeM3({ areaM2: 6, porosityFraction: 0.4 }, levels, '2026-03')).toBeCloseTo(1.2, 9);
  });

  it('without its dimensions, or without a level near an end of the month, nothing is counted', () => {
    expect(sumpStorageChangeM3({ areaM2: null, porosityFraction: 0.4 }, levels, '2026-03')).toBeNull();
    expect(sumpStorageChangeM3({ areaM2: 6, porosityFraction: 0.4 }, levels, '2026-04')).toBeNull();
  });
});
