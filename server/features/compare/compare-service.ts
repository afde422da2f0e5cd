import { desc, eq } from 'drizzle-orm';
import type * as z from 'zod';
import { dayNameShort, firstDay, lastDay, monthOfDay } from '#shared/calendar/day.ts';
import { monthName, type Month } from '#shared/calendar/month.ts';
import { fieldProblem } from '#shared/problems.ts';
import { compareMonths } from '#shared/reconciliation/compare-months.ts';
import { findMassBreak } from '#shared/reconciliation/double-mass.ts';
import { compareFindings } from '#shared/reconciliation/findings.ts';
import { correlationAtLag, fitStatistics } from '#shared/reconciliation/fit-statistics.ts';
import { periodTotals } from '#shared/reconciliation/period-totals.ts';
import type { Finding } from '#shared/findings.ts';
import type { compareNoteInput } from '#shared/schemas/balance.ts';
import { coverKindNames, type CoverKind } from '#shared/water-balance/cover-types.ts';
import { completeParameters, type BalanceParameters } from '#shared/water-balance/engine-input.ts';
import type { CompareView } from '#shared/views/balance-view.ts';
import { recordChange } from '../../audit/record-change.ts';
import { compareNotes } from '../../db/schema/balance.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { volumesOfRun } from '../balance/predicted-volumes.ts';
import { currentParameters, predictionRun } from '../balance/run-service.ts';
import { readSite, siteOf, type SiteRecord } from '../sites/site-service.ts';
import { listReturns } from '../ledger/entry-repository.ts';
import { cellEvents } from './cell-events.ts';
import { measuredByCell, type MeasuredMonth } from './measured-service.ts';
import { netPairOf } from './net-pair.ts';

export const listNotes = (tx: Transaction, siteId: string) =>
  tx.select().from(compareNotes).where(eq(compareNotes.siteId, siteId)).orderBy(desc(compareNotes.writtenAt));

/** The double-mass curve is searched over the last three years. @assumed our choice */
const massMonths = 36;

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

const perMm = (value: number, areaM2: number) => (value / areaM2) * 1000;

/**
 * Predicted against measured for one cell. Sums run from the first month of the balance; the rows are the last ones.
 */
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
  const { run, isAccepted, isOutOfDate, readInput } = await predictionRun(tx, context, deps, record);
  const { percentFloorMm } = completeParameters(
    (await currentParameters(tx, context, deps)).values as Partial<BalanceParameters>,
  );
  const { steps, sums: summed, predicted, monthsOf } = await volumesOfRun(tx, run.id);
  const available = monthsOf(cell.id);
  const lastMonth = available.filter((month) => month <= last).at(-1) ?? available.at(-1);
  const months = available.filter((month) => month <= (lastMonth ?? ''));
  const measured = months.length
    ? await measuredByCell(tx, record, months[0]!, months.at(-1)!, predicted)
    : new Map<string, MeasuredMonth>();
  const all = compareMonths(
    months.map((month) => {
      const sum = summed.get(`${cell.id} ${month}`)!;
      return {
        month,
        areaM2: sum.meanAreaM2,
        rainMm: perMm(sum.volumesM3.precipitationMm, sum.meanAreaM2),
        predictedM3: sum.volumesM3.leachateMm,
        measuredM3: measured.get(`${cell.id} ${month}`)?.volumeM3 ?? null,
      };
    }),
    percentFloorMm,
  );
  const rows = all.slice(-monthCount);
  const returned = rows.length
    ? (await listReturns(tx, siteId, firstDay(rows[0]!.month), lastDay(rows.at(-1)!.month))).filter(
        (one) => one.cellId === cell.id,
      )
    : [];
  const notes = (await listNotes(tx, siteId)).filter((note) => note.cellId === cell.id);
  const events = cellEvents(record, cell.id);
  const pairsOf = (from: typeof all) =>
    from.flatMap((row) => (row.measuredM3 === null ? [] : [{ ...row, measuredM3: row.measuredM3 }]));
  const pairs = pairsOf(rows).map((row) => ({ predicted: row.predictedM3, measured: row.measuredM3 }));
  // A bend of months that all lie inside their tolerance is no question.
  const recent = all.slice(-massMonths);
  const massBreak = recent.some((row) => row.isInside === false)
    ? findMassBreak(pairsOf(recent), events)
    : null;
  const dividedCount = rows.filter(
    (row) => (measured.get(`${cell.id} ${row.month}`)?.dividedByPredictionM3 ?? 0) > 0,
  ).length;
  return {
    cell: { id: cell.id, code: cell.code, name: cell.name },
    cells: record.cells.map((one) => ({ code: one.code, name: one.name })),
    run: { ...run, isAccepted, isOutOfDate },
    percentFloorMm,
    firstMonth: months[0] ?? null,
    periods: periodTotals(all, percentFloorMm),
    rows: rows.map((row) => {
      const sum = summed.get(`${cell.id} ${row.month}`)!;
      const own = measured.get(`${cell.id} ${row.month}`);
      const percentOf = (part: number) => (own && own.volumeM3 > 0 ? (100 * part) / own.volumeM3 : 0);
      return {
        ...row,
        aetMm: perMm(sum.volumesM3.aetMm, sum.meanAreaM2),
        storageMm: perMm(sum.volumesM3.soilStoreMm + sum.volumesM3.wasteStoreMm, sum.areaM2),
        estimatedPercent: percentOf(own?.estimatedM3 ?? 0),
        allocatedPercent: percentOf(own?.allocatedM3 ?? 0),
        covers: coversOf(record, steps.get(`${cell.id} ${row.month}`)!),
        events: events
          .filter((event) => monthOfDay(event.onDay) === row.month)
          .map((event) => ({ ...event, when: dayNameShort(event.onDay) })),
        note: notes.find((note) => note.month === row.month) ?? null,
      };
    }),
    statistics: { ...fitStatistics(pairs), leftOutCount: rows.length - pairs.length },
    lags: [0, 1, 2, 3].flatMap((lagMonths) => {
      const found = correlationAtLag(pairs, lagMonths);
      return found ? [{ lagMonths, ...found }] : [];
    }),
    massBreak,
    net: returned.length
      ? netPairOf(
          await readInput(),
          cell.id,
          rows.map((row) => row.month),
          measured,
        )
      : null,
    sumpStorageCount: rows.filter(
      (row) => (measured.get(`${cell.id} ${row.month}`)?.sumpStorageM3 ?? null) !== null,
    ).length,
    receivedM3: rows.reduce(
      (sum, row) => sum + (measured.get(`${cell.id} ${row.month}`)?.receivedM3 ?? 0),
      0,
    ),
    findings: [...compareFindings(rows, cell.code, massBreak), ...circularFinding(cell.code, dividedCount)],
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
