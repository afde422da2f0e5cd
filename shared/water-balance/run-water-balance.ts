import { monthName, monthParts, type Month } from '../calendar/month.ts';
import type { Day } from '../calendar/day.ts';
import {
  computeStep,
  type GroundState,
  type StepCover,
  type StepForcing,
  type StepSettings,
} from './compute-step.ts';
import type {
  BalanceParameters,
  EngineCell,
  EngineCover,
  EngineInput,
  EnginePlot,
  MonthClimate,
} from './engine-input.ts';
import { recordHeatIndex, referencePetMm } from './potential-evapotranspiration.ts';
import { computeSnow, type SnowMonth } from './snow.ts';
import { spinUpSoilStore } from './spin-up.ts';
import {
  dayAfterStep,
  monthSpan,
  splitMonth,
  sumOfDays,
  type MonthSpan,
  type PlotStep,
} from './split-month.ts';
import type { StepTerms } from './terms.ts';

export interface StepResult {
  cellId: string;
  plotId: string;
  coverTypeId: string;
  month: Month;
  fromOn: Day;
  dayCount: number;
  areaM2: number;
  terms: StepTerms;
}

export interface RunResult {
  steps: StepResult[];
  warnings: string[];
}

/** A month's climate with what the site-wide parts of the method make of it. */
interface MonthForcing {
  row: MonthClimate;
  span: MonthSpan;
  /** Covers as they are in this month, by type. */
  covers: Map<string, StepCover>;
  snow: SnowMonth;
  petMm: number;
  isFrozen: boolean;
}

function prepareMonths(input: EngineInput, warnings: string[]): MonthForcing[] {
  const { parameters, climate, latitudeDeg } = input;
  const heatIndex = recordHeatIndex(climate);
  let packMm = 0;
  return climate.map((row) => {
    const needsWarmth = parameters.snow.isOn || parameters.isFrostOn;
    if (needsWarmth && row.tMeanC === null)
      throw new RangeError(
        `${monthName(row.month)} has no mean temperature. Bring it, or switch snow and frost off.`,
      );
    const snow = computeSnow(packMm, row.precipitationMm, row.tMeanC ?? 20, parameters.snow);
    packMm = snow.packMm;
    if (packMm > 1 && (row.tMeanC ?? 0) > 10)
      warnings.push(
        `${monthName(row.month)}: ${packMm.toFixed(0)} mm of snow remain above 10 °C. Look at the snow settings.`,
      );
    const isFrozen = parameters.isFrostOn && (row.tMeanC ?? 20) <= parameters.tFrostC;
    if (isFrozen)
      warnings.push(`${monthName(row.month)}: counted as frozen; no percolation, the excess runs off.`);
    const covers = new Map(
      Object.entries(input.covers).map(([id, cover]) => [id, stepCover(cover, row.month, parameters)]),
    );
    return {
      row,
      span: monthSpan(row.month),
      covers,
      snow,
      petMm: referencePetMm(row, latitudeDeg, parameters, heatIndex),
      isFrozen,
    };
  });
}

export const stepCover = (
  cover: EngineCover,
  month: Month,
  parameters: Pick<BalanceParameters, 'wetMonths' | 'runoffFactor'>,
): StepCover => {
  const isWet = parameters.wetMonths.includes(monthParts(month).monthOfYear);
  const coefficient =
    (isWet ? cover.runoffCoefficientWet : cover.runoffCoefficientDry) * parameters.runoffFactor;
  return {
    kind: cover.kind,
    availableWaterMm: cover.availableWaterMm,
    membranePassFraction: cover.membranePassFraction,
    runoffCoefficient: Math.min(1, coefficient),
    runoffDestination: cover.runoffDestination,
    petFactor: cover.petFactor,
  };
};

/** Rain, melt and PET of a step: the month's share by days, or the daily sums where they exist. */
function forcingOf(
  month: MonthForcing,
  step: PlotStep,
  own: Pick<StepForcing, 'surfaceReturnMm' | 'returnToWasteMm' | 'placedDeficitMm' | 'newSoilStoreMm'>,
): StepForcing {
  const { row, snow, span } = month;
  const share = step.dayCount / span.dayCount;
  const daily = row.dailyPrecipitationMm;
  // A whole month keeps its own figure, so that daily and monthly records of one month agree to the last digit.
  const rainShare =
    daily && share < 1 && row.precipitationMm > 0
      ? sumOfDays(daily, step.fromOn, step.dayCount) / row.precipitationMm
      : share;
  return {
    precipitationMm: snow.rainMm * rainShare + snow.snowfallMm * share,
    rainMm: snow.rainMm * rainShare,
    snowfallMm: snow.snowfallMm * share,
    meltMm: snow.meltMm * share,
    dSnowMm: snow.dSnowMm * share,
    referencePetMm: month.petMm * share,
    isFrozen: month.isFrozen,
    durationMonths: share,
    surfaceReturnMm: own.surfaceReturnMm,
    returnToWasteMm: own.returnToWasteMm,
    placedDeficitMm: own.placedDeficitMm,
    newSoilStoreMm: own.newSoilStoreMm,
  };
}

const wasteReceivers = new Set(['working-area', 'daily-cover']);

/** Deficit of the month's waste over the ground that receives it, mm; by days for a step shorter than the month. */
function placedDeficitMm(cell: EngineCell, input: EngineInput, month: MonthForcing, step: PlotStep): number {
  const deficitM3 = cell.placedDeficitM3[month.row.month] ?? 0;
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

/** Store a period of soil starts with: entered, or half of its capacity (template, our choice). */
const enteredStore = (cover: EngineCover, initialSoilStoreMm: number | null) =>
  Math.min(cover.availableWaterMm, initialSoilStoreMm ?? cover.availableWaterMm / 2);

function startingState(
  input: EngineInput,
  cell: EngineCell,
  plot: EnginePlot,
  parent: GroundState | undefined,
  months: MonthForcing[],
  settings: StepSettings,
): GroundState {
  if (parent) return { ...parent };
  const period = plot.periods[0]!;
  const cover = input.covers[period.coverTypeId]!;
  const waste = { wasteStoreMm: cell.initialWasteStoreMm, wasteDeficitMm: cell.initialWasteDeficitMm };
  if (!input.parameters.isSpunUp || period.initialSoilStoreMm !== null || months.length < 12) {
    return { soilStoreMm: enteredStore(cover, period.initialSoilStoreMm), ...waste };
  }
  const year = months.slice(0, 12).map((month) => {
    const { runoffCoefficient, petFactor } = month.covers.get(period.coverTypeId)!;
    return {
      infiltrationMm: (month.snow.rainMm + month.snow.meltMm) * (1 - runoffCoefficient),
      petMm: month.petMm * petFactor,
      isFrozen: month.isFrozen,
    };
  });
  return { soilStoreMm: spinUpSoilStore(year, cover.availableWaterMm, settings.soilLaw).storeMm, ...waste };
}

/**
 * Runs the months in order over every plot of every cell, carrying the water of the ground.
 * @returns every step with its terms, in order of month, cell and plot
 * @throws BalanceDoesNotClose, PetMissing or RangeError with a sentence a person can act on
 * @source method section 1
 */
export function runWaterBalance(input: EngineInput): RunResult {
  const warnings: string[] = [];
  const months = prepareMonths(input, warnings);
  const { parameters } = input;
  const settings: StepSettings = {
    soilLaw: parameters.soilLaw,
    recessionPerMonth: parameters.recessionPerMonth,
    channelledFraction: parameters.channelledFraction,
    leakFraction: parameters.leakFraction,
  };
  const states = new Map<string, GroundState>();
  const steps: StepResult[] = [];
  for (const month of months) {
    for (const cell of input.cells) {
      for (const plot of cell.plots) {
        for (const step of splitMonth(plot, month.span)) {
          const cover = input.covers[step.period.coverTypeId]!;
          const known = states.get(plot.id);
          const before =
            known ??
            startingState(
              input,
              cell,
              plot,
              plot.parentId ? states.get(plot.parentId) : undefined,
              months,
              settings,
            );
          const isNewGround = known === undefined && !(plot.parentId && states.has(plot.parentId));
          const keepsSoil = isNewGround || !step.startsPeriod || isSameSoil(input, cell, plot, step);
          const { terms, after } = computeStep(
            before,
            month.covers.get(step.period.coverTypeId)!,
            forcingOf(month, step, {
              surfaceReturnMm: returnsMm(cell, plot, step, true),
              returnToWasteMm: returnsMm(cell, plot, step, false),
              placedDeficitMm: placedDeficitMm(cell, input, month, step),
              newSoilStoreMm: keepsSoil ? null : enteredStore(cover, step.period.initialSoilStoreMm),
            }),
            settings,
          );
          states.set(plot.id, after);
          steps.push({
            cellId: cell.id,
            plotId: plot.id,
            coverTypeId: step.period.coverTypeId,
            month: month.row.month,
            fromOn: step.fromOn,
            dayCount: step.dayCount,
            areaM2: plot.areaM2,
            terms,
          });
        }
      }
    }
  }
  return { steps, warnings };
}

/** The rest of a divided plot keeps its parent's cover, and so its soil. */
function isSameSoil(input: EngineInput, cell: EngineCell, plot: EnginePlot, step: PlotStep): boolean {
  const index = plot.periods.indexOf(step.period);
  if (index > 0) return plot.periods[index - 1]!.coverTypeId === step.period.coverTypeId;
  const parent = cell.plots.find((one) => one.id === plot.parentId);
  return parent?.periods.at(-1)?.coverTypeId === step.period.coverTypeId;
}
