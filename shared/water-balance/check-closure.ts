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

function line(name: BalanceLine, comesIn: readonly number[], goesOut: readonly number[]): LineResidual {
  let residualMm = 0;
  let size = 0;
  for (const term of comesIn) {
    residualMm += term;
    size += Math.abs(term);
  }
  for (const term of goesOut) {
    residualMm -= term;
    size += Math.abs(term);
  }
  const toleranceMm = relativeTolerance * Math.max(1, size);
  return { line: name, residualMm, toleranceMm, isClosed: Math.abs(residualMm) <= toleranceMm };
}

/** What comes in, goes out or stays, line by line; a residual that is not near zero refuses the run. */
export function checkClosure(t: StepTerms): LineResidual[] {
  return [
    line('snow', [t.snowfallMm], [t.meltMm, t.dSnowMm]),
    line(
      'soil',
      [t.rainMm, t.meltMm, t.surfaceReturnMm, t.soilWaterBroughtMm],
      [t.runoffToStormMm, t.runoffToLeachateMm, t.aetMm, t.dSoilMm, t.percolationMm],
    ),
    line('cover', [t.percolationMm], [t.passedMm, t.coverDrainMm]),
    line('waste', [t.passedMm, t.returnToWasteMm, t.freeMoistureMm], [t.absorbedMm, t.dWasteMm, t.drainedMm]),
    line('drain', [t.drainedMm], [t.collectedMm, t.leakedMm]),
  ];
}
