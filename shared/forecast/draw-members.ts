import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';
import { addMonths, daysInMonth, monthRange, monthsBetween, type Month } from '../calendar/month.ts';
import { computeStep, type GroundState, type StepSettings } from '../water-balance/compute-step.ts';
import type { EngineCell, EngineInput } from '../water-balance/engine-input.ts';
import { prepareMonths } from '../water-balance/month-forcing.ts';
import type { MonthPet } from '../water-balance/potential-evapotranspiration.ts';
import { planRun, type PlannedStep } from '../water-balance/plan-run.ts';
import { zeroTerms } from '../water-balance/terms.ts';
import {
  createWeather,
  yearStarts,
  type MemberWeather,
  type Random,
  type SourceClimate,
} from './member-weather.ts';
import { simulateStore, type StoreMonth, type StorePlan } from './simulate-store.ts';

export const drawnNames = ['runoffFactor', 'petFactor', 'recessionPerMonth', 'channelledFraction'] as const;
export type DrawnName = (typeof drawnNames)[number];
export type DrawnRanges = Record<DrawnName, { low: number; high: number }>;

export interface ForecastTask {
  /** Cells as the scenario plans them, covers and parameters; its climate is not used. */
  input: EngineInput;
  source: SourceClimate;
  firstMonth: Month;
  monthCount: number;
  /** Water of the ground by plot at the start; ground that is opened later starts by itself. */
  grounds: Record<string, GroundState>;
  packMm: number;
  ranges: DrawnRanges;
  store: StorePlan | null;
  seed: number;
}

/** What a span of members gives, member after member, month after month. */
export interface Members {
  leachateM3: Float64Array;
  levelM: Float64Array;
  loads: Float64Array;
  isOver: Uint8Array;
  /** What would run over the crest of the store, m³. */
  spillM3: Float64Array;
}

/** Climate of a placeholder year for the layout: only its calendar is used. */
function layOut(task: ForecastTask): PlannedStep[] {
  const { input, firstMonth, monthCount } = task;
  const months = monthRange(firstMonth, addMonths(firstMonth, monthCount - 1));
  const climate = months.map((month) => ({
    month,
    precipitationMm: 0,
    tMeanC: 20,
    tMinC: null,
    tMaxC: null,
    petMm: 0,
    panMm: null,
    windMPerS: null,
    relativeHumidityPercent: null,
    sunshineHours: null,
    days: null,
  }));
  const parameters = { ...input.parameters, isSpunUp: false, runoffMethod: 'coefficient' as const };
  const laidOut = { ...input, climate, parameters };
  const none: MonthPet = { petMm: 0, days: null, substitutions: [], isOutsideRadiation: false, parts: [] };
  const { months: forcing } = prepareMonths(
    laidOut,
    climate.map(() => none),
  );
  return planRun(laidOut, forcing).steps;
}

const fresh = (step: PlannedStep): GroundState => ({
  soilStoreMm: step.cover.availableWaterMm / 2,
  wasteStoreMm: step.cell.initialWasteStoreMm,
  wasteDeficitMm: step.cell.initialWasteDeficitMm,
});

/** Parameters of one member, uniform in their ranges. */
function drawSettings({ input, ranges }: ForecastTask, random: Random): StepSettings {
  const between = ({ low, high }: { low: number; high: number }) =>
    low + (high - low) * uniformFloat64(random);
  const { soilLaw, leakFraction, leakMethod, liner } = input.parameters;
  return {
    soilLaw,
    runoffFactor: between(ranges.runoffFactor),
    petFactor: between(ranges.petFactor),
    recessionPerMonth: between(ranges.recessionPerMonth),
    channelledFraction: between(ranges.channelledFraction),
    leakFraction,
    liner: leakMethod === 'defects' ? liner : null,
  };
}

/** The steps of a scenario over the weather of a member; adds each plot's leachate to its month. */
function createRunner(task: ForecastTask, weather: MemberWeather) {
  const steps = layOut(task);
  const stepMonths = Int32Array.from(steps, (step) => monthsBetween(task.firstMonth, step.month.row.month));
  // Steps of whole months share one forcing, so the weather is written once a month and not once a plot.
  const forcings = [...new Map(steps.map((step, index) => [step.forcing, stepMonths[index]!]))];
  const firstSteps = steps.filter(
    (step, index) => steps.findIndex((one) => one.plotIndex === step.plotIndex) === index,
  );
  const grounds: GroundState[] = [];
  const terms = zeroTerms();
  return (settings: StepSettings, out: Float64Array, offset: number): void => {
    for (const step of firstSteps)
      grounds[step.plotIndex] = { ...(task.grounds[step.plot.id] ?? fresh(step)) };
    for (const [forcing, month] of forcings) {
      const share = forcing.durationMonths;
      forcing.rainMm = weather.rainMm[month]! * share;
      forcing.snowfallMm = weather.snowfallMm[month]! * share;
      forcing.precipitationMm = forcing.rainMm + forcing.snowfallMm;
      forcing.meltMm = weather.meltMm[month]! * share;
      forcing.dSnowMm = weather.dSnowMm[month]! * share;
      forcing.referencePetMm = weather.petMm[month]! * share;
      forcing.isFrozen = weather.isFrozen[month] === 1;
    }
    for (let index = 0; index < steps.length; index += 1) {
      const step = steps[index]!;
      const month = stepMonths[index]!;
      const ground = grounds[step.plotIndex]!;
      if (step.takesOverFrom >= 0) Object.assign(ground, grounds[step.takesOverFrom]);
      computeStep(ground, step.cover, step.forcing, settings, terms);
      out[offset + month] = out[offset + month]! + (terms.leachateMm * step.plot.areaM2) / 1000;
    }
  };
}

const emptyMembers = (size: number): Members => ({
  leachateM3: new Float64Array(size),
  levelM: new Float64Array(size),
  loads: new Float64Array(size),
  isOver: new Uint8Array(size),
  spillM3: new Float64Array(size),
});

/**
 * A forecaster of one scenario: laid out once, then any span of members. Member n has its own random numbers from the
 * seed and n alone, so that the same seed gives the same numbers with any number of workers.
 * @throws RangeError when the source holds no whole year from the first month
 * @source method section 10; climate years resampled whole, parameters uniform in their ranges
 */
export function createForecaster(task: ForecastTask): (from: number, to: number) => Members {
  const { source, firstMonth, monthCount, input, store } = task;
  const starts = yearStarts(source, firstMonth);
  if (!starts.length) throw new RangeError('The climate record holds no whole year to draw from.');
  const { weather, draw } = createWeather(source, starts, task.packMm, monthCount, input.parameters);
  const runMember = createRunner(task, weather);
  const dayCounts = monthRange(firstMonth, addMonths(firstMonth, monthCount - 1)).map(daysInMonth);
  return (from, to) => {
    const members = emptyMembers((to - from) * monthCount);
    for (let member = from; member < to; member += 1) {
      const offset = (member - from) * monthCount;
      const random = xoroshiro128plus(Math.imul(task.seed, 0x9e3779b1) ^ Math.imul(member + 1, 0x85ebca6b));
      draw(random);
      runMember(drawSettings(task, random), members.leachateM3, offset);
      if (!store) continue;
      const months = dayCounts.map((dayCount, month): StoreMonth => ({
        inflowM3: members.leachateM3[offset + month]!,
        rainMm: weather.rainMm[month]! + weather.snowfallMm[month]!,
        petMm: weather.petMm[month]!,
        dayCount,
      }));
      simulateStore(store, months, members, offset);
    }
    return members;
  };
}

/** Cells at the start of a forecast keep what the record knows of them; waste to come is placed as in the last year. */
export function repeatLastYear(
  cells: readonly EngineCell[],
  firstMonth: Month,
  monthCount: number,
): EngineCell[] {
  const ahead = monthRange(firstMonth, addMonths(firstMonth, monthCount - 1));
  return cells.map((cell) => ({
    ...cell,
    returns: [],
    measuredHeadM: {},
    condensateM3: {},
    placedDeficitM3: Object.fromEntries(
      ahead.flatMap((month) => {
        const back = Array.from({ length: Math.ceil(monthCount / 12) }, (_, year) =>
          addMonths(month, -12 * (year + 1)),
        );
        const before = back.find((one) => one < firstMonth);
        const deficitM3 = before === undefined ? undefined : cell.placedDeficitM3[before];
        return deficitM3 === undefined ? [] : [[month, deficitM3]];
      }),
    ),
  }));
}
