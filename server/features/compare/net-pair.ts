import type { Month } from '#shared/calendar/month.ts';
import type { EngineInput } from '#shared/water-balance/engine-input.ts';
import { planWaterBalance, runPlan } from '#shared/water-balance/run-water-balance.ts';
import type { NetPair } from '#shared/views/balance-view.ts';
import type { MeasuredMonth } from './measured-service.ts';

/**
 * Pumped less returned, against the run without the return; the run with it stays in the gross pair.
 * It assumes that what was returned drains within the month.
 * @param months the months looked at
 * @returns null when nothing was returned into the cell in them
 * @source method section 9
 */
export function netPairOf(
  input: EngineInput,
  cellId: string,
  months: readonly Month[],
  measured: ReadonlyMap<string, MeasuredMonth>,
): NetPair | null {
  const cell = input.cells.find((one) => one.id === cellId);
  const inMonths = (day: string) => months.includes(day.slice(0, 7));
  const returned = cell?.returns.filter((one) => inMonths(one.siteDay)) ?? [];
  if (!cell || !returned.length) return null;
  const without = { ...input, cells: [{ ...cell, returns: [] }] };
  const counted = months.filter((month) => measured.has(`${cellId} ${month}`));
  let predictedM3 = 0;
  runPlan(planWaterBalance(without).plan, ({ month, plot }, terms) => {
    if (counted.includes(month.row.month)) predictedM3 += (terms.leachateMm * plot.areaM2) / 1000;
  });
  const pumpedM3 = counted.reduce((sum, month) => sum + measured.get(`${cellId} ${month}`)!.volumeM3, 0);
  const returnedM3 = returned
    .filter((one) => counted.includes(one.siteDay.slice(0, 7)))
    .reduce((sum, one) => sum + one.volumeM3, 0);
  return { monthCount: counted.length, pumpedM3, returnedM3, netM3: pumpedM3 - returnedM3, predictedM3 };
}
