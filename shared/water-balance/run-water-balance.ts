import type { Day } from '../calendar/day.ts';
import type { Month } from '../calendar/month.ts';
import { computeStep, type GroundState } from './compute-step.ts';
import type { EngineInput } from './engine-input.ts';
import { prepareMonths, recordPet, type MonthForcing } from './month-forcing.ts';
import { planRun, type PlannedStep, type RunPlan } from './plan-run.ts';
import { zeroTerms, type StepTerms } from './terms.ts';

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

/**
 * Runs a plan, carrying the water of the ground from step to step.
 * @param onStep called after every step; the terms are written over by the next one, so take what is needed
 * @returns the ground of every plot as its last step left it, in the order of the plan's plots
 * @throws BalanceDoesNotClose naming the line
 */
export function runPlan(
  { steps, starts, settings }: RunPlan,
  onStep: (step: PlannedStep, terms: Readonly<StepTerms>, index: number) => void,
): GroundState[] {
  const grounds = starts.map((start) => ({ ...start }));
  const terms = zeroTerms();
  for (let index = 0; index < steps.length; index += 1) {
    const step = steps[index]!;
    const ground = grounds[step.plotIndex]!;
    if (step.takesOverFrom >= 0) Object.assign(ground, grounds[step.takesOverFrom]);
    computeStep(ground, step.cover, step.forcing, settings, terms);
    onStep(step, terms, index);
  }
  return grounds;
}

/** The steps of a site's record, laid out and ready to run. */
export function planWaterBalance(input: EngineInput): {
  plan: RunPlan;
  months: MonthForcing[];
  warnings: string[];
} {
  const { months, warnings } = prepareMonths(input, recordPet(input));
  return { plan: planRun(input, months), months, warnings };
}

/**
 * Runs the months in order over every plot of every cell.
 * @returns every step with its terms, in order of month, cell and plot
 * @throws BalanceDoesNotClose, PetMissing or RangeError with a sentence a person can act on
 * @source method section 1
 */
export function runWaterBalance(input: EngineInput): RunResult {
  const { plan, warnings } = planWaterBalance(input);
  const steps: StepResult[] = [];
  runPlan(plan, ({ cell, plot, coverTypeId, month, fromOn, forcing }, terms) =>
    steps.push({
      cellId: cell.id,
      plotId: plot.id,
      coverTypeId,
      month: month.row.month,
      fromOn,
      dayCount: forcing.dayCount,
      areaM2: plot.areaM2,
      terms: { ...terms },
    }),
  );
  return { steps, warnings };
}
