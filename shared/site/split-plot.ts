import { Decimal } from 'decimal.js';
import { dayName, type Day } from '../calendar/day.ts';

export interface PlotSplit {
  /** Areas of the covered part and of the rest; the rest is null when the whole plot was covered. */
  coveredAreaM2: string;
  restAreaM2: string | null;
}

/**
 * Covering part of a plot ends it and starts two children whose areas add exactly to it.
 * @returns the areas, or the sentence that says why it cannot be
 */
export function splitPlot(
  plot: { areaM2: string; fromOn: Day; toOn: Day | null; name: string },
  change: { areaM2: string; onDay: Day },
): PlotSplit | { refused: string } {
  if (change.onDay < plot.fromOn || (plot.toOn !== null && change.onDay >= plot.toOn)) {
    const until = plot.toOn ? ` and ended on ${dayName(plot.toOn)}` : '';
    return {
      refused: `Plot ${plot.name} began on ${dayName(plot.fromOn)}${until}. Choose a day in that time, or the plot that was live on ${dayName(change.onDay)}.`,
    };
  }
  const rest = new Decimal(plot.areaM2).minus(change.areaM2);
  if (rest.lt(0)) {
    return {
      refused: `Plot ${plot.name} has ${new Decimal(plot.areaM2).toFixed()} m²; ${new Decimal(change.areaM2).toFixed()} m² cannot be covered on it.`,
    };
  }
  return {
    coveredAreaM2: new Decimal(change.areaM2).toFixed(),
    restAreaM2: rest.isZero() ? null : rest.toFixed(),
  };
}
