import type { Month } from '../calendar/month.ts';
import { compareTolerance, type Tolerance } from './tolerance.ts';

export interface ComparedInput {
  month: Month;
  areaM2: number;
  rainMm: number;
  predictedM3: number;
  /** Null when nothing was measured: a hole, never a zero. */
  measuredM3: number | null;
}

export interface ComparedMonth extends ComparedInput {
  /** Measured − predicted, positive when more was pumped. */
  differenceM3: number | null;
  /** Percent of the predicted; null where it is not defined. */
  percent: number | null;
  /** Percent is muted while the prediction is under the floor. */
  isPercentMuted: boolean;
  tolerance: Tolerance | null;
  isInside: boolean | null;
  rolling: { predictedM3: number; measuredM3: number; percent: number | null; monthCount: number };
  cumulativePredictedM3: number;
  cumulativeMeasuredM3: number;
}

const percentOf = (difference: number, predicted: number) =>
  predicted === 0 ? null : (100 * difference) / predicted;

/**
 * Compares months in order. Months without a measurement are left out of sums and said so by their count.
 * @param percentFloorMm depth under which a percent is muted, mm
 * @source method section 9
 */
export function compareMonths(rows: readonly ComparedInput[], percentFloorMm: number): ComparedMonth[] {
  let cumulativePredictedM3 = 0;
  let cumulativeMeasuredM3 = 0;
  return rows.map((row, index) => {
    const window = rows.slice(Math.max(0, index - 11), index + 1).filter((one) => one.measuredM3 !== null);
    const predicted = window.reduce((sum, one) => sum + one.predictedM3, 0);
    const measured = window.reduce((sum, one) => sum + one.measuredM3!, 0);
    if (row.measuredM3 !== null) {
      cumulativePredictedM3 += row.predictedM3;
      cumulativeMeasuredM3 += row.measuredM3;
    }
    const differenceM3 = row.measuredM3 === null ? null : row.measuredM3 - row.predictedM3;
    const tolerance =
      row.measuredM3 === null
        ? null
        : compareTolerance({ predictedM3: row.predictedM3, measuredM3: row.measuredM3, areaM2: row.areaM2 });
    return {
      ...row,
      differenceM3,
      percent: differenceM3 === null ? null : percentOf(differenceM3, row.predictedM3),
      isPercentMuted: row.areaM2 > 0 && (row.predictedM3 / row.areaM2) * 1000 < percentFloorMm,
      tolerance,
      isInside: differenceM3 === null || !tolerance ? null : Math.abs(differenceM3) <= tolerance.valueM3,
      rolling: {
        predictedM3: predicted,
        measuredM3: measured,
        percent: percentOf(measured - predicted, predicted),
        monthCount: window.length,
      },
      cumulativePredictedM3,
      cumulativeMeasuredM3,
    };
  });
}
