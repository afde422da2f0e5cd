import type * as z from 'zod';
import { addMonths } from '#shared/calendar/month.ts';
import { Problem, fieldProblem } from '#shared/problems.ts';
import type { calibrationInput } from '#shared/schemas/forecast.ts';
import type { CalibrationView } from '#shared/views/forecast-view.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { volumesOfRun } from '../balance/predicted-volumes.ts';
import { currentParameters, workingRun } from '../balance/run-service.ts';
import { measuredByCell } from '../compare/measured-service.ts';
import { readSite, siteOf } from '../sites/site-service.ts';

/**
 * Fits parameters to what was pumped from one cell. A proposal: nothing is stored, an engineer accepts it as a new set
 * or drops it.
 * @throws Problem when the cell has too few months with both sides
 */
export async function calibrateToCell(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof calibrationInput>,
): Promise<CalibrationView> {
  const record = await readSite(tx, siteOf(context));
  const cell = record.cells.find((one) => one.id === input.cellId);
  if (!cell) throw fieldProblem('/cellId', 'Choose a cell of this site.');
  const { run, input: engineInput } = await workingRun(tx, context, deps, record);
  if (run.problem) throw new Problem('balance-refused', `There is no balance to fit. ${run.problem}`);
  const { predicted, monthsOf } = await volumesOfRun(tx, run.id);
  const available = monthsOf(cell.id);
  const measured = available.length
    ? await measuredByCell(tx, record, available[0]!, available.at(-1)!, predicted)
    : new Map<string, never>();
  const months = available.filter((month) => measured.has(`${cell.id} ${month}`));
  const rows = months.map((month) => measured.get(`${cell.id} ${month}`)!);
  try {
    const found = await deps.models.calibrate({
      input: engineInput,
      cellId: cell.id,
      months,
      measuredM3: rows.map((row) => row.volumeM3),
      choices: input.choices.map((choice) => ({
        name: choice.name,
        low: Number(choice.low),
        high: Number(choice.high),
      })),
      isDivided: rows.some((row) => row.dividedByPredictionM3 > 0),
    });
    const set = await currentParameters(tx, context, deps);
    return {
      ...found,
      cell: { id: cell.id, code: cell.code, name: cell.name },
      firstMonth: months[0]!,
      lastMonth: months.at(-1)!,
      heldBackFrom: months[found.fitted.monthCount] ?? addMonths(months.at(-1)!, 1),
      leftOutCount: available.length - months.length,
      baseSet: { name: set.name, version: set.version },
    };
  } catch (error) {
    if (error instanceof Error && error.name === 'TooFewMonths')
      throw fieldProblem('/cellId', `${cell.code}: ${error.message}`);
    throw error;
  }
}
