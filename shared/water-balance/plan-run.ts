import type { Day } from '../calendar/day.ts';
import type { StepForcing, StepSettings } from './compute-step.ts';
import { runoffShare } from './compute-step.ts';
import type { BalanceParameters, EngineCell, EngineCover, EngineInput, EnginePlot } from './engine-input.ts';
import type { MonthForcing } from './month-forcing.ts';
import { spinUpSoilStore } from './spin-up.ts';
import { dayAfterStep, splitMonth, sumOfDays, type PlotStep } from './split-month.ts';

/** One step before it is computed: everything but the water of the ground. */
export interface PlannedStep {
  /** Position of the plot among all plots of the site; parents come before their children. */
  plotIndex: number;
  /** Plot whose ground this one takes over on its first step, or -1. */
  takesOverFrom: number;
  cell: EngineCell;
  plot: EnginePlot;
  coverTypeId: string;
  cover: EngineCover;
  month: MonthForcing;
  fromOn: Day;
  forcing: StepForcing;
}

export interface RunPlan {
  steps: PlannedStep[];
  /** Ground of each plot before its first step; zero for children that take over from their parent. */
  starts: { soilStoreMm: number; wasteStoreMm: number; wasteDeficitMm: number }[];
  settings: StepSettings;
}

const settingsOf = (parameters: BalanceParameters): StepSettings => ({
  soilLaw: parameters.soilLaw,
  runoffFactor: parameters.runoffFactor,
  petFactor: parameters.petFactor,
  recessionPerMonth: parameters.recessionPerMonth,
  channelledFraction: parameters.channelledFraction,
  leakFraction: parameters.leakFraction,
  liner: parameters.leakMethod === 'defects' ? parameters.liner : null,
});

/** What belongs to one step and not to its whole month. */
type OwnForcing = Pick<
  StepForcing,
  | 'curveRunoffMm'
  | 'surfaceReturnMm'
  | 'returnToWasteMm'
  | 'condensateMm'
  | 'placedDeficitMm'
  | 'newSoilStoreMm'
  | 'measuredHeadM'
>;

/** Rain, melt and PET of a step: the month's share by days, or the daily sums where they exist. */
function forcingOf(month: MonthForcing, fromOn: Day, dayCount: number, own: OwnForcing): StepForcing {
  const { row, snow, span, pet } = month;
  const share = dayCount / span.dayCount;
  // A whole month keeps its own figures, so that daily and monthly records of one month agree to the last digit.
  const part = (total: number, days: readonly number[] | null | undefined) =>
    days && share < 1 ? sumOfDays(days, fromOn, dayCount) : total * share;
  const rainShare =
    row.days?.precipitationMm && share < 1 && row.precipitationMm > 0
      ? sumOfDays(row.days.precipitationMm, fromOn, dayCount) / row.precipitationMm
      : share;
  const rainMm = snow.days ? part(snow.rainMm, snow.days.rainMm) : snow.rainMm * rainShare;
  const snowfallMm = part(snow.snowfallMm, snow.days?.snowfallMm);
  const meltMm = part(snow.meltMm, snow.days?.meltMm);
  return {
    precipitationMm: rainMm + snowfallMm,
    rainMm,
    snowfallMm,
    meltMm,
    dSnowMm: snow.days && share < 1 ? snowfallMm - meltMm : snow.dSnowMm * share,
    referencePetMm: part(pet.petMm, pet.days),
    isWet: month.isWet,
    isFrozen: month.isFrozen,
    dayCount,
    durationMonths: share,
    ...own,
  };
}

const wasteReceivers = new Set(['working-area', 'daily-cover']);

/** Deficit of the month's waste over the ground that receives it, mm; by days for a step shorter than the month. */
function placedDeficitMm(cell: EngineCell, input: EngineInput, month: MonthForcing, step: PlotStep): number {
  const placedM3 = cell.placedDeficitM3[month.row.month] ?? 0;
  // Free moisture is water that is there: the factor speaks of the deficit only.
  const deficitM3 = placedM3 > 0 ? placedM3 * input.parameters.deficitFactor : placedM3;
  if (deficitM3 === 0) return 0;
  const all = cell.plots.flatMap((plot) =>
    splitMonth(plot, month.span).map((one) => ({
      plot,
      one,
      kind: input.covers[one.period.coverTypeId]!.kind,
    })),
  );
  const receiving = all.filter(({ kind }) => wasteReceivers.has(kind));
  const chosen = receiving.length ? receiving : all.filter(({ kind }) => kind !== 'lined-floor');
  if (!chosen.some(({ one }) => one.period === step.period && one.fromOn === step.fromOn)) return 0;
  const areaDays = chosen.reduce((sum, { plot, one }) => sum + plot.areaM2 * one.dayCount, 0);
  return (deficitM3 / areaDays) * step.dayCount * 1000;
}

function returnsMm(cell: EngineCell, plot: EnginePlot, step: PlotStep, isAtSurface: boolean): number {
  if (!cell.returns.length) return 0;
  const after = dayAfterStep(step);
  return cell.returns
    .filter(
      (one) =>
        one.isAtSurface === isAtSurface &&
        one.plotIds.includes(plot.id) &&
        one.siteDay >= step.fromOn &&
        one.siteDay < after,
    )
    .reduce((sum, one) => {
      const areaM2 = cell.plots
        .filter((other) => one.plotIds.includes(other.id))
        .reduce((total, other) => total + other.areaM2, 0);
      return sum + (one.volumeM3 / areaM2) * 1000;
    }, 0);
}

/** Condensate of the month over all ground of the cell, mm; by days for a step shorter than the month. */
function condensateMm(cell: EngineCell, month: MonthForcing, step: PlotStep): number {
  const volumeM3 = cell.condensateM3[month.row.month] ?? 0;
  if (volumeM3 === 0) return 0;
  const areaDays = cell.plots.reduce(
    (sum, plot) =>
      sum + plot.areaM2 * splitMonth(plot, month.span).reduce((days, one) => days + one.dayCount, 0),
    0,
  );
  return (volumeM3 / areaDays) * step.dayCount * 1000;
}

/** Store a period of soil starts with: entered, or half of its capacity (template, our choice). */
const enteredStore = (cover: EngineCover, initialSoilStoreMm: number | null) =>
  Math.min(cover.availableWaterMm, initialSoilStoreMm ?? cover.availableWaterMm / 2);

/** Ground of a plot before its first step: entered, or the first climatic year repeated. */
function startOf(input: EngineInput, cell: EngineCell, plot: EnginePlot, months: readonly MonthForcing[]) {
  const period = plot.periods[0]!;
  const cover = input.covers[period.coverTypeId]!;
  const { isSpunUp, runoffFactor, petFactor, soilLaw } = input.parameters;
  const waste = { wasteStoreMm: cell.initialWasteStoreMm, wasteDeficitMm: cell.initialWasteDeficitMm };
  if (!isSpunUp || period.initialSoilStoreMm !== null || months.length < 12)
    return { soilStoreMm: enteredStore(cover, period.initialSoilStoreMm), ...waste };
  const year = months.slice(0, 12).map((month) => ({
    infiltrationMm:
      (month.snow.rainMm + month.snow.meltMm) * (1 - runoffShare(cover, month.isWet, runoffFactor)),
    petMm: month.pet.petMm * petFactor * cover.petFactor,
    isFrozen: month.isFrozen,
  }));
  return { soilStoreMm: spinUpSoilStore(year, cover.availableWaterMm, soilLaw).storeMm, ...waste };
}

/** The rest of a divided plot keeps its parent's cover, and so its soil. */
function isSameSoil(cell: EngineCell, plot: EnginePlot, step: PlotStep): boolean {
  const index = plot.periods.indexOf(step.period);
  if (index > 0) return plot.periods[index - 1]!.coverTypeId === step.period.coverTypeId;
  const parent = cell.plots.find((one) => one.id === plot.parentId);
  return parent?.periods.at(-1)?.coverTypeId === step.period.coverTypeId;
}

const plain: OwnForcing = {
  curveRunoffMm: -1,
  surfaceReturnMm: 0,
  returnToWasteMm: 0,
  condensateMm: 0,
  placedDeficitMm: 0,
  newSoilStoreMm: -1,
  measuredHeadM: -1,
};

/**
 * Lays out every step of a run, in order of month, cell and plot. Whole months under one cover share their forcing, so
 * that a run of many years stays small.
 */
export function planRun(input: EngineInput, months: readonly MonthForcing[]): RunPlan {
  const plots = input.cells.flatMap((cell) => cell.plots.map((plot) => ({ cell, plot })));
  const indexOf = new Map(plots.map(({ plot }, index) => [plot.id, index]));
  const started = new Set<number>();
  const steps: PlannedStep[] = [];
  const starts = plots.map(() => ({ soilStoreMm: 0, wasteStoreMm: 0, wasteDeficitMm: 0 }));
  const liveIn = plots.map(({ plot }) => ({
    from: plot.fromOn.slice(0, 7),
    to: (plot.toOn ?? '9999-12').slice(0, 7),
  }));
  for (const month of months) {
    const whole = forcingOf(month, month.span.startOn, month.span.dayCount, plain);
    plots.forEach(({ cell, plot }, plotIndex) => {
      const live = liveIn[plotIndex]!;
      if (month.row.month < live.from || month.row.month > live.to) return;
      for (const step of splitMonth(plot, month.span)) {
        const cover = input.covers[step.period.coverTypeId]!;
        const parent = plot.parentId === null ? -1 : (indexOf.get(plot.parentId) ?? -1);
        const isFirst = !started.has(plotIndex);
        const takesOverFrom = isFirst && started.has(parent) ? parent : -1;
        const isNewGround = isFirst && takesOverFrom === -1;
        if (isNewGround) starts[plotIndex] = startOf(input, cell, plot, months);
        const keepsSoil = isNewGround || !step.startsPeriod || isSameSoil(cell, plot, step);
        const curve = (cover.curveNumber && month.curveRunoffMm?.get(cover.curveNumber)) || null;
        const own: OwnForcing = {
          curveRunoffMm: curve ? sumOfDays(curve, step.fromOn, step.dayCount) : -1,
          surfaceReturnMm: returnsMm(cell, plot, step, true),
          returnToWasteMm: returnsMm(cell, plot, step, false),
          condensateMm: condensateMm(cell, month, step),
          placedDeficitMm: placedDeficitMm(cell, input, month, step),
          newSoilStoreMm: keepsSoil ? -1 : enteredStore(cover, step.period.initialSoilStoreMm),
          measuredHeadM: cell.measuredHeadM[month.row.month] ?? -1,
        };
        const isPlain =
          step.dayCount === month.span.dayCount &&
          (Object.keys(plain) as (keyof OwnForcing)[]).every((key) => own[key] === plain[key]);
        started.add(plotIndex);
        steps.push({
          plotIndex,
          takesOverFrom,
          cell,
          plot,
          coverTypeId: step.period.coverTypeId,
          cover,
          month,
          fromOn: step.fromOn,
          forcing: isPlain ? whole : forcingOf(month, step.fromOn, step.dayCount, own),
        });
      }
    });
  }
  return {
    steps,
    starts,
    settings: settingsOf(input.parameters),
  };
}
