/** Volume with the relative accuracy of how it was measured. */
export interface Flow {
  volumeM3: number;
  accuracyFraction: number;
}

export interface StorePeriod {
  openingM3: number;
  closingMeasuredM3: number;
  inflows: readonly Flow[];
  outflows: readonly Flow[];
  rainMm: number;
  evaporationMm: number;
  /** Lined area that drains into the store, m²; 0 for a covered tank. */
  linedAreaM2: number;
  /** Mean water surface of the period, m²; 0 for a covered tank. */
  surfaceM2: number;
  openingSurfaceM2: number;
  closingSurfaceM2: number;
  levelResolutionM: number;
}

export interface StoreBalance {
  openingM3: number;
  inM3: number;
  outM3: number;
  rainM3: number;
  evaporationM3: number;
  expectedClosingM3: number;
  measuredClosingM3: number;
  unaccountedM3: number;
  toleranceM3: number;
  isInside: boolean;
}

/** Accuracy of rain and evaporation on a store: our template, common practice, no source. */
const weatherAccuracyFraction = 0.1;

/**
 * Opening to closing of a store against its measured level.
 * Tolerance = √(Σ(accuracy × volume)² + Σ(½ level resolution × area)² at both ends).
 * @source method section 12
 */
export function balanceStore(period: StorePeriod): StoreBalance {
  const sum = (flows: readonly Flow[]) => flows.reduce((total, flow) => total + flow.volumeM3, 0);
  const rainM3 = (period.rainMm * period.linedAreaM2) / 1000;
  const evaporationM3 = (period.evaporationMm * period.surfaceM2) / 1000;
  const inM3 = sum(period.inflows);
  const outM3 = sum(period.outflows);
  const expectedClosingM3 = period.openingM3 + inM3 - outM3 + rainM3 - evaporationM3;
  const unaccountedM3 = period.closingMeasuredM3 - expectedClosingM3;
  const squares = [
    ...[...period.inflows, ...period.outflows].map((flow) => flow.accuracyFraction * flow.volumeM3),
    weatherAccuracyFraction * rainM3,
    weatherAccuracyFraction * evaporationM3,
    0.5 * period.levelResolutionM * period.openingSurfaceM2,
    0.5 * period.levelResolutionM * period.closingSurfaceM2,
  ].map((term) => term * term);
  const toleranceM3 = Math.sqrt(squares.reduce((total, square) => total + square, 0));
  return {
    openingM3: period.openingM3,
    inM3,
    outM3,
    rainM3,
    evaporationM3,
    expectedClosingM3,
    measuredClosingM3: period.closingMeasuredM3,
    unaccountedM3,
    toleranceM3,
    isInside: Math.abs(unaccountedM3) <= toleranceM3,
  };
}
