import { monthOfDay, firstDay, lastDay } from '#shared/calendar/day.ts';
import { monthName, type Month } from '#shared/calendar/month.ts';
import { Problem } from '#shared/problems.ts';
import type * as z from 'zod';
import type { closeMonthInput, reopenMonthInput } from '#shared/schemas/lab.ts';
import { recordChange } from '../../audit/record-change.ts';
import { monthClosings } from '../../db/schema/reporting.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import * as balanceRepository from '../balance/balance-repository.ts';
import * as entryRepository from '../ledger/entry-repository.ts';
import { repostMonth } from '../ledger/posting-service.ts';
import { listAdjustments, listReadingsOfDays } from '../readings/reading-repository.ts';
import { readSite, siteDaysOf, siteOf, type SiteRecord } from '../sites/site-service.ts';

/** Readings of the month that are held out of the totals until somebody answers. */
async function countHeldReadings(tx: Transaction, record: SiteRecord, month: Month): Promise<number> {
  if (!record.meters.length) return 0;
  const readings = await listReadingsOfDays(
    tx,
    record.meters.map((meter) => meter.id),
    firstDay(month),
    lastDay(month),
  );
  return readings.filter((reading) => reading.answer === 'held').length;
}

/** What stands in the way of closing a month, as sentences. */
export async function closingObstacles(
  tx: Transaction,
  record: SiteRecord,
  month: Month,
  today: string,
): Promise<string[]> {
  const obstacles: string[] = [];
  if (month >= monthOfDay(today)) obstacles.push(`${monthName(month)} is not over yet.`);
  const held = await countHeldReadings(tx, record, month);
  if (held)
    obstacles.push(
      `${held} ${held === 1 ? 'reading is' : 'readings are'} held until answered. Settle them on the Round page.`,
    );
  return obstacles;
}

/** Closes a month: nothing is posted there any more. Whoever closes is not the author of its estimates, or says why. */
export async function closeMonth(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  month: Month,
  input: z.output<typeof closeMonthInput>,
) {
  const siteId = siteOf(context);
  await entryRepository.lockSiteLedger(tx, siteId);
  const record = await readSite(tx, siteId);
  const today = (await siteDaysOf(tx, siteId)).dayOf(deps.now().getTime());
  if ((await entryRepository.listClosedMonths(tx, siteId)).has(month))
    throw new Problem('already-done', `${monthName(month)} is closed already.`);
  const obstacles = await closingObstacles(tx, record, month, today);
  if (obstacles.length) throw new Problem('not-ready', obstacles.join(' '));
  const estimates = record.meters.length
    ? await listAdjustments(
        tx,
        record.meters.map((meter) => meter.id),
      )
    : [];
  const own = estimates.some(
    (one) =>
      one.recordedById === context.personId &&
      one.fromAt.slice(0, 7) <= month &&
      one.toAt.slice(0, 7) >= month,
  );
  if (own && !input.reason)
    throw new Problem(
      'fields-need-another-look',
      'You made an estimate in this month yourself. Say why you also close it.',
      [
        {
          pointer: '/reason',
          detail: 'You made an estimate in this month yourself. Say why you also close it.',
        },
      ],
    );
  const run = (await balanceRepository.listFrozenRuns(tx, siteId)).find((one) => one.acceptedAt !== null);
  await tx.insert(monthClosings).values({
    organisationId: context.organisationId,
    id: input.id,
    recordedById: context.personId,
    recordedAt: deps.now().toISOString(),
    siteId,
    month,
    act: 'close',
    runId: run?.id ?? null,
    reason: input.reason ?? null,
  });
  await recordChange(tx, context, {
    action: 'close',
    subjectType: 'month-closings',
    subjectId: input.id,
    sentence: `${monthName(month)} was closed.`,
    reason: input.reason,
  });
  return { id: input.id };
}

/** Opens a closed month again; what waited is posted. */
export async function reopenMonth(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  month: Month,
  input: z.output<typeof reopenMonthInput>,
) {
  const siteId = siteOf(context);
  await entryRepository.lockSiteLedger(tx, siteId);
  const record = await readSite(tx, siteId);
  if (!(await entryRepository.listClosedMonths(tx, siteId)).has(month))
    throw new Problem('already-done', `${monthName(month)} is not closed.`);
  await tx.insert(monthClosings).values({
    organisationId: context.organisationId,
    id: input.id,
    recordedById: context.personId,
    recordedAt: deps.now().toISOString(),
    siteId,
    month,
    act: 'reopen',
    reason: input.reason,
  });
  const days = await siteDaysOf(tx, siteId);
  const waiting = (await entryRepository.listPendingChanges(tx, siteId)).filter((one) => one.month === month);
  for (const meterId of new Set(waiting.map((one) => one.meterId).filter((id) => id !== null))) {
    if (record.meters.some((meter) => meter.id === meterId))
      await repostMonth(tx, context, deps, record, meterId, days, firstDay(month), lastDay(month));
  }
  if (waiting.length)
    await entryRepository.markPosted(
      tx,
      waiting.map((one) => one.id),
      deps.now().toISOString(),
    );
  await recordChange(tx, context, {
    action: 'reopen',
    subjectType: 'month-closings',
    subjectId: input.id,
    sentence: `${monthName(month)} was reopened; ${waiting.length} waiting changes were posted.`,
    reason: input.reason,
  });
  return { id: input.id, postedCount: waiting.length };
}
