import { and, asc, desc, eq, inArray } from 'drizzle-orm';
import { exceedanceClocks, exceedanceNotes, exceedances, limits, permits } from '../../db/schema/limits.ts';
import type { Transaction } from '../../db/transaction.ts';

export const listPermits = (tx: Transaction, siteId: string) =>
  tx.select().from(permits).where(eq(permits.siteId, siteId)).orderBy(asc(permits.fromOn));
export const insertPermit = (tx: Transaction, row: typeof permits.$inferInsert) =>
  tx.insert(permits).values(row);
export const listLimits = (tx: Transaction, permitIds: string[]) =>
  permitIds.length
    ? tx
        .select()
        .from(limits)
        .where(inArray(limits.permitId, permitIds))
        .orderBy(asc(limits.citation), asc(limits.statistic))
    : Promise.resolve([]);
export const insertLimits = (tx: Transaction, rows: (typeof limits.$inferInsert)[]) =>
  tx.insert(limits).values(rows);
export const confirmLimit = (tx: Transaction, id: string, confirmedById: string, confirmedAt: string) =>
  tx.update(limits).set({ confirmedById, confirmedAt }).where(eq(limits.id, id));

export const listExceedances = (tx: Transaction, siteId: string) =>
  tx.select().from(exceedances).where(eq(exceedances.siteId, siteId)).orderBy(desc(exceedances.seenAt));
export async function insertExceedance(
  tx: Transaction,
  row: typeof exceedances.$inferInsert,
): Promise<boolean> {
  const made = await tx
    .insert(exceedances)
    .values(row)
    .onConflictDoNothing()
    .returning({ id: exceedances.id });
  return made.length > 0;
}
export const closeExceedance = (
  tx: Transaction,
  id: string,
  row: { closedAt: string; closedById: string; cause: string },
) => tx.update(exceedances).set(row).where(eq(exceedances.id, id));
export const listClocks = (tx: Transaction, exceedanceIds: string[]) =>
  exceedanceIds.length
    ? tx
        .select()
        .from(exceedanceClocks)
        .where(inArray(exceedanceClocks.exceedanceId, exceedanceIds))
        .orderBy(asc(exceedanceClocks.dueAt))
    : Promise.resolve([]);
export const insertClocks = (tx: Transaction, rows: (typeof exceedanceClocks.$inferInsert)[]) =>
  tx.insert(exceedanceClocks).values(rows);
export const finishClock = (
  tx: Transaction,
  id: string,
  row: { doneAt: string; doneById: string; doneNote: string },
) =>
  tx
    .update(exceedanceClocks)
    .set(row)
    .where(and(eq(exceedanceClocks.id, id)));
export const insertNote = (tx: Transaction, row: typeof exceedanceNotes.$inferInsert) =>
  tx.insert(exceedanceNotes).values(row);
export const listExceedanceNotes = (tx: Transaction, exceedanceIds: string[]) =>
  exceedanceIds.length
    ? tx
        .select()
        .from(exceedanceNotes)
        .where(inArray(exceedanceNotes.exceedanceId, exceedanceIds))
        .orderBy(asc(exceedanceNotes.writtenAt))
    : Promise.resolve([]);
