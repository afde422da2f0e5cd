import { describe, expect, it } from 'vitest';
import { compareMonths } from '#shared/reconciliation/compare-months.ts';
import { correlationAtLag, fitStatistics } from '#shared/reconciliation/fit-statistics.ts';
import { monthRange } from '#shared/calendar/month.ts';
import metrics from '#data/published/hydrology-cases.json' with { type: 'json' };

/** Hand arithmetic of the project's acceptance scenarios 17 and 18. */
describe('predicted against measured', () => {
  it('17: 2 310 against 2 016 m³ on 4.2 ha is +294 m³, +14.6 %', () => {
    const [march] = compareMonths(
      [{ month: '2026-03', areaM2: 42_000, rainMm: 96, predictedM3: 2016, measuredM3: 2310 }],
      5,
    );
    expect(march!.differenceM3).toBe(294);
    expect(march!.percent).toBeCloseTo(14.6, 1);
    expect((march!.differenceM3! / 42_000) * 1000).toBeCloseTo(7, 1);
    expect(march!.isPercentMuted).toBe(false);
  });

  const predicted = [2184, 1932, 2016, 1260, 504, 168, 84, 126, 588, 1428, 2100, 2352];
  const measured = [2351, 2201, 2059, 1839, 1045, 406, 146, 104, 302, 926, 1746, 2298];
  const rows = monthRange('2025-01', '2025-12').map((month, index) => ({
    month,
    areaM2: 42_000,
    rainMm: 80,
    predictedM3: predicted[index]!,
    measuredM3: measured[index]!,
  }));

  it('18: rolling twelve +4.6 %, June +141.7 % muted under 5 mm, lag 0.930 and 0.977 with 11 pairs', () => {
    const compared = compareMonths(rows, 5);
    expect(compared.at(-1)!.rolling).toMatchObject({
      predictedM3: 14_742,
      measuredM3: 15_423,
      monthCount: 12,
    });
    expect(compared.at(-1)!.rolling.percent).toBeCloseTo(4.6, 1);
    const june = compared[5]!;
    expect(june.percent).toBeCloseTo(141.7, 1);
    expect(june.isPercentMuted).toBe(true);
    const pairs = rows.map((row) => ({ predicted: row.predictedM3, measured: row.measuredM3 }));
    expect(correlationAtLag(pairs, 0)!.r).toBeCloseTo(0.93, 3);
    expect(correlationAtLag(pairs, 1)).toMatchObject({ pairCount: 11 });
    expect(correlationAtLag(pairs, 1)!.r).toBeCloseTo(0.977, 3);
  });

  it('18: with one month missing the rolling twelve counts 11 and leaves it out of both sides', () => {
    const holed = compareMonths(
      rows.map((row, index) => (index === 5 ? { ...row, measuredM3: null } : row)),
      5,
    ).at(-1)!;
    expect(holed.rolling).toMatchObject({
      monthCount: 11,
      predictedM3: 14_742 - 168,
      measuredM3: 15_423 - 406,
    });
  });

  it('percent of nothing is not defined, never infinite', () => {
    const [row] = compareMonths(
      [{ month: '2026-07', areaM2: 1000, rainMm: 0, predictedM3: 0, measuredM3: 3 }],
      5,
    );
    expect(row!.percent).toBeNull();
    expect(row!.differenceM3).toBe(3);
  });

  it('fit statistics agree with a public statistics library and Moriasi et al. (2007), sign turned to predicted − measured', () => {
    const nse = metrics.find((one) => one.id === 'metric-nse-12')!;
    const rmse = metrics.find((one) => one.id === 'metric-rmse-5')!;
    const pairsOf = (found: typeof nse) => {
      const inputs = found.inputs as unknown as Record<'obs' | 'sim', { value: number[] }>;
      return inputs.obs.value.map((value, index) => ({
        measured: value,
        predicted: inputs.sim.value[index]!,
      }));
    };
    const expected = (found: typeof nse, key: string) =>
      (found.expected as unknown as Record<string, { value: number }>)[key]!.value;
    expect(fitStatistics(pairsOf(nse)).nashSutcliffe).toBeCloseTo(expected(nse, 'NSE'), 9);
    expect(fitStatistics(pairsOf(rmse)).rmse).toBeCloseTo(expected(rmse, 'RMSE'), 7);
    expect(fitStatistics(pairsOf(rmse)).pbiasPercent).toBeCloseTo(expected(rmse, 'PBIAS_sim_minus_obs'), 6);
  });
});
