import { soilStep, type SoilLaw } from './soil-store.ts';

export interface SpinUpMonth {
  infiltrationMm: number;
  petMm: number;
  isFrozen: boolean;
}

/** Two years in a row agree when their last store differs by less, mm. */
const repeatsWithinMm = 1e-6;
const cyclesMax = 1000;

/**
 * Repeats the first climatic year until the store at its end repeats.
 * A single pass from a full store can invent more than 100 mm of evapotranspiration where the store never fills.
 * @returns the store, mm, and how many cycles it took
 * @throws RangeError after 1000 cycles
 * @source Dourado-Neto et al. 2010, Scientia Agricola 67(1):87-95; method section 5
 */
export function spinUpSoilStore(
  year: readonly SpinUpMonth[],
  capacityMm: number,
  law: SoilLaw,
): { storeMm: number; cycleCount: number } {
  let storeMm = capacityMm;
  for (let cycleCount = 1; cycleCount <= cyclesMax; cycleCount += 1) {
    const before = storeMm;
    for (const month of year)
      storeMm = soilStep(storeMm, month.infiltrationMm, month.petMm, capacityMm, law, month.isFrozen).storeMm;
    if (Math.abs(storeMm - before) < repeatsWithinMm) return { storeMm, cycleCount };
  }
  throw new RangeError(
    `The soil store did not repeat after ${cyclesMax} years of the first year's climate. Enter a starting store.`,
  );
}
