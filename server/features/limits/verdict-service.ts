import { firstDay, lastDay, monthDays } from '#shared/calendar/day.ts';
import type { Month } from '#shared/calendar/month.ts';
import { evaluateLimit, type LimitFacts, type Verdict } from '#shared/limits/evaluate-limit.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { LabRow } from '#shared/lab/lab-row.ts';
import * as importRepository from '../imports/import-repository.ts';
import { listAnalytes, listLiveResults, listSamplePoints } from '../lab/lab-repository.ts';
import { listEntries } from '../ledger/entry-repository.ts';
import * as repository from './limit-repository.ts';

export type LimitRow = Awaited<ReturnType<typeof repository.listLimits>>[number];

export interface JudgedLimit {
  limit: LimitRow;
  month: Month;
  pointCode: string;
  analyteName: string;
  verdict: Verdict;
}

type Results = Awaited<ReturnType<typeof listLiveResults>>;

/** Flow of each day through a place: measured entries only, apportioned days are not a day's measurement. */
function flowsOf(
  entries: Awaited<ReturnType<typeof listEntries>>,
  placeId: string | null,
): Map<string, number> {
  const flows = new Map<string, number>();
  const notMeasured = new Set<string>();
  for (const entry of entries.filter((one) => one.toPlaceId === placeId)) {
    flows.set(entry.siteDay, (flows.get(entry.siteDay) ?? 0) + Number(entry.volumeM3));
    if (entry.basis !== 'measured' && entry.reversesId === null) notMeasured.add(entry.siteDay);
  }
  for (const day of notMeasured) flows.delete(day);
  return flows;
}

function factsOf(
  limit: LimitRow,
  month: Month,
  results: Results,
  entries: Awaited<ReturnType<typeof listEntries>>,
  outfallPlaceId: string | null,
  heldCount: number,
): LimitFacts {
  const own = results.filter(
    (row) =>
      row.samplePointId === limit.samplePointId &&
      row.analyteId === limit.analyteId &&
      row.fraction === limit.fraction &&
      row.isCounted &&
      row.value !== null &&
      row.siteDay >= firstDay(month) &&
      row.siteDay <= lastDay(month),
  );
  const flows = flowsOf(entries, limit.flowPlaceId ?? outfallPlaceId);
  const days = monthDays(month);
  return {
    results: own.map((row) => ({
      id: row.id,
      siteDay: row.siteDay,
      comparator: row.comparator,
      value: row.value!,
    })),
    flowM3ByDay: new Map([...flows].map(([day, flow]) => [day, flow.toFixed(6)])),
    isNoDischarge: days.every((day) => flows.get(day) === 0),
    heldCount,
  };
}

/** Held rows of confirmed uploads that would belong to a limit, by sample point and parameter. */
async function countHeld(tx: Transaction, siteId: string): Promise<Map<string, number>> {
  const counts = new Map<string, number>();
  for (const upload of await importRepository.listImports(tx, siteId, 'lab', null)) {
    if (!upload.confirmedAt || upload.undoneAt || !(upload.counts as { held?: number }).held) continue;
    for (const row of await importRepository.listRows(tx, upload.id)) {
      const payload = row.payload as LabRow;
      if (row.state !== 'held' || !payload.samplePointId || !payload.analyteId || !payload.sampledOn)
        continue;
      const key = `${payload.samplePointId} ${payload.analyteId} ${payload.sampledOn.slice(0, 7)}`;
      counts.set(key, (counts.get(key) ?? 0) + 1);
    }
  }
  return counts;
}

/** The verdict of every limit in force for each of the months, with its working. */
export async function judgeMonths(
  tx: Transaction,
  siteId: string,
  months: readonly Month[],
): Promise<JudgedLimit[]> {
  if (!months.length) return [];
  const permitRows = await repository.listPermits(tx, siteId);
  const limitRows = await repository.listLimits(
    tx,
    permitRows.map((permit) => permit.id),
  );
  if (!limitRows.length) return [];
  const [first, last] = [firstDay(months[0]!), lastDay(months.at(-1)!)];
  const results = await listLiveResults(tx, siteId, first, last);
  const entries = await listEntries(tx, siteId, first, last);
  const points = await listSamplePoints(tx, siteId);
  const analytes = await listAnalytes(tx);
  const held = await countHeld(tx, siteId);
  return months.flatMap((month) =>
    limitRows
      .filter(
        (limit) => limit.fromOn <= lastDay(month) && (limit.toOn === null || limit.toOn > firstDay(month)),
      )
      .map((limit) => {
        const point = points.find((one) => one.id === limit.samplePointId);
        const facts = factsOf(
          limit,
          month,
          results,
          entries,
          point?.placeId ?? null,
          held.get(`${limit.samplePointId} ${limit.analyteId} ${month}`) ?? 0,
        );
        return {
          limit,
          month,
          pointCode: point?.code ?? '',
          analyteName: analytes.find((one) => one.id === limit.analyteId)?.name ?? '',
          verdict: evaluateLimit(limit, facts),
        };
      }),
  );
}
