import type { Month } from '#shared/calendar/month.ts';
import { sumSteps, type SummedTerms } from '#shared/water-balance/sum-steps.ts';
import { asTerms, type StepTerms } from '#shared/water-balance/terms.ts';
import type { Transaction } from '../../db/transaction.ts';
import * as balanceRepository from './balance-repository.ts';

export type RunStep = Awaited<ReturnType<typeof balanceRepository.listSteps>>[number] & { terms: StepTerms };

export interface RunVolumes {
  /** Steps and their sums by `cellId month`. */
  steps: Map<string, RunStep[]>;
  sums: Map<string, SummedTerms>;
  /** Leachate at the sump, m³, by `cellId month`. */
  predicted: Map<string, number>;
  /** Months of a cell that the run reaches, in order. */
  monthsOf: (cellId: string) => Month[];
}

/** The steps of a run by cell and month. */
export async function volumesOfRun(tx: Transaction, runId: string): Promise<RunVolumes> {
  const steps = new Map<string, RunStep[]>();
  for (const row of await balanceRepository.listSteps(tx, runId)) {
    const key = `${row.cellId} ${row.month}`;
    const step = { ...row, terms: asTerms(row.terms) };
    const group = steps.get(key);
    if (group) group.push(step);
    else steps.set(key, [step]);
  }
  const sums = new Map([...steps].map(([key, group]) => [key, sumSteps(group)]));
  return {
    steps,
    sums,
    predicted: new Map([...sums].map(([key, sum]) => [key, sum.volumesM3.leachateMm])),
    monthsOf: (cellId) =>
      [...sums.keys()]
        .filter((key) => key.startsWith(cellId))
        .map((key) => key.slice(-7))
        .sort(),
  };
}
