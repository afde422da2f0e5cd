import { addDays, daysBetween, firstDay, type Day } from '../calendar/day.ts';
import { addMonths, daysInMonth, type Month } from '../calendar/month.ts';
import type { EnginePeriod, EnginePlot } from './engine-input.ts';

export interface PlotStep {
  period: EnginePeriod;
  fromOn: Day;
  dayCount: number;
  /** True when soil was placed at the start of this step: the period begins here and is not the plot's first. */
  startsPeriod: boolean;
}

/** A month's days: from the first to the day after the last. */
export interface MonthSpan {
  startOn: Day;
  endOn: Day;
  dayCount: number;
}

export const monthSpan = (month: Month): MonthSpan => ({
  startOn: firstDay(month),
  endOn: firstDay(addMonths(month, 1)),
  dayCount: daysInMonth(month),
});

const later = (a: Day, b: Day) => (a > b ? a : b);
const earlier = (a: Day, b: Day) => (a < b ? a : b);
const farAway = '9999-12-31';

/** The steps of a plot in a month, one per cover period that lies in it (method section 1). */
export function splitMonth(plot: EnginePlot, { startOn, endOn, dayCount }: MonthSpan): PlotStep[] {
  const steps: PlotStep[] = [];
  for (const period of plot.periods) {
    const fromOn = later(later(period.fromOn, plot.fromOn), startOn);
    const toOn = earlier(earlier(period.toOn ?? farAway, plot.toOn ?? farAway), endOn);
    if (fromOn >= toOn) continue;
    const isWhole = fromOn === startOn && toOn === endOn;
    steps.push({
      period,
      fromOn,
      dayCount: isWhole ? dayCount : daysBetween(fromOn, toOn),
      startsPeriod: fromOn === period.fromOn,
    });
  }
  return steps;
}

/** Sum of a month's daily values over the days of a step. */
export function sumOfDays(daily: readonly number[], fromOn: Day, dayCount: number): number {
  const first = Number(fromOn.slice(8, 10)) - 1;
  let sum = 0;
  for (let index = first; index < first + dayCount; index += 1) sum += daily[index] ?? 0;
  return sum;
}

export const dayAfterStep = (step: PlotStep): Day => addDays(step.fromOn, step.dayCount);
