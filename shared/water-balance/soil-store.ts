export type SoilLaw = 'exponential' | 'equal-availability' | 'linear';

export interface SoilStep {
  aetMm: number;
  storeMm: number;
  percolationMm: number;
  /** Water above capacity that frozen ground turns away, mm. */
  frozenExcessMm: number;
}

/**
 * Soil of the cover over one step (Thornthwaite & Mather 1957). D = I − PET.
 * D ≥ 0: AET = PET, S = min(AWC, S₋ + D), percolation = max(0, S₋ + D − AWC).
 * D < 0, exponential: S = S₋·exp(D/AWC), AET = I + S₋·(1 − exp(D/AWC)).
 * Equal availability: AET = PET until the store is empty. Linear: withdrawal (PET − I)·S₋/AWC.
 * AWC = 0: AET = min(I, PET), percolation = max(0, D); no exponential.
 *
 * @param infiltrationMm water entering the soil in the step, mm
 * @param isFrozen percolation 0, the excess runs off
 * @source method section 5
 */
export function soilStep(
  storeBeforeMm: number,
  infiltrationMm: number,
  petMm: number,
  capacityMm: number,
  law: SoilLaw,
  isFrozen: boolean,
): SoilStep {
  const surplus = infiltrationMm - petMm;
  if (capacityMm === 0) {
    const drained = Math.max(0, surplus);
    return {
      aetMm: Math.min(infiltrationMm, petMm),
      storeMm: 0,
      percolationMm: isFrozen ? 0 : drained,
      frozenExcessMm: isFrozen ? drained : 0,
    };
  }
  if (surplus >= 0) {
    const excess = Math.max(0, storeBeforeMm + surplus - capacityMm);
    return {
      aetMm: petMm,
      storeMm: Math.min(capacityMm, storeBeforeMm + surplus),
      percolationMm: isFrozen ? 0 : excess,
      frozenExcessMm: isFrozen ? excess : 0,
    };
  }
  if (law === 'exponential') {
    return {
      aetMm: infiltrationMm + storeBeforeMm * -Math.expm1(surplus / capacityMm),
      storeMm: storeBeforeMm * Math.exp(surplus / capacityMm),
      percolationMm: 0,
      frozenExcessMm: 0,
    };
  }
  const withdrawn =
    law === 'equal-availability'
      ? Math.min(storeBeforeMm, -surplus)
      : Math.min(storeBeforeMm, (-surplus * storeBeforeMm) / capacityMm);
  return {
    aetMm: infiltrationMm + withdrawn,
    storeMm: storeBeforeMm - withdrawn,
    percolationMm: 0,
    frozenExcessMm: 0,
  };
}
