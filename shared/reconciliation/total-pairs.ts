/** Predicted and measured leachate of one cell and month; null where there is none, never a zero. */
export interface Pair {
  predictedM3: number | null;
  measuredM3: number | null;
}

export interface PairTotal extends Pair {
  /** Measured − predicted; null unless every pair is whole, so that like is compared with like. */
  differenceM3: number | null;
}

/**
 * Sums pairs of predicted and measured volumes, m³, leaving out what is not there.
 * @returns null for a side without any value
 * @source method section 9
 */
export function totalPairs(pairs: readonly Pair[]): PairTotal {
  const sum = (values: (number | null)[]) => {
    const known = values.filter((value) => value !== null);
    return known.length ? known.reduce((total, value) => total + value, 0) : null;
  };
  const predictedM3 = sum(pairs.map((pair) => pair.predictedM3));
  const measuredM3 = sum(pairs.map((pair) => pair.measuredM3));
  const isWhole = pairs.every((pair) => pair.predictedM3 !== null && pair.measuredM3 !== null);
  return {
    predictedM3,
    measuredM3,
    differenceM3: isWhole && pairs.length ? measuredM3! - predictedM3! : null,
  };
}
