import { dayName, daysBetween } from '#shared/calendar/day.ts';
import { monthName, quarterName } from '#shared/calendar/month.ts';
import { totalPairs, type PairTotal } from '#shared/reconciliation/total-pairs.ts';
import type { Quarter } from './quarter.ts';

function addTotal(figures: Record<string, number>, name: string, total: PairTotal): void {
  if (total.predictedM3 !== null) figures[`${name} predicted, quarter, m³`] = total.predictedM3;
  if (total.measuredM3 !== null) figures[`${name} pumped, quarter, m³`] = total.measuredM3;
  if (total.differenceM3 !== null) figures[`${name} gap, quarter, m³`] = total.differenceM3;
}

/** The figures of the report page by name: what a later issue is compared with, and what the Checks sheet repeats. */
export function quarterFigures(quarter: Quarter): Record<string, number> {
  const figures: Record<string, number> = {};
  for (const cell of quarter.cells) {
    const own = quarter.cellMonths.filter((one) => one.cellCode === cell.code && one.isOpen);
    for (const one of own) {
      if (one.predictedM3 !== null)
        figures[`${cell.code} predicted, ${monthName(one.month)}, m³`] = one.predictedM3;
      if (one.measuredM3 !== null)
        figures[`${cell.code} pumped, ${monthName(one.month)}, m³`] = one.measuredM3;
    }
    addTotal(figures, `${cell.code}`, totalPairs(own));
  }
  addTotal(figures, 'Site', totalPairs(quarter.cellMonths.filter((one) => one.isOpen)));
  for (const one of quarter.verdicts) {
    if (one.verdict.valueText)
      figures[
        `${one.analyteName} at ${one.pointCode}, ${one.limit.quantity}, ${one.limit.statistic.replace('-', ' ')}, ${monthName(one.month)}, ${one.limit.unit}`
      ] = Number(one.verdict.valueText.replace('<', ''));
  }
  for (const one of quarter.leakDetection)
    if (one.lPerHaDay !== null)
      figures[`${one.sumpCode} leak-detection rate, ${monthName(one.month)}, L/ha·d`] = one.lPerHaDay;
  return figures;
}

export const quarterTitle = (quarter: Quarter): string =>
  `${quarter.site.name}, leachate, ${quarterName(quarter.quarter)}`;

export const dueWords = (quarter: Quarter, today: string): string => {
  const left = daysBetween(today, quarter.dueOn);
  const words = left >= 0 ? `${left} days left` : `${-left} days ago`;
  return `${dayName(quarter.dueOn)}, ${words}`;
};
