import type { ChartConfiguration } from 'chart.js';
import { chartInk, seriesLooks, type Series } from './series.ts';

export interface ChartLine {
  series: Series;
  name: string;
  /** Null is a gap: nothing was read. */
  values: readonly (number | null)[];
}

/** Digits in threes by a thin space, as everywhere on screen. */
const inThrees = (value: number) => String(value).replace(/\B(?=(\d{3})+$)/g, '\u2009');

interface LineChartInput {
  labels: readonly string[];
  lines: readonly ChartLine[];
  /** Title of the value axis, with its unit. */
  axisTitle: string;
}

/**
 * Chart.js configuration of lines over months: data in, configuration out.
 * The screen and the picture in the workbook draw the same one.
 */
export function lineChart({
  labels,
  lines,
  axisTitle,
}: LineChartInput): ChartConfiguration<'line', (number | null)[], string> {
  const font = { family: 'Work Sans', size: 14 };
  return {
    type: 'line',
    data: {
      labels: [...labels],
      datasets: lines.map(({ series, name, values }) => {
        const { colour, dash, mark } = seriesLooks[series];
        const isHollow = series === 'predicted';
        return {
          label: name,
          data: [...values],
          borderColor: colour,
          borderDash: [...dash],
          borderWidth: 2,
          pointStyle: mark,
          pointRadius: mark ? 4 : 0,
          pointBorderColor: colour,
          pointBorderWidth: 2,
          pointBackgroundColor: isHollow ? chartInk.surface : colour,
          backgroundColor: isHollow ? chartInk.surface : colour,
          spanGaps: false,
          tension: 0,
        };
      }),
    },
    options: {
      animation: false,
      responsive: true,
      maintainAspectRatio: false,
      plugins: {
        legend: {
          position: 'top',
          align: 'start',
          labels: {
            usePointStyle: true,
            boxWidth: 10,
            boxHeight: 10,
            padding: 16,
            color: chartInk.text,
            font,
          },
        },
        tooltip: { enabled: true },
      },
      scales: {
        x: {
          grid: { display: false },
          ticks: { color: chartInk.muted, font, maxRotation: 0, autoSkipPadding: 12 },
        },
        y: {
          beginAtZero: true,
          grid: { color: chartInk.line },
          ticks: { color: chartInk.muted, font, callback: (value) => inThrees(Number(value)) },
          title: { display: true, text: axisTitle, color: chartInk.muted, font },
        },
      },
    },
  };
}
