import { dayName, type Day } from '../calendar/day.ts';
import { splitPlot } from '../site/split-plot.ts';
import type { EngineCell, EngineInput, EnginePlot } from '../water-balance/engine-input.ts';

/** Ground to be covered, or a cell to be opened, on a day to come. */
export type PlannedChange =
  | { kind: 'cover'; plotId: string; onDay: Day; coverTypeId: string; areaM2: number }
  | { kind: 'cell'; code: string; onDay: Day; coverTypeId: string; areaM2: number };

/** A plan that cannot be: one sentence, and the change and field it is about. */
export class PlanRefused extends Error {
  constructor(
    sentence: string,
    readonly changeIndex: number,
    readonly field: 'plotId' | 'onDay' | 'coverTypeId' | 'areaM2',
  ) {
    super(sentence);
  }
}

const period = (coverTypeId: string, fromOn: Day) => ({
  coverTypeId,
  fromOn,
  toOn: null,
  initialSoilStoreMm: null,
});

/** The plot that lies where the named one lay on a day: itself, or what an earlier planned change left of it. */
function liveOn(plots: readonly EnginePlot[], plotId: string, onDay: Day): EnginePlot | undefined {
  let plot = plots.find((one) => one.id === plotId);
  while (plot?.toOn && plot.toOn <= onDay) {
    const restId: string = `${plot.id}/rest`;
    plot = plots.find((one) => one.id === restId);
  }
  return plot;
}

function coverPart(
  cell: EngineCell,
  change: Extract<PlannedChange, { kind: 'cover' }>,
  changeIndex: number,
): EngineCell {
  const { plotId, onDay, coverTypeId, areaM2 } = change;
  const plot = liveOn(cell.plots, plotId, onDay);
  if (!plot)
    throw new PlanRefused(`No part of this plot is left on ${dayName(onDay)}.`, changeIndex, 'plotId');
  const current = plot.periods.at(-1)!;
  if (onDay <= current.fromOn)
    throw new PlanRefused(
      `The ground already changes its cover on ${dayName(current.fromOn)}. Plan the changes of one plot in order.`,
      changeIndex,
      'onDay',
    );
  if (areaM2 > plot.areaM2)
    throw new PlanRefused(
      `${plot.areaM2} m² of this plot are left on ${dayName(onDay)}; ${areaM2} m² cannot be covered on it.`,
      changeIndex,
      'areaM2',
    );
  const split = splitPlot(
    { areaM2: String(plot.areaM2), fromOn: plot.fromOn, toOn: plot.toOn, name: 'chosen' },
    { areaM2: String(areaM2), onDay },
  );
  if ('refused' in split) throw new PlanRefused(split.refused, changeIndex, 'onDay');
  const ended = plot.periods.map((one) => (one === current ? { ...one, toOn: onDay } : one));
  const others = cell.plots.filter((one) => one !== plot);
  if (split.restAreaM2 === null)
    return { ...cell, plots: [...others, { ...plot, periods: [...ended, period(coverTypeId, onDay)] }] };
  const child = (part: 'covered' | 'rest', childM2: string, type: string): EnginePlot => ({
    id: `${plot.id}/${part}`,
    parentId: plot.id,
    areaM2: Number(childM2),
    fromOn: onDay,
    toOn: null,
    periods: [period(type, onDay)],
  });
  return {
    ...cell,
    plots: [
      ...others,
      { ...plot, toOn: onDay, periods: ended },
      child('covered', split.coveredAreaM2, coverTypeId),
      child('rest', split.restAreaM2, current.coverTypeId),
    ],
  };
}

const newCell = (change: Extract<PlannedChange, { kind: 'cell' }>): EngineCell => ({
  id: `planned ${change.code}`,
  code: change.code,
  initialWasteDeficitMm: 0,
  initialWasteStoreMm: 0,
  plots: [
    {
      id: `planned ${change.code}`,
      parentId: null,
      areaM2: change.areaM2,
      fromOn: change.onDay,
      toOn: null,
      periods: [period(change.coverTypeId, change.onDay)],
    },
  ],
  placedDeficitM3: {},
  returns: [],
  condensateM3: {},
  measuredHeadM: {},
});

/**
 * The cells of a site as a plan leaves them. The record itself is not touched.
 * @param changes in any order; those of one plot follow each other by day
 * @throws PlanRefused with one sentence
 */
export function planScenario(
  { cells, covers }: Pick<EngineInput, 'cells' | 'covers'>,
  changes: readonly PlannedChange[],
): EngineCell[] {
  return changes
    .map((change, index) => ({ change, index }))
    .sort((a, b) => (a.change.onDay < b.change.onDay ? -1 : 1))
    .reduce<EngineCell[]>(
      (planned, { change, index }) => {
        if (!covers[change.coverTypeId])
          throw new PlanRefused('Choose a cover of this site.', index, 'coverTypeId');
        if (change.kind === 'cell') return [...planned, newCell(change)];
        const at = planned.findIndex((cell) => cell.plots.some((plot) => plot.id === change.plotId));
        if (at < 0) throw new PlanRefused('Choose a plot of this site.', index, 'plotId');
        return planned.map((cell, position) => (position === at ? coverPart(cell, change, index) : cell));
      },
      [...cells],
    );
}
