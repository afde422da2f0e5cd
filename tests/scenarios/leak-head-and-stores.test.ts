import { describe, expect, it } from 'vitest';
import { balanceStore } from '#shared/ledger/balance-store.ts';
import { headOnLinerM, leakDetectionRate } from '#shared/ledger/leak-detection.ts';
import { volumeToM3 } from '#shared/units/unit-factors.ts';
import { storeAtLevel } from '#shared/ledger/store-volume.ts';

/** Hand arithmetic of the project's acceptance scenarios 11, 13 and 22. C3 is 42 000 m² = 10.378 acres. */
describe('leak detection, head and stores', () => {
  it('11: 1 180 and 1 530 US gallons a week on 4.2 ha are 16.2 and 21.1 gal/acre·d', () => {
    const rate = (gallons: number) =>
      leakDetectionRate({ volumeM3: volumeToM3(gallons, 'gal-us').toNumber(), days: 7, areaM2: 42_000 })
        .galPerAcreDay;
    expect(rate(1180)).toBeCloseTo(16.2, 1);
    expect(rate(1530)).toBeCloseTo(21.1, 1);
    expect(
      leakDetectionRate({ volumeM3: volumeToM3(1530, 'gal-us').toNumber(), days: 7, areaM2: 125_000 })
        .galPerAcreDay,
    ).toBeCloseTo(7.1, 1);
    expect(() => leakDetectionRate({ volumeM3: 1, days: 0, areaM2: 42_000 })).toThrow(RangeError);
  });

  it('13: a level of 0.62 m is a head of 0.10, one of 0.85 is 0.33', () => {
    const offsets = { sensorAboveFloorM: 0.08, linerLowPointAboveFloorM: 0.6 };
    expect(headOnLinerM({ levelM: 0.62, ...offsets })).toBeCloseTo(0.1, 10);
    expect(headOnLinerM({ levelM: 0.85, ...offsets })).toBeCloseTo(0.33, 10);
    expect(headOnLinerM({ levelM: 0.1, ...offsets })).toBe(0);
  });

  const pond = {
    openingM3: 2000,
    closingMeasuredM3: 2210,
    rainMm: 96,
    evaporationMm: 62,
    linedAreaM2: 3500,
    surfaceM2: 3500,
    openingSurfaceM2: 3500,
    closingSurfaceM2: 3500,
    levelResolutionM: 0.01,
  };
  const flow = (volumeM3: number, accuracyFraction: number) => ({ volumeM3, accuracyFraction });

  it('22: the pond closes by −1 m³ within ±165; hauled as 1 500 it is off by 451', () => {
    const good = balanceStore({
      ...pond,
      inflows: [flow(6120, 0.02)],
      outflows: [flow(4980, 0.02), flow(1050, 0.01)],
    });
    expect(good.rainM3).toBe(336);
    expect(good.evaporationM3).toBe(217);
    expect(good.unaccountedM3).toBeCloseTo(1, 6);
    expect(good.toleranceM3).toBeCloseTo(165, 0);
    expect(good.isInside).toBe(true);
    const wrong = balanceStore({
      ...pond,
      inflows: [flow(6120, 0.02)],
      outflows: [flow(4980, 0.02), flow(1500, 0.01)],
    });
    expect(Math.abs(wrong.unaccountedM3)).toBeCloseTo(451, 6);
    expect(wrong.isInside).toBe(false);
  });

  it('a level between two rows lies straight between their volumes; outside the table there is none', () => {
    const table = [
      { levelM: 0, volumeM3: 0, surfaceM2: 1000 },
      { levelM: 2, volumeM3: 2400, surfaceM2: 1400 },
    ];
    expect(storeAtLevel(table, 0.5)).toEqual({ volumeM3: 600, surfaceM2: 1100 });
    expect(storeAtLevel(table, 2.1)).toBeNull();
  });
});
