import { calibrate, type Calibration, type CalibrationChoice } from '#shared/calibration/calibrate.ts';
import { createForecaster, type ForecastTask, type Members } from '#shared/forecast/draw-members.ts';
import type { Month } from '#shared/calendar/month.ts';
import type { EngineInput } from '#shared/water-balance/engine-input.ts';
import { prepareMonths, recordPet } from '#shared/water-balance/month-forcing.ts';
import { planRun } from '#shared/water-balance/plan-run.ts';
import { runPlan } from '#shared/water-balance/run-water-balance.ts';

export interface CalibrationTask {
  input: EngineInput;
  cellId: string;
  /** Months that have both sides, in order. */
  months: Month[];
  measuredM3: number[];
  choices: CalibrationChoice[];
  isDivided: boolean;
}

/** Fits parameters of the set to the measured months of one cell. Weather and PET are made once. */
export function calibrateCell(task: CalibrationTask): Calibration {
  const { input, cellId, months, choices } = task;
  const own = { ...input, cells: input.cells.filter((cell) => cell.id === cellId) };
  const forcing = prepareMonths(own, recordPet(own)).months;
  const indexOf = new Map(months.map((month, index) => [month, index]));
  const predict = (values: readonly number[]): number[] => {
    const changed = Object.fromEntries(choices.map(({ name }, index) => [name, values[index]!]));
    const parameters = { ...own.parameters, ...changed };
    const volumes = months.map(() => 0);
    runPlan(planRun({ ...own, parameters }, forcing), ({ month, plot }, terms) => {
      const at = indexOf.get(month.row.month);
      if (at !== undefined) volumes[at]! += (terms.leachateMm * plot.areaM2) / 1000;
    });
    return volumes;
  };
  const start = choices.map(({ name }) => input.parameters[name]);
  return calibrate(choices, start, task.measuredM3, predict, task.isDivided);
}

export interface SpanTask {
  /** Names the scenario of one forecast, so that a thread lays it out once and not for every span. */
  scenarioId: string;
  task: ForecastTask;
  from: number;
  to: number;
}

let laidOut: { scenarioId: string; draw: (from: number, to: number) => Members } | null = null;

/** Members from one number up to another of one scenario. */
export function drawSpan({ scenarioId, task, from, to }: SpanTask): Members {
  if (laidOut?.scenarioId !== scenarioId) laidOut = { scenarioId, draw: createForecaster(task) };
  return laidOut.draw(from, to);
}
