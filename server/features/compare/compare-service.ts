import { desc, eq } from 'drizzle-orm';
import type * as z from 'zod';
import { dayNameShort, monthOfDay } from '#shared/calendar/day.ts';
import { addMonths, monthName, monthRange, type Month } from '#shared/calendar/month.ts';
import { fieldProblem } from '#shared/problems.ts';
import { compareMonths } from '#shared/reconciliation/compare-months.ts';
import { correlationAtLag, fitStatistics } from '#shared/reconciliation/fit-statistics.ts';
import type { Finding } from '#shared/findings.ts';
import type { compareNoteInput } from '#shared/schemas/balance.ts';
import { coverKindNames, type CoverKind } from '#shared/water-balance/cover-types.ts';
import { completeParameters, type BalanceParameters } from '#shared/water-balance/engine-input.ts';
import type { StepResult } from '#shared/water-balance/run-water-balance.ts';
import { sumSteps } from '#shared/water-balance/sum-steps.ts';
import type { CompareView } from '#shared/views/balance-view.ts';
import { recordChange } from '../../audit/record-change.ts';
import { compareNotes } from '../../db/schema/balance.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import * as balanceRepository from '../balance/balance-repository.ts';
import { currentParameters, predictionRun } from '../balance/run-service.ts';
import { readSite, siteOf, type SiteRecord } from '../sites/site-service.ts';
import { measuredByCell } from './measured-service.ts';

export const listNotes = (tx: Transaction, siteId: string) =>
  tx.select().from(compareNotes).where(eq(compareNotes.siteId, siteId)).orderBy(desc(compareNotes.writtenAt));

/** What happened at a cell: cover changes and meter events, each on its day. */
function eventsOf(record: SiteRecord, cellId: string): { onDay: string; sentence: string }[] {
  const plotIds = new Set(record.plots.filter((plot) => plot.cellId === cellId).map((plot) => plot.id));
  const first = new Map<string, string>();
  for (const period of record.coverPeriods)
    if (!first.has(period.plotId)) first.set(period.plotId, period.id);
  const covers = record.coverPeriods
    .filter(
      (period) =>
        plotIds.has(period.plotId) &&
        period.fromOn > record.cells.find((cell) => cell.id === cellId)!.openedOn,
    )
    .filter((period) => {
      const plot = record.plots.find((one) => one.id === period.plotId)!;
      const parentCover = record.coverPeriods
        .filter((one) => one.plotId === plot.parentId)
        .at(-1)?.coverTypeId;
      return first.get(period.plotId) !== period.id || parentCover !== period.coverTypeId;
    })
    .map((period) => {
      const plot = record.plots.find((one) => one.id === period.plotId)!;
      const type = record.coverTypes.find((one) => one.id === period.coverTypeId)!;
      return {
        onDay: period.fromOn,
        sentence: `${(Number(plot.areaM2) / 10_000).toFixed(1)} ha became ${type.name}`,
      };
    });
  const sumpIds = new Set(record.sumps.filter((sump) => sump.cellId === cellId).map((sump) => sump.id));
  const meters = record.meters.filter((meter) => meter.sumpId && sumpIds.has(meter.sumpId));
  const meterEvents = record.meterEvents
    .filter((event) => meters.some((meter) => meter.id === event.meterId))
    .map((event) => ({
      onDay: event.siteDay,
      sentence: `${meters.find((meter) => meter.id === event.meterId)!.code} meter: ${event.kind.replace('-', ' ')}`,
    }));
  return [...covers, ...meterEvents].sort((a, b) => (a.onDay < b.onDay ? -1 : 1));
}

const round = (value: number) => Math.round(value).toLocaleString('en-GB').replaceAll(',', '\u2009');
const signed = (value: number) => `${value < 0 ? '\u2212' : '+'}${round(Math.abs(value))}`;

function findingsOf(rows: ReturnType<typeof compareMonths>, cellCode: string): Finding[] {
  const last = rows.findLast((row) => row.measuredM3 !== null);
  if (!last)
    return [
      {
        code: 'nothing-measured',
        severity: 'ask',
        sentence: `Nothing was measured at ${cellCode} in these months.`,
      },
    ];
  const { rolling } = last;
  const difference = rolling.measuredM3 - rolling.predictedM3;
  const tolerance = Math.abs(rolling.predictedM3) * 0.1;
  const findings: Finding[] = [
    {
      code: 'rolling-twelve',
      severity: Math.abs(difference) <= tolerance ? 'note' : 'ask',
      difference,
      tolerance,
      unit: 'm³',
      when: last.month,
      sentence: `${rolling.monthCount} of 12 months to ${monthName(last.month)}: ${round(rolling.measuredM3)} m³ pumped against ${round(rolling.predictedM3)} predicted${rolling.percent === null ? '' : `, ${rolling.percent < 0 ? '\u2212' : '+'}${Math.abs(rolling.percent).toFixed(1)} %`}.`,
    },
  ];
  let streak = 0;
  for (const row of [...rows].reverse()) {
    if (row.measuredM3 === null) continue;
    if (row.isInside !== false || Math.sign(row.differenceM3!) !== Math.sign(last.differenceM3!)) break;
    streak += 1;
  }
  if (streak >= 3) {
    findings.push({
      code: 'months-in-a-row',
      severity: 'ask',
      difference: last.differenceM3!,
      tolerance: last.tolerance!.valueM3,
      unit: 'm³',
      when: last.month,
      sentence: `${streak} months in a row ${last.differenceM3! > 0 ? 'more' : 'less'} was pumped than predicted; ${monthName(last.month)} by ${signed(last.differenceM3!)} m³.`,
    });
  }
  const pairs = rows
    .filter((row) => row.measuredM3 !== null)
    .map((row) => ({ predicted: row.predictedM3, measured: row.measuredM3! }));
  const lags = [0, 1, 2, 3]
    .map((lag) => ({ lag, found: correlationAtLag(pairs, lag) }))
    .filter((one) => one.found);
  const best = [...lags].sort((a, b) => b.found!.r - a.found!.r)[0];
  const none = lags.find((one) => one.lag === 0);
  if (best && none && best.lag > 0) {
    findings.push({
      code: 'lag',
      severity: 'note',
      sentence: `Pumped follows predicted ${best.lag} ${best.lag === 1 ? 'month' : 'months'} later: correlation ${best.found!.r.toFixed(3)} against ${none.found!.r.toFixed(3)} without delay (${best.found!.pairCount} pairs).`,
    });
  }
  return findings;
}

/** A header divided by the prediction cannot tell its cells apart; the reader must know before believing a match. */
const circularFinding = (cellCode: string, monthCount: number): Finding[] =>
  monthCount === 0
    ? []
    : [
        {
          code: 'divided-by-prediction',
          severity: 'note',
          sentence: `In ${monthCount} ${monthCount === 1 ? 'month' : 'months'} the volume of ${cellCode} is its part of a shared header, divided in proportion to the prediction. The gap then speaks for the header as a whole, not for ${cellCode}.`,
        },
      ];

/** Predicted against measured for one cell, the months up to the chosen one. */
export async function readCompare(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  cellCode: string,
  last: Month,
  monthCount: number,
): Promise<CompareView> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const cell = record.cells.find((one) => one.code === cellCode) ?? record.cells[0];
  if (!cell) throw fieldProblem('/query/cell', 'There is no cell to compare yet. Make one under Site.');
  const { run, isAccepted, isOutOfDate } = await predictionRun(tx, context, deps, record);
  const parameters = completeParameters(
    (await currentParameters(tx, context, deps)).values as Partial<BalanceParameters>,
  );
  const steps = (await balanceRepository.listSteps(tx, run.id)).map((row) => ({
    ...row,
    terms: row.terms as StepResult['terms'],
  }));
  const byKey = new Map<string, typeof steps>();
  for (const step of steps)
    byKey.set(`${step.cellId} ${step.month}`, [...(byKey.get(`${step.cellId} ${step.month}`) ?? []), step]);
  const summed = new Map([...byKey].map(([key, group]) => [key, sumSteps(group)]));
  const predicted = new Map([...summed].map(([key, sum]) => [key, sum.volumesM3.leachateMm]));
  const available = [
    ...new Set(steps.filter((step) => step.cellId === cell.id).map((step) => step.month)),
  ].sort();
  const lastMonth = available.filter((month) => month <= last).at(-1) ?? available.at(-1);
  const months = lastMonth
    ? monthRange(addMonths(lastMonth, 1 - monthCount), lastMonth).filter((month) =>
        predicted.has(`${cell.id} ${month}`),
      )
    : [];
  const measured = months.length
    ? await measuredByCell(tx, record, months[0]!, months.at(-1)!, predicted)
    : new Map();
  const rows = compareMonths(
    months.map((month) => {
      const sum = summed.get(`${cell.id} ${month}`)!;
      return {
        month,
        areaM2: sum.meanAreaM2,
        rainMm: (sum.volumesM3.precipitationMm / sum.meanAreaM2) * 1000,
        predictedM3: sum.volumesM3.leachateMm,
        measuredM3: measured.get(`${cell.id} ${month}`)?.volumeM3 ?? null,
      };
    }),
    parameters.percentFloorMm,
  );
  const notes = (await listNotes(tx, siteId)).filter((note) => note.cellId === cell.id);
  const events = eventsOf(record, cell.id);
  const pairs = rows
    .filter((row) => row.measuredM3 !== null)
    .map((row) => ({ predicted: row.predictedM3, measured: row.measuredM3! }));
  return {
    cell: { id: cell.id, code: cell.code, name: cell.name },
    cells: record.cells.map((one) => ({ code: one.code, name: one.name })),
    run: { ...run, isAccepted, isOutOfDate },
    percentFloorMm: parameters.percentFloorMm,
    rows: rows.map((row) => {
      const sum = summed.get(`${cell.id} ${row.month}`)!;
      const group = byKey.get(`${cell.id} ${row.month}`)!;
      const own = measured.get(`${cell.id} ${row.month}`);
      const perMm = (value: number, areaM2: number) => (value / areaM2) * 1000;
      return {
        ...row,
        aetMm: perMm(sum.volumesM3.aetMm, sum.meanAreaM2),
        storageMm: perMm(sum.volumesM3.soilStoreMm + sum.volumesM3.wasteStoreMm, sum.areaM2),
        estimatedPercent: own && own.volumeM3 > 0 ? (100 * own.estimatedM3) / own.volumeM3 : 0,
        allocatedPercent: own && own.volumeM3 > 0 ? (100 * own.allocatedM3) / own.volumeM3 : 0,
        covers: coversOf(record, group),
        events: events
          .filter((event) => monthOfDay(event.onDay) === row.month)
          .map((event) => ({ ...event, when: dayNameShort(event.onDay) })),
        note: notes.find((note) => note.month === row.month) ?? null,
      };
    }),
    statistics: { ...fitStatistics(pairs), leftOutCount: rows.length - pairs.length },
    findings: [
      ...findingsOf(rows, cell.code),
      ...circularFinding(
        cell.code,
        rows.filter((row) => (measured.get(`${cell.id} ${row.month}`)?.dividedByPredictionM3 ?? 0) > 0)
          .length,
      ),
    ],
  };
}

/** Share of the cell under each cover at the end of the month. */
function coversOf(
  record: SiteRecord,
  group: readonly { plotId: string; coverTypeId: string; areaM2: number; fromOn: string; dayCount: number }[],
) {
  const last = new Map<string, (typeof group)[number]>();
  for (const step of group) last.set(step.plotId, step);
  const ends = [...last.values()].map((step) => Number(step.fromOn.slice(8)) + step.dayCount);
  const standing = [...last.values()].filter((_, index) => ends[index] === Math.max(...ends));
  const total = standing.reduce((sum, step) => sum + step.areaM2, 0);
  const shares = new Map<string, number>();
  for (const step of standing) {
    const kind = record.coverTypes.find((type) => type.id === step.coverTypeId)!.kind as CoverKind;
    shares.set(kind, (shares.get(kind) ?? 0) + step.areaM2 / total);
  }
  return [...shares]
    .map(([kind, share]) => ({ kind: kind as CoverKind, name: coverKindNames[kind as CoverKind], share }))
    .sort((a, b) => (a.kind < b.kind ? -1 : 1));
}

/** Stores what the engineer says about a month: a cause with its evidence and how it stands. */
export async function writeNote(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof compareNoteInput>,
) {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const cell = record.cells.find((one) => one.id === input.cellId);
  if (!cell) throw fieldProblem('/cellId', 'Choose a cell of this site.');
  await tx.insert(compareNotes).values({
    organisationId: context.organisationId,
    siteId,
    ...input,
    writtenAt: deps.now().toISOString(),
    writtenById: context.personId,
  });
  await recordChange(tx, context, {
    action: 'note',
    subjectType: 'compare-notes',
    subjectId: input.id,
    sentence: `${cell.code}, ${monthName(input.month)}: ${input.state}, ${input.cause}.`,
    reason: input.note,
    after: input,
  });
  return { id: input.id };
}
