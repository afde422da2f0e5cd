/**
 * Water deficit that a month's placed waste adds, m³: tonnes / bulk density × (field capacity − moisture by volume).
 * Moisture by volume = wet-weight fraction × bulk density / (1 t/m³). Negative means free moisture.
 * @source method section 7; field capacity 20–35 % by volume, Fenn et al. 1975 Table 2 (from memory)
 */
export function placedWasteDeficitM3({
  massT,
  bulkDensityTPerM3,
  moistureFraction,
  fieldCapacityFraction,
}: {
  massT: number;
  bulkDensityTPerM3: number;
  moistureFraction: number;
  fieldCapacityFraction: number;
}): number {
  return (massT / bulkDensityTPerM3) * (fieldCapacityFraction - moistureFraction * bulkDensityTPerM3);
}

export interface ReservoirStep {
  storeMm: number;
  drainedMm: number;
}

/**
 * Linear reservoir over a step of constant inflow.
 * store = store₋·e^(−cΔt) + i·Δt·φ; drained = i·Δt·(1 − φ) + store₋·(1 − e^(−cΔt)); φ = (1 − e^(−cΔt))/(cΔt), 1 at c = 0.
 * @param recessionPerMonth c, 1/month @param durationMonths Δt @param inflowMm i·Δt, mm
 * @source method section 7; Chow, Maidment & Mays 1988 (definition, from memory)
 * @example reservoirStep(100, 0, 0.5, 1).storeMm // 60.65
 */
export function reservoirStep(
  storeBeforeMm: number,
  inflowMm: number,
  recessionPerMonth: number,
  durationMonths: number,
): ReservoirStep {
  const exponent = recessionPerMonth * durationMonths;
  const lost = -Math.expm1(-exponent);
  const kept = exponent === 0 ? 1 : lost / exponent;
  return {
    storeMm: storeBeforeMm * Math.exp(-exponent) + inflowMm * kept,
    drainedMm: inflowMm * (1 - kept) + storeBeforeMm * lost,
  };
}

export interface WasteLayer {
  depthM: number;
  fieldCapacityFraction: number;
  /** Water by volume as placed; 0 supposes dry waste. */
  moistureFraction: number;
}

/**
 * Years until soil and waste reach field capacity under a steady percolation: a check, not a promise.
 * @param layers soil and waste from the top @param percolationMmPerYear what enters the top
 * @returns Infinity where nothing percolates
 * @source Vesilind et al., Environmental Engineering, worked example (from memory); method section 7
 */
export const yearsToFirstLeachate = (layers: readonly WasteLayer[], percolationMmPerYear: number): number =>
  layers.reduce(
    (sum, layer) => sum + layer.depthM * 1000 * (layer.fieldCapacityFraction - layer.moistureFraction),
    0,
  ) / percolationMmPerYear;
