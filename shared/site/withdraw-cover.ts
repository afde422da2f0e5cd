import { dayName, type Day } from '../calendar/day.ts';

interface Plot {
  id: string;
  parentId: string | null;
  name: string;
  fromOn: Day;
  toOn: Day | null;
}

interface CoverPeriod {
  id: string;
  plotId: string;
  fromOn: Day;
  toOn: Day | null;
}

export interface CoverWithdrawal {
  withdrawnPlotIds: string[];
  withdrawnPeriodIds: string[];
  /** Plots and covers that ended for the withdrawn entry and go on again. */
  resumedPlotIds: string[];
  resumedPeriodIds: string[];
}

/**
 * What goes and what goes on again when a cover change was recorded in error. A change of part of a plot made two
 * plots: both go, and the plot they came from goes on. Only the last change of a plot can be taken out.
 * @returns the ids, or the sentence that says why it cannot be
 */
export function withdrawCover(
  plots: readonly Plot[],
  periods: readonly CoverPeriod[],
  periodId: string,
): CoverWithdrawal | { refused: string } {
  const period = periods.find((one) => one.id === periodId)!;
  const plot = plots.find((one) => one.id === period.plotId)!;
  const before = periods.find((one) => one.plotId === plot.id && one.toOn === period.fromOn);
  if (!before && plot.parentId === null) {
    return {
      refused: `Plot ${plot.name} began under this cover, so it cannot be taken out. Choose the cover that it was.`,
    };
  }
  const parts = before
    ? [plot]
    : plots.filter((one) => one.parentId === plot.parentId && one.fromOn === plot.fromOn);
  const partIds = parts.map((one) => one.id);
  const later = periods.find((one) => partIds.includes(one.plotId) && one.fromOn > period.fromOn);
  const split = parts.find((one) => one.toOn !== null);
  if (later || split) {
    const name = parts.find((one) => one.id === later?.plotId)?.name ?? split!.name;
    return {
      refused: `Plot ${name} was covered again on ${dayName(later?.fromOn ?? split!.toOn!)}. Take the later entry out first.`,
    };
  }
  if (before) {
    return {
      withdrawnPlotIds: [],
      withdrawnPeriodIds: [period.id],
      resumedPlotIds: [],
      resumedPeriodIds: [before.id],
    };
  }
  return {
    withdrawnPlotIds: partIds,
    withdrawnPeriodIds: periods.filter((one) => partIds.includes(one.plotId)).map((one) => one.id),
    resumedPlotIds: [plot.parentId!],
    resumedPeriodIds: periods
      .filter((one) => one.plotId === plot.parentId && one.toOn === period.fromOn)
      .map((one) => one.id),
  };
}
