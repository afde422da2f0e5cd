import { daysInMonth } from '../calendar/month.ts';
import type { StepResult } from './run-water-balance.ts';
import { stateTerms, termNames, type StepTerms, type TermName } from './terms.ts';

/** Volumes of a group of steps, m³, under the terms' own names. */
export interface SummedTerms {
  /** Ground at the end, m². */
  areaM2: number;
  /** Ground over the days of the months, m²: what a depth of the months is counted over. */
  meanAreaM2: number;
  volumesM3: Record<TermName, number>;
}

/**
 * Adds steps to volumes, m³. Flows add over plots and time; stores add over the plots at their last step.
 * A cell that opens in mid-month has a mean area below its area at the end.
 */
export function sumSteps(
  steps: readonly Pick<StepResult, 'plotId' | 'areaM2' | 'fromOn' | 'dayCount' | 'terms'>[],
): SummedTerms {
  const volumesM3 = Object.fromEntries(termNames.map((name) => [name, 0])) as Record<TermName, number>;
  const dayCounts = new Map(steps.map(({ fromOn }) => [fromOn.slice(0, 7), daysInMonth(fromOn.slice(0, 7))]));
  const areaDays = steps.reduce((sum, step) => sum + step.areaM2 * step.dayCount, 0);
  const lastOfPlot = new Map<string, (typeof steps)[number]>();
  for (const step of steps) {
    for (const name of termNames)
      if (!stateTerms.has(name)) volumesM3[name] += (step.terms[name] * step.areaM2) / 1000;
    const known = lastOfPlot.get(step.plotId);
    if (!known || known.fromOn < step.fromOn) lastOfPlot.set(step.plotId, step);
  }
  const lastDay = Math.max(0, ...[...lastOfPlot.values()].map(endNumber));
  const standing = [...lastOfPlot.values()].filter((step) => endNumber(step) === lastDay);
  for (const step of standing)
    for (const name of stateTerms) volumesM3[name] += (step.terms[name] * step.areaM2) / 1000;
  return {
    areaM2: standing.reduce((sum, step) => sum + step.areaM2, 0),
    meanAreaM2:
      areaDays /
      Math.max(
        1,
        [...dayCounts.values()].reduce((sum, count) => sum + count, 0),
      ),
    volumesM3,
  };
}

const endNumber = (step: { fromOn: string; dayCount: number }) =>
  Number(step.fromOn.slice(0, 4)) * 372 +
  Number(step.fromOn.slice(5, 7)) * 31 +
  Number(step.fromOn.slice(8, 10)) +
  step.dayCount;

/** Steps grouped by cell and month, summed. Key: `cellId month`. */
export function sumByCellAndMonth(steps: readonly StepResult[]): Map<string, SummedTerms> {
  const groups = new Map<string, StepResult[]>();
  for (const step of steps) {
    const key = `${step.cellId} ${step.month}`;
    const group = groups.get(key);
    if (group) group.push(step);
    else groups.set(key, [step]);
  }
  return new Map([...groups].map(([key, group]) => [key, sumSteps(group)]));
}

/** The terms that the head line of the balance puts together, m³; zero terms are left out of the line, not of the table. */
export interface HeadLine {
  rainM3: number;
  otherInM3: number;
  runoffM3: number;
  evapotranspirationM3: number;
  intoStorageM3: number;
  leakedM3: number;
  leachateM3: number;
}

/** Rain + other water in − runoff away − evapotranspiration − into storage − leaked = leachate at the sump. */
export function headLine({ volumesM3: v }: SummedTerms): HeadLine {
  return {
    rainM3: v.precipitationMm,
    otherInM3:
      v.surfaceReturnMm + v.returnToWasteMm + v.soilWaterBroughtMm + v.freeMoistureMm + v.condensateMm,
    runoffM3: v.runoffToStormMm + v.coverDrainMm,
    evapotranspirationM3: v.aetMm,
    intoStorageM3: v.dSnowMm + v.dSoilMm + v.dWasteMm + v.absorbedMm,
    leakedM3: v.leakedMm,
    leachateM3: v.leachateMm,
  };
}

export type { StepTerms };
