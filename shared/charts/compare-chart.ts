import { monthShortName, type Month } from '../calendar/month.ts';
import { lineChart } from './line-chart.ts';

interface CumulativeRow {
  month: Month;
  cumulativePredictedM3: number;
  cumulativeMeasuredM3: number;
}

const label = (month: Month) => `${monthShortName(month)} ${month.slice(0, 4)}`;

/** Cumulative predicted and pumped of a cell, m³. */
export const compareLinesChart = (rows: readonly CumulativeRow[]) =>
  lineChart({
    labels: rows.map((row) => label(row.month)),
    lines: [
      {
        series: 'predicted',
        name: 'Predicted, cumulative',
        values: rows.map((row) => row.cumulativePredictedM3),
      },
      { series: 'pumped', name: 'Pumped, cumulative', values: rows.map((row) => row.cumulativeMeasuredM3) },
    ],
    axisTitle: 'm³',
  });

/** Predicted and pumped month by month, m³; a month that was not read is a gap. */
export const monthlyVolumesChart = (
  rows: readonly { month: Month; predictedM3: number; measuredM3: number | null }[],
) =>
  lineChart({
    labels: rows.map((row) => label(row.month)),
    lines: [
      { series: 'predicted', name: 'Predicted', values: rows.map((row) => row.predictedM3) },
      { series: 'pumped', name: 'Pumped', values: rows.map((row) => row.measuredM3) },
    ],
    axisTitle: 'm³ a month',
  });
