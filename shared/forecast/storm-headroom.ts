import { storeAtLevel, type StrappingPoint } from '../ledger/store-volume.ts';

export interface StormHeadroom {
  stormM3: number;
  headroomM3: number;
  /** Headroom less the storm; negative is short. */
  marginM3: number;
  /** Loads to haul before the storm for it to fit. */
  loads: number;
}

/**
 * Does the design storm fit into the store?
 * @param contributing ground that drains to the store, with the share of the storm that arrives
 * @returns null when a level lies outside the strapping table
 * @source common practice, no source
 */
export function stormHeadroom(input: {
  stormMm: number;
  contributing: readonly { areaM2: number; share: number }[];
  levelM: number;
  limitM: number;
  points: readonly StrappingPoint[];
  loadM3: number;
}): StormHeadroom | null {
  const now = storeAtLevel(input.points, input.levelM);
  const limit = storeAtLevel(input.points, input.limitM);
  if (!now || !limit) return null;
  const stormM3 = input.contributing.reduce(
    (sum, { areaM2, share }) => sum + (input.stormMm / 1000) * areaM2 * share,
    0,
  );
  const headroomM3 = limit.volumeM3 - now.volumeM3;
  const marginM3 = headroomM3 - stormM3;
  return { stormM3, headroomM3, marginM3, loads: marginM3 < 0 ? Math.ceil(-marginM3 / input.loadM3) : 0 };
}
