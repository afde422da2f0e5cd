/** Our templates, common practice, no source: meter accuracy, model spread, and a floor for small months. */
const meterAccuracyFraction = 0.02;
const modelSpreadFraction = 0.1;
const floorMm = 2;

export interface Tolerance {
  valueM3: number;
  reason: string;
}

/**
 * How far predicted and measured may differ before a month, or several together, are worth asking about, m³.
 * √((2 % of measured)² + (10 % of predicted)² + n·(2 mm over the area)²); meter and model err the same way each month.
 */
export function compareTolerance({
  predictedM3,
  measuredM3,
  areaM2,
  monthCount = 1,
}: {
  predictedM3: number;
  measuredM3: number;
  areaM2: number;
  monthCount?: number;
}): Tolerance {
  const valueM3 = Math.hypot(
    meterAccuracyFraction * measuredM3,
    modelSpreadFraction * predictedM3,
    (Math.sqrt(monthCount) * floorMm * areaM2) / 1000,
  );
  return { valueM3, reason: 'meter ±2 %, model ±10 %, and 2 mm over the cell, in quadrature (template)' };
}
