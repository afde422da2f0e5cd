import type { StepTerms } from './terms.ts';

export type BalanceLine = 'snow' | 'soil' | 'cover' | 'waste' | 'drain';

export interface LineResidual {
  line: BalanceLine;
  residualMm: number;
  toleranceMm: number;
  isClosed: boolean;
}

/** Largest residual of a line against max(1 mm, Σ|terms|) (method section 1). */
const relativeTolerance = 1e-9;
const tolerance = (size: number) => relativeTolerance * Math.max(1, size);
const { abs } = Math;

/** What comes in less what goes out or stays, mm, line by line. */
const residuals: Record<BalanceLine, (t: StepTerms) => number> = {
  snow: (t) => t.snowfallMm - t.meltMm - t.dSnowMm,
  soil: (t) =>
    t.rainMm +
    t.meltMm +
    t.surfaceReturnMm +
    t.soilWaterBroughtMm -
    t.runoffToStormMm -
    t.runoffToLeachateMm -
    t.aetMm -
    t.dSoilMm -
    t.percolationMm,
  cover: (t) => t.percolationMm - t.passedMm - t.coverDrainMm,
  waste: (t) => t.passedMm + t.returnToWasteMm + t.freeMoistureMm - t.absorbedMm - t.dWasteMm - t.drainedMm,
  drain: (t) => t.drainedMm + t.condensateMm - t.collectedMm - t.leakedMm,
};

/** The sum of the sizes of the terms of a line, mm: what its tolerance is measured by. */
const sizes: Record<BalanceLine, (t: StepTerms) => number> = {
  snow: (t) => abs(t.snowfallMm) + abs(t.meltMm) + abs(t.dSnowMm),
  soil: (t) =>
    abs(t.rainMm) +
    abs(t.meltMm) +
    abs(t.surfaceReturnMm) +
    abs(t.soilWaterBroughtMm) +
    abs(t.runoffToStormMm) +
    abs(t.runoffToLeachateMm) +
    abs(t.aetMm) +
    abs(t.dSoilMm) +
    abs(t.percolationMm),
  cover: (t) => abs(t.percolationMm) + abs(t.passedMm) + abs(t.coverDrainMm),
  waste: (t) =>
    abs(t.passedMm) +
    abs(t.returnToWasteMm) +
    abs(t.freeMoistureMm) +
    abs(t.absorbedMm) +
    abs(t.dWasteMm) +
    abs(t.drainedMm),
  drain: (t) => abs(t.drainedMm) + abs(t.condensateMm) + abs(t.collectedMm) + abs(t.leakedMm),
};

/** Every line with its residual and tolerance, for screens and refusals. */
export function checkClosure(t: StepTerms): LineResidual[] {
  return (Object.keys(residuals) as BalanceLine[]).map((line) => {
    const residualMm = residuals[line](t);
    const toleranceMm = tolerance(sizes[line](t));
    return { line, residualMm, toleranceMm, isClosed: abs(residualMm) <= toleranceMm };
  });
}

/** True when every line closes; a residual that is no number does not. Asked after every step of a run. */
export const closes = (t: StepTerms): boolean => {
  const worst =
    abs(residuals.snow(t)) +
    abs(residuals.soil(t)) +
    abs(residuals.cover(t)) +
    abs(residuals.waste(t)) +
    abs(residuals.drain(t));
  // No tolerance is below 1e-9 mm, so most steps are seen to close without adding up the sizes of their terms.
  return worst <= relativeTolerance || checkClosure(t).every((one) => one.isClosed);
};
