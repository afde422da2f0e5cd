import { sampleCorrelation } from 'simple-statistics';

export interface Pair {
  predicted: number;
  measured: number;
}

export interface FitStatistics {
  pairCount: number;
  /** 100·Σ(predicted − measured)/Σ measured; positive: model too high. */
  pbiasPercent: number | null;
  rmse: number | null;
  nashSutcliffe: number | null;
}

/** PBIAS, RMSE and Nash–Sutcliffe over the pairs given. Source: Moriasi et al. 2007 (definitions); sign as in method section 9. */
export function fitStatistics(pairs: readonly Pair[]): FitStatistics {
  const pairCount = pairs.length;
  if (pairCount === 0) return { pairCount, pbiasPercent: null, rmse: null, nashSutcliffe: null };
  const sum = (pick: (pair: Pair) => number) => pairs.reduce((total, pair) => total + pick(pair), 0);
  const measuredSum = sum((pair) => pair.measured);
  const mean = measuredSum / pairCount;
  const squaredError = sum((pair) => (pair.predicted - pair.measured) ** 2);
  const spread = sum((pair) => (pair.measured - mean) ** 2);
  return {
    pairCount,
    pbiasPercent:
      measuredSum === 0 ? null : (100 * sum((pair) => pair.predicted - pair.measured)) / measuredSum,
    rmse: Math.sqrt(squaredError / pairCount),
    nashSutcliffe: spread === 0 ? null : 1 - squaredError / spread,
  };
}

/**
 * Correlation of prediction with what was measured some months later.
 * @param pairs months in order, without holes @returns r and the number of pairs; null with fewer than three pairs
 */
export function correlationAtLag(
  pairs: readonly Pair[],
  lagMonths: number,
): { r: number; pairCount: number } | null {
  const predicted = pairs.slice(0, pairs.length - lagMonths).map((pair) => pair.predicted);
  const measured = pairs.slice(lagMonths).map((pair) => pair.measured);
  if (predicted.length < 3) return null;
  const r = sampleCorrelation(predicted, measured);
  return Number.isFinite(r) ? { r, pairCount: predicted.length } : null;
}
