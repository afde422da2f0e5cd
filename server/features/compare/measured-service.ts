import { firstDay, lastDay } from '#shared/calendar/day.ts';
import type { Month } from '#shared/calendar/month.ts';
import type { Transaction } from '../../db/transaction.ts';
import { sumpStorageChangeM3 } from '#shared/reconciliation/sump-storage.ts';
import { listCondensate, listSumpLevels, sumEntriesByMonth } from '../ledger/entry-repository.ts';
import type { SiteRecord } from '../sites/site-service.ts';

/** What left a cell's primary sumps in a month. */
export interface MeasuredMonth {
  volumeM3: number;
  estimatedM3: number;
  apportionedM3: number;
  /** Part that came through a shared header and was allocated to the cell. */
  allocatedM3: number;
  /** Part of it that was divided in proportion to the prediction: it cannot test the prediction of one cell. */
  dividedByPredictionM3: number;
  /** Condensate and wash-down led to its sumps, taken off. */
  receivedM3: number;
  /** Change of liquid standing in its sumps, counted; null where no sump has levels and dimensions for it. */
  sumpStorageM3: number | null;
}

interface HeaderShare {
  fraction: number;
  isByPrediction: boolean;
}

/** Share of a header that belongs to a cell in a month: fixed and dated, or in proportion to prediction; 0 where there is none. */
function headerShare(
  record: SiteRecord,
  placeId: string,
  cellId: string,
  month: Month,
  predicted: ReadonlyMap<string, number>,
): HeaderShare {
  const live = record.headerShares.filter(
    (share) =>
      share.placeId === placeId &&
      share.fromOn <= lastDay(month) &&
      (share.toOn === null || share.toOn > firstDay(month)),
  );
  const own = live.find((share) => share.cellId === cellId);
  if (!own) return { fraction: 0, isByPrediction: false };
  if (own.shareFraction !== null) return { fraction: Number(own.shareFraction), isByPrediction: false };
  const known = live.map((share) => predicted.get(`${share.cellId} ${month}`));
  if (known.some((value) => value === undefined)) return { fraction: 0, isByPrediction: true };
  const total = known.reduce<number>((sum, value) => sum + value!, 0);
  return {
    fraction: total > 0 ? predicted.get(`${cellId} ${month}`)! / total : 1 / live.length,
    isByPrediction: true,
  };
}

/**
 * Measured leachate per cell and month: pumped from its primary sumps, by the dated share of each shared header,
 * less what those sumps received, plus the change of liquid standing in them where levels and dimensions allow it.
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
  const add = (cellId: string, month: Month, volumeM3: number, basis: string, share: HeaderShare | null) => {
    const key = `${cellId} ${month}`;
    const row = result.get(key) ?? {
      volumeM3: 0,
      estimatedM3: 0,
      apportionedM3: 0,
      allocatedM3: 0,
      dividedByPredictionM3: 0,
      receivedM3: 0,
      sumpStorageM3: null,
    };
    row.volumeM3 += volumeM3;
    if (basis === 'estimated') row.estimatedM3 += volumeM3;
    if (basis === 'apportioned') row.apportionedM3 += volumeM3;
    if (share) row.allocatedM3 += volumeM3;
    if (share?.isByPrediction) row.dividedByPredictionM3 += volumeM3;
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
    if (fromCell) add(fromCell, row.month, volume, row.basis, null);
    if (toCell) add(toCell, row.month, -volume, row.basis, null);
    if (!headers.has(row.fromPlaceId)) continue;
    for (const cell of record.cells) {
      const share = headerShare(record, row.fromPlaceId, cell.id, row.month, predicted);
      if (share.fraction > 0) add(cell.id, row.month, volume * share.fraction, row.basis, share);
    }
  }
  await correctForSumps(tx, record, result);
  return result;
}

/** Takes off condensate and wash-down, and counts the liquid standing in the sumps, where a month was measured. */
async function correctForSumps(
  tx: Transaction,
  record: SiteRecord,
  result: Map<string, MeasuredMonth>,
): Promise<void> {
  const sumps = record.sumps.filter((sump) => sump.kind === 'primary');
  const ids = sumps.map((sump) => sump.id);
  const cellOf = new Map(sumps.map((sump) => [sump.id, sump.cellId]));
  for (const row of await listCondensate(tx, ids)) {
    const month = result.get(`${cellOf.get(row.sumpId)} ${row.month}`);
    if (!month || row.kind === 'condensate-to-layer') continue;
    month.receivedM3 += Number(row.volumeM3);
    month.volumeM3 -= Number(row.volumeM3);
  }
  const levels = await listSumpLevels(tx, ids);
  for (const sump of sumps) {
    const own = levels
      .filter((level) => level.sumpId === sump.id)
      .map((level) => ({ siteDay: level.siteDay, levelM: Number(level.levelM) }));
    if (!own.length) continue;
    const size = {
      areaM2: sump.sumpAreaM2 === null ? null : Number(sump.sumpAreaM2),
      porosityFraction: sump.stonePorosityFraction === null ? null : Number(sump.stonePorosityFraction),
    };
    for (const [key, month] of result) {
      if (!key.startsWith(sump.cellId)) continue;
      const changeM3 = sumpStorageChangeM3(size, own, key.slice(-7));
      if (changeM3 === null) continue;
      month.sumpStorageM3 = (month.sumpStorageM3 ?? 0) + changeM3;
      month.volumeM3 += changeM3;
    }
  }
}
