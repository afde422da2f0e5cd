import { firstDay, lastDay } from '#shared/calendar/day.ts';
import { monthRange, type Month } from '#shared/calendar/month.ts';
import type { Transaction } from '../../db/transaction.ts';
import { sumEntriesByMonth } from '../ledger/entry-repository.ts';
import type { SiteRecord } from '../sites/site-service.ts';

/** What left a cell's primary sumps in a month. */
export interface MeasuredMonth {
  volumeM3: number;
  estimatedM3: number;
  apportionedM3: number;
  /** Part that came through a shared header and was allocated to the cell. */
  allocatedM3: number;
}

/** Share of a header that belongs to a cell in a month: fixed and dated, or in proportion to prediction. */
function headerShare(
  record: SiteRecord,
  placeId: string,
  cellId: string,
  month: Month,
  predicted: ReadonlyMap<string, number>,
): number {
  const live = record.headerShares.filter(
    (share) =>
      share.placeId === placeId &&
      share.fromOn <= lastDay(month) &&
      (share.toOn === null || share.toOn > firstDay(month)),
  );
  const own = live.find((share) => share.cellId === cellId);
  if (!own) return 0;
  if (own.shareFraction !== null) return Number(own.shareFraction);
  const total = live.reduce((sum, share) => sum + (predicted.get(`${share.cellId} ${month}`) ?? 0), 0);
  return total > 0 ? (predicted.get(`${cellId} ${month}`) ?? 0) / total : 1 / live.length;
}

/**
 * Measured leachate per cell and month: pumped from its primary sumps, by the dated share of each shared header,
 * less what those sumps received. Liquid standing in the sump is not counted here (0, and said on the page).
 * @param predicted predicted volume by `cellId month`, m³, for headers shared in proportion to prediction
 * @returns by `cellId month`; a month without any entry of the cell's sumps is absent: missing, not zero
 * @source method section 9
 */
export async function measuredByCell(
  tx: Transaction,
  record: SiteRecord,
  first: Month,
  last: Month,
  predicted: ReadonlyMap<string, number>,
): Promise<Map<string, MeasuredMonth>> {
  const sums = await sumEntriesByMonth(tx, record.site.id, firstDay(first), lastDay(last));
  const result = new Map<string, MeasuredMonth>();
  const add = (cellId: string, month: Month, volumeM3: number, basis: string, isAllocated: boolean) => {
    const key = `${cellId} ${month}`;
    const row = result.get(key) ?? { volumeM3: 0, estimatedM3: 0, apportionedM3: 0, allocatedM3: 0 };
    row.volumeM3 += volumeM3;
    if (basis === 'estimated') row.estimatedM3 += volumeM3;
    if (basis === 'apportioned') row.apportionedM3 += volumeM3;
    if (isAllocated) row.allocatedM3 += volumeM3;
    result.set(key, row);
  };
  const primary = new Map(
    record.sumps.filter((sump) => sump.kind === 'primary').map((sump) => [sump.placeId, sump.cellId]),
  );
  const headers = new Set(record.places.filter((place) => place.kind === 'header').map((place) => place.id));
  for (const row of sums) {
    const volume = Number(row.volumeM3);
    const fromCell = primary.get(row.fromPlaceId);
    const toCell = primary.get(row.toPlaceId);
    if (fromCell) add(fromCell, row.month, volume, row.basis, false);
    if (toCell) add(toCell, row.month, -volume, row.basis, false);
    if (!headers.has(row.fromPlaceId)) continue;
    for (const cell of record.cells) {
      const share = headerShare(record, row.fromPlaceId, cell.id, row.month, predicted);
      if (share > 0) add(cell.id, row.month, volume * share, row.basis, true);
    }
  }
  return result;
}

export const monthsBetween = monthRange;
