import { dayOfYear } from '#shared/calendar/day.ts';
import { addMonths, daysInMonth, monthName, type Month } from '#shared/calendar/month.ts';
import { Problem } from '#shared/problems.ts';
import { checkClosure } from '#shared/water-balance/check-closure.ts';
import { isWetMonth, runoffShare } from '#shared/water-balance/compute-step.ts';
import { recordPet } from '#shared/water-balance/month-forcing.ts';
import { petMethodNames, soilLawNames } from '#shared/water-balance/method-names.ts';
import { readStoredInput } from '#shared/water-balance/stored-input.ts';
import { explainStep } from '#shared/water-balance/explain-step.ts';
import { recordHeatIndex } from '#shared/water-balance/potential-evapotranspiration.ts';
import { daylightHours, declinationRad } from '#shared/water-balance/solar-geometry.ts';
import { headLine, sumSteps } from '#shared/water-balance/sum-steps.ts';
import { asTerms, termRegister, type TermName } from '#shared/water-balance/terms.ts';
import type { BalanceView, WorkingView } from '#shared/views/balance-view.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { measuredByCell, type MeasuredMonth } from '../compare/measured-service.ts';
import { readSite, siteOf } from '../sites/site-service.ts';
import * as repository from './balance-repository.ts';
import { currentParameters, workingRun } from './run-service.ts';

type StepRow = Awaited<ReturnType<typeof repository.listSteps>>[number];
const asStep = (row: StepRow) => ({ ...row, terms: asTerms(row.terms) });

/** Largest residual of each line over a group of steps, in mm, against its tolerance. */
function closureOf(steps: readonly ReturnType<typeof asStep>[]) {
  const worst = new Map<string, { line: string; residualMm: number; toleranceMm: number }>();
  for (const step of steps) {
    for (const one of checkClosure(step.terms)) {
      const known = worst.get(one.line);
      if (!known || Math.abs(one.residualMm) > Math.abs(known.residualMm))
        worst.set(one.line, { line: one.line, residualMm: one.residualMm, toleranceMm: one.toleranceMm });
    }
  }
  return [...worst.values()];
}

/** The balance of a month: site, cells and plots, of the working run or a frozen one. */
export async function readBalance(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  month: Month,
  runId: string | undefined,
): Promise<BalanceView> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const working = await workingRun(tx, context, deps, record);
  const frozen = await repository.listFrozenRuns(tx, siteId);
  const run = runId ? frozen.find((one) => one.id === runId) : working.run;
  if (!run) throw new Problem('not-found', 'There is no such run at this site.');
  const year = (await repository.listSteps(tx, run.id, addMonths(month, -11), month)).map(asStep);
  const steps = year.filter((step) => step.month === month);
  const isWholeYear = new Set(year.map((step) => step.month)).size === 12;
  const group = (rows: typeof steps, yearRows: typeof steps) => ({
    ...sumSteps(rows),
    headLine: headLine(sumSteps(rows)),
    passedYearM3: isWholeYear
      ? yearRows.reduce((sum, step) => sum + (step.terms.passedMm * step.areaM2) / 1000, 0)
      : null,
  });
  const predicted = new Map(
    record.cells.map((cell) => {
      const own = steps.filter((step) => step.cellId === cell.id);
      return [`${cell.id} ${month}`, sumSteps(own).volumesM3.leachateMm] as const;
    }),
  );
  const measured = steps.length
    ? await measuredByCell(tx, record, month, month, predicted)
    : new Map<string, MeasuredMonth>();
  const cells = record.cells.map((cell) => {
    const own = steps.filter((step) => step.cellId === cell.id);
    return {
      id: cell.id,
      code: cell.code,
      name: cell.name,
      ...group(
        own,
        year.filter((step) => step.cellId === cell.id),
      ),
      pumpedM3: measured.get(`${cell.id} ${month}`)?.volumeM3 ?? null,
      plots: own.map((step) => ({
        stepId: step.id,
        plotName: record.plots.find((plot) => plot.id === step.plotId)?.name ?? '',
        coverName: record.coverTypes.find((type) => type.id === step.coverTypeId)?.name ?? '',
        fromOn: step.fromOn,
        dayCount: step.dayCount,
        areaM2: step.areaM2,
        terms: step.terms,
      })),
    };
  });
  const pumped = cells.map((cell) => cell.pumpedM3).filter((value): value is number => value !== null);
  const climate = working.climate.find((row) => row.month === month) ?? null;
  return {
    month,
    run: { ...run, isWorking: run.kind === 'working', warnings: run.warnings as string[] },
    differsFromWorking: frozen.length > 0 && frozen[0]!.inputSha256 !== working.run.inputSha256,
    stopped: working.stopped,
    firstMonth: working.input.climate[0]!.month,
    lastMonth: working.input.climate.at(-1)!.month,
    climate: climate && {
      rainDayCount: climate.rainDayCount,
      temperatureDayCount: climate.temperatureDayCount,
      dayCount: climate.dayCount,
      rainStation: climate.rainStation,
      temperatureStation: climate.temperatureStation,
      choice: climate.choice,
    },
    site: {
      ...group(steps, year),
      pumpedM3: pumped.length === cells.length ? pumped.reduce((sum, value) => sum + value, 0) : null,
    },
    cells,
    closure: closureOf(steps),
    frozenRuns: frozen.map((one) => ({
      id: one.id,
      number: one.number,
      computedAt: one.computedAt,
      acceptedAt: one.acceptedAt,
      note: one.note,
    })),
  };
}

/** The working of one number: a term of one plot and step. */
export async function readWorking(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  stepId: string,
  term: string,
): Promise<WorkingView> {
  if (!(term in termRegister)) throw new Problem('not-found', 'There is no such term.');
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const working = await workingRun(tx, context, deps, record);
  const frozen = await repository.listFrozenRuns(tx, siteId);
  for (const run of [working.run, ...frozen]) {
    const found = (await repository.listSteps(tx, run.id)).find((row) => row.id === stepId);
    if (!found) continue;
    const step = asStep(found);
    const sets = await repository.listParameterSets(tx, siteId);
    const set =
      sets.find((one) => one.id === run.parameterSetId) ?? (await currentParameters(tx, context, deps));
    const stored = (await repository.findRun(tx, siteId, run.id))?.input;
    const input = stored ? readStoredInput(stored) : working.input;
    const { parameters } = input;
    const cover = input.covers[step.coverTypeId];
    const index = input.climate.findIndex((row) => row.month === step.month);
    if (!cover || index < 0)
      throw new Problem('not-found', 'What this step was computed from is no longer part of the record.');
    return {
      title: termRegister[term as TermName].name,
      plotName: record.plots.find((plot) => plot.id === step.plotId)?.name ?? '',
      coverName: cover.name,
      month: step.month,
      fromOn: step.fromOn,
      dayCount: step.dayCount,
      lines: explainStep(term as TermName, {
        terms: step.terms,
        areaM2: step.areaM2,
        dayCount: step.dayCount,
        daysInMonth: daysInMonth(step.month),
        cover,
        runoffCoefficient: runoffShare(cover, isWetMonth(step.month, parameters), parameters.runoffFactor),
        parameters,
        climate: input.climate[index]!,
        pet: recordPet(input)[index]!,
        heatIndex: recordHeatIndex(input.climate),
        daylightHours: daylightHours(input.latitudeDeg, declinationRad(dayOfYear(`${step.month}-15`))),
      }),
      law: soilLawNames[parameters.soilLaw],
      petMethod: petMethodNames[parameters.petMethod],
      warnings: (run.warnings as string[]).filter((sentence) => sentence.includes(monthName(step.month))),
      parameterSet: { name: set.name, version: set.version, isConfirmed: set.confirmedAt !== null },
      run: {
        kind: run.kind,
        number: run.number,
        computedAt: run.computedAt,
        engineVersion: run.engineVersion,
      },
    };
  }
  throw new Problem(
    'not-found',
    'This number belongs to a run that is no longer kept. Open the balance again.',
  );
}
