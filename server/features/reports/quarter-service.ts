import { addDays, firstDay, lastDay } from '#shared/calendar/day.ts';
import { addMonths, daysInMonth, quarterMonths } from '#shared/calendar/month.ts';
import { Problem } from '#shared/problems.ts';
import { completeParameters, type BalanceParameters } from '#shared/water-balance/engine-input.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import * as balanceRepository from '../balance/balance-repository.ts';
import { predictionRun } from '../balance/run-service.ts';
import { measuredByCell } from '../compare/measured-service.ts';
import { listAnalytes, listLaboratories, listLiveResults, listSamplePoints } from '../lab/lab-repository.ts';
import { readLedger } from '../ledger/ledger-view.ts';
import { recomputeDays } from '../ledger/posting-service.ts';
import { judgeMonths } from '../limits/verdict-service.ts';
import { readSite, siteDaysOf, siteOf } from '../sites/site-service.ts';
import type { Quarter } from './quarter.ts';
import { cellMonthsOf, daysOf, historyOf, leakDetectionOf, stepsOf } from './quarter-parts.ts';
import { notesOf } from './quarter-notes.ts';

/** Collects the quarter from one transaction, so that all sheets agree with each other. */
export async function collectQuarter(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  quarter: string,
): Promise<Quarter> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const months = quarterMonths(quarter);
  const { run, isAccepted } = await predictionRun(tx, context, deps, record);
  if (run.problem) throw new Problem('balance-refused', run.problem);
  const set = (await balanceRepository.listParameterSets(tx, siteId)).find(
    (one) => one.id === run.parameterSetId,
  )!;
  const parameters = completeParameters(set.values as Partial<BalanceParameters>);
  const steps = await stepsOf(tx, record, run.id, months, parameters);
  const predicted = new Map<string, { volumeM3: number; areaM2: number }>();
  for (const step of steps) {
    const key = `${record.cells.find((cell) => cell.code === step.cellCode)!.id} ${step.month}`;
    const known = predicted.get(key) ?? { volumeM3: 0, areaM2: 0 };
    predicted.set(key, {
      volumeM3: known.volumeM3 + (step.terms.leachateMm * step.areaM2) / 1000,
      areaM2: known.areaM2 + (step.areaM2 * step.dayCount) / daysInMonth(step.month),
    });
  }
  const measured = await measuredByCell(
    tx,
    record,
    months[0]!,
    months[2]!,
    new Map([...predicted].map(([key, one]) => [key, one.volumeM3])),
  );
  const days = await siteDaysOf(tx, siteId);
  const iso = (ms: number) => new Date(ms).toISOString();
  const [fromMs, toMs] = [
    days.startMs(firstDay(months[0]!)),
    days.startMs(firstDay(addMonths(months[2]!, 1))),
  ];
  const intervals: Quarter['intervals'] = [];
  for (const meter of record.meters) {
    const computed = await recomputeDays(
      tx,
      record,
      meter,
      days,
      iso(fromMs - 4 * 86_400_000),
      iso(toMs + 4 * 86_400_000),
    );
    intervals.push(
      ...computed.intervals
        .filter((one) => one.toMs > fromMs && one.fromMs < toMs)
        .map((one) => ({
          ...one,
          meterCode: meter.code,
          from: days.localTime(one.fromMs),
          to: days.localTime(one.toMs),
          hours: (one.toMs - one.fromMs) / 3_600_000,
        })),
    );
  }
  const ledgers = [];
  for (const month of months) ledgers.push(await readLedger(tx, context, month));
  const points = await listSamplePoints(tx, siteId);
  const analytes = await listAnalytes(tx);
  const laboratories = await listLaboratories(tx);
  const results = await listLiveResults(tx, siteId, firstDay(months[0]!), lastDay(months[2]!));
  return {
    site: record.site,
    quarter,
    months,
    dueOn: addDays(lastDay(months[2]!), record.site.reportDueDays),
    generatedAt: deps.now().toISOString(),
    run: {
      kind: run.kind,
      number: run.number,
      engineVersion: run.engineVersion,
      inputSha256: run.inputSha256,
      isAccepted,
    },
    parameters,
    parameterSet: `${set.name}, version ${set.version}${set.confirmedAt ? '' : ' (template, not confirmed)'}`,
    cells: record.cells.map((cell) => ({ code: cell.code, name: cell.name })),
    steps,
    cellMonths: cellMonthsOf(record, months, predicted, measured),
    history: await historyOf(tx, record, run.id, months[2]!),
    intervals,
    days: await daysOf(tx, record, months),
    stores: ledgers.flatMap((ledger) =>
      ledger.stores.map((store) => ({ month: ledger.month, name: store.name, balance: store.balance })),
    ),
    loads: ledgers.map((ledger) => ({
      month: ledger.month,
      count: ledger.loads.count,
      nominalM3: ledger.loads.nominalM3,
      receivedM3: ledger.loads.receivedM3,
    })),
    leakDetection: await leakDetectionOf(tx, record, months),
    verdicts: await judgeMonths(tx, siteId, months),
    results: results.map((row) => ({
      pointCode: points.find((one) => one.id === row.samplePointId)?.code ?? '',
      siteDay: row.siteDay,
      analyteName: analytes.find((one) => one.id === row.analyteId)?.name ?? '',
      fraction: row.fraction,
      comparator: row.comparator,
      value: row.value === null ? null : Number(row.value),
      unit: row.unit,
      laboratory: laboratories.find((one) => one.id === row.laboratoryId)?.name ?? '',
      file: `${row.sheet ?? ''} ${row.cell ?? ''}`.trim(),
      rawText: row.rawText,
      missingReason: row.missingReason,
      qualifier: row.qualifier,
    })),
    notes: await notesOf(tx, record, months),
  };
}
