import { firstDay, lastDay } from '#shared/calendar/day.ts';
import { monthRange, addMonths, daysInMonth, type Month } from '#shared/calendar/month.ts';
import { leakDetectionRate } from '#shared/ledger/leak-detection.ts';
import type { BalanceParameters } from '#shared/water-balance/engine-input.ts';
import { asTerms } from '#shared/water-balance/terms.ts';
import { isWetMonth, runoffShare } from '#shared/water-balance/compute-step.ts';
import type { Transaction } from '../../db/transaction.ts';
import * as balanceRepository from '../balance/balance-repository.ts';
import { engineCover } from '../balance/engine-cover.ts';
import { measuredByCell, type MeasuredMonth } from '../compare/measured-service.ts';
import * as entryRepository from '../ledger/entry-repository.ts';
import type { SiteRecord } from '../sites/site-service.ts';
import type { Quarter, QuarterCellMonth, QuarterDay, QuarterStep } from './quarter.ts';

export async function stepsOf(
  tx: Transaction,
  record: SiteRecord,
  runId: string,
  months: Month[],
  parameters: BalanceParameters,
): Promise<QuarterStep[]> {
  const rows = await balanceRepository.listSteps(tx, runId, months[0], months.at(-1));
  return rows
    .map((row) => {
      const type = record.coverTypes.find((one) => one.id === row.coverTypeId)!;
      const cover = engineCover(type);
      return {
        cellCode: record.cells.find((one) => one.id === row.cellId)!.code,
        plotName: record.plots.find((one) => one.id === row.plotId)!.name,
        plotId: row.plotId,
        coverName: cover.name,
        cover,
        month: row.month,
        fromOn: row.fromOn,
        dayCount: row.dayCount,
        areaM2: row.areaM2,
        runoffCoefficient: runoffShare(cover, isWetMonth(row.month, parameters), parameters.runoffFactor),
        terms: asTerms(row.terms),
      };
    })
    .sort(
      (a, b) =>
        a.cellCode.localeCompare(b.cellCode) ||
        a.plotId.localeCompare(b.plotId) ||
        (a.fromOn < b.fromOn ? -1 : 1),
    );
}

/** Predicted and measured of every cell and month; what is not there stays null. */
export function cellMonthsOf(
  record: SiteRecord,
  months: Month[],
  predicted: ReadonlyMap<string, { volumeM3: number; areaM2: number }>,
  measured: ReadonlyMap<string, MeasuredMonth>,
): QuarterCellMonth[] {
  return record.cells.flatMap((cell) =>
    months.map((month) => {
      const key = `${cell.id} ${month}`;
      const own = measured.get(key);
      return {
        cellId: cell.id,
        cellCode: cell.code,
        month,
        areaM2: predicted.get(key)?.areaM2 ?? 0,
        isOpen: cell.openedOn <= lastDay(month),
        predictedM3: predicted.get(key)?.volumeM3 ?? null,
        measuredM3: own?.volumeM3 ?? null,
        estimatedM3: own?.estimatedM3 ?? 0,
        allocatedM3: own?.allocatedM3 ?? 0,
      };
    }),
  );
}

/** Predicted and pumped of the whole site, month by month, for the charts. */
export async function historyOf(
  tx: Transaction,
  record: SiteRecord,
  runId: string,
  last: Month,
): Promise<Quarter['history']> {
  const months = monthRange(addMonths(last, -11), last);
  const predicted = new Map<string, number>();
  for (const step of await balanceRepository.listSteps(tx, runId, months[0], last)) {
    const key = `${step.cellId} ${step.month}`;
    predicted.set(key, (predicted.get(key) ?? 0) + (asTerms(step.terms).leachateMm * step.areaM2) / 1000);
  }
  const measured = await measuredByCell(tx, record, months[0]!, last, predicted);
  return months.flatMap((month) => {
    const cells = record.cells.filter((cell) => predicted.has(`${cell.id} ${month}`));
    const read = cells.flatMap((cell) => measured.get(`${cell.id} ${month}`) ?? []);
    return cells.length
      ? [
          {
            month,
            predictedM3: cells.reduce((sum, cell) => sum + predicted.get(`${cell.id} ${month}`)!, 0),
            measuredM3:
              read.length === cells.length ? read.reduce((sum, one) => sum + one.volumeM3, 0) : null,
          },
        ]
      : [];
  });
}

export async function daysOf(tx: Transaction, record: SiteRecord, months: Month[]): Promise<QuarterDay[]> {
  const entries = await entryRepository.listEntries(
    tx,
    record.site.id,
    firstDay(months[0]!),
    lastDay(months.at(-1)!),
  );
  const reversed = new Set(entries.map((one) => one.reversesId).filter(Boolean));
  const primary = new Map(
    record.sumps
      .filter((sump) => sump.kind === 'primary')
      .map((sump) => [sump.placeId, record.cells.find((cell) => cell.id === sump.cellId)!.code]),
  );
  const place = (id: string) => record.places.find((one) => one.id === id)?.name ?? '';
  return entries
    .filter((one) => one.reversesId === null && !reversed.has(one.id))
    .flatMap((one) => {
      const row = {
        meterCode: record.meters.find((meter) => meter.id === one.meterId)?.code ?? 'ticket',
        siteDay: one.siteDay,
        month: one.siteDay.slice(0, 7),
        basis: one.basis,
        volumeM3: Number(one.volumeM3),
        from: place(one.fromPlaceId),
        to: place(one.toPlaceId),
      };
      const out = primary.get(one.fromPlaceId);
      const into = primary.get(one.toPlaceId);
      const counted = [
        ...(out ? [{ ...row, cellCode: out, counts: 1 }] : []),
        ...(into ? [{ ...row, cellCode: into, counts: -1 }] : []),
      ];
      return counted.length ? counted : [{ ...row, cellCode: '', counts: 0 }];
    });
}

export async function leakDetectionOf(
  tx: Transaction,
  record: SiteRecord,
  months: Month[],
): Promise<Quarter['leakDetection']> {
  const sums = await entryRepository.sumEntriesByMonth(
    tx,
    record.site.id,
    firstDay(months[0]!),
    lastDay(months.at(-1)!),
  );
  return record.sumps
    .filter((sump) => sump.kind === 'leak-detection')
    .flatMap((sump) =>
      months.map((month) => {
        const own = sums.filter((row) => row.fromPlaceId === sump.placeId && row.month === month);
        const volumeM3 = own.length ? own.reduce((sum, row) => sum + Number(row.volumeM3), 0) : null;
        const dayCount = daysInMonth(month);
        return {
          sumpCode: sump.code,
          month,
          volumeM3,
          dayCount,
          lPerHaDay:
            volumeM3 === null
              ? null
              : leakDetectionRate({ volumeM3, days: dayCount, areaM2: Number(sump.areaServedM2) }).lPerHaDay,
          actionRateLPerHaDay: sump.actionRateLPerHaDay === null ? null : Number(sump.actionRateLPerHaDay),
        };
      }),
    );
}
