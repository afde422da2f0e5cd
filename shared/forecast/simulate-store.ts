import type { StrappingPoint } from '../ledger/store-volume.ts';
import { storeAtLevel } from '../ledger/store-volume.ts';

/** The pond or tank that takes the leachate, and what empties it. */
export interface StorePlan {
  points: StrappingPoint[];
  startLevelM: number;
  operatingLevelM: number;
  crestLevelM: number;
  linedAreaM2: number;
  evaporationFactor: number;
  isCovered: boolean;
  plantM3PerDay: number;
  loadM3: number;
  loadsPerDayMax: number;
}

export interface StoreMonth {
  inflowM3: number;
  rainMm: number;
  petMm: number;
  dayCount: number;
}

/** Level that holds a volume, straight between the rows; the table's ends where it lies outside. */
export function levelOfVolume(points: readonly StrappingPoint[], volumeM3: number): number {
  const above = points.findIndex((point) => point.volumeM3 >= volumeM3);
  if (above < 0) return points.at(-1)!.levelM;
  if (above === 0) return points[0]!.levelM;
  const [low, high] = [points[above - 1]!, points[above]!];
  const share = (volumeM3 - low.volumeM3) / (high.volumeM3 - low.volumeM3);
  return low.levelM + (high.levelM - low.levelM) * share;
}

/**
 * One store through months of inflow: rain and evaporation on it, the plant up to its capacity, then loads down to the
 * operating level, as many as can be hauled.
 * @param out level at the end of each month, m; loads; 1 where the operating level is passed all the same; and what
 * would run over the crest, m³: it does not come back
 */
export function simulateStore(
  plan: StorePlan,
  months: readonly StoreMonth[],
  out: { levelM: Float64Array; loads: Float64Array; isOver: Uint8Array; spillM3: Float64Array },
  offset: number,
): void {
  const limitM3 = storeAtLevel(plan.points, plan.operatingLevelM)!.volumeM3;
  const crestM3 = storeAtLevel(plan.points, plan.crestLevelM)?.volumeM3 ?? plan.points.at(-1)!.volumeM3;
  let volumeM3 = storeAtLevel(plan.points, plan.startLevelM)!.volumeM3;
  months.forEach((month, index) => {
    const levelM = levelOfVolume(plan.points, volumeM3);
    const surfaceM2 = storeAtLevel(plan.points, levelM)!.surfaceM2;
    const rainM3 = plan.isCovered ? 0 : (month.rainMm * plan.linedAreaM2) / 1000;
    const evaporationM3 = plan.isCovered ? 0 : (month.petMm * plan.evaporationFactor * surfaceM2) / 1000;
    volumeM3 = Math.max(0, volumeM3 + month.inflowM3 + rainM3 - evaporationM3);
    volumeM3 -= Math.min(volumeM3, plan.plantM3PerDay * month.dayCount);
    const wanted = plan.loadM3 > 0 ? Math.ceil(Math.max(0, volumeM3 - limitM3) / plan.loadM3) : 0;
    const loads = Math.min(wanted, Math.floor(plan.loadsPerDayMax * month.dayCount));
    volumeM3 = Math.max(0, volumeM3 - loads * plan.loadM3);
    out.spillM3[offset + index] = Math.max(0, volumeM3 - crestM3);
    volumeM3 = Math.min(volumeM3, crestM3);
    out.levelM[offset + index] = levelOfVolume(plan.points, volumeM3);
    out.loads[offset + index] = loads;
    out.isOver[offset + index] = volumeM3 > limitM3 + 1e-9 ? 1 : 0;
  });
}
