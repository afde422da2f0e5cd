import { and, asc, desc, eq, inArray, sql } from 'drizzle-orm';
import { balanceRuns, balanceSteps, parameterSets } from '../../db/schema/balance.ts';
import type { Transaction } from '../../db/transaction.ts';

const rowsPerInsert = 4_000;

export async function findCurrentParameterSet(tx: Transaction, siteId: string) {
  const [row] = await tx
    .select()
    .from(parameterSets)
    .where(and(eq(parameterSets.siteId, siteId), eq(parameterSets.isCurrent, true)));
  return row ?? null;
}

export const listParameterSets = (tx: Transaction, siteId: string) =>
  tx
    .select()
    .from(parameterSets)
    .where(eq(parameterSets.siteId, siteId))
    .orderBy(desc(parameterSets.createdAt));
export const insertParameterSet = (tx: Transaction, row: typeof parameterSets.$inferInsert) =>
  tx.insert(parameterSets).values(row);
export const confirmParameterSet = (
  tx: Transaction,
  id: string,
  confirmedById: string,
  confirmedAt: string,
) => tx.update(parameterSets).set({ confirmedById, confirmedAt }).where(eq(parameterSets.id, id));

/** Makes one set the site's current one. */
export async function makeCurrent(tx: Transaction, siteId: string, id: string): Promise<void> {
  await tx
    .update(parameterSets)
    .set({ isCurrent: false })
    .where(and(eq(parameterSets.siteId, siteId), eq(parameterSets.isCurrent, true)));
  await tx.update(parameterSets).set({ isCurrent: true }).where(eq(parameterSets.id, id));
}

const runColumns = {
  id: balanceRuns.id,
  kind: balanceRuns.kind,
  number: balanceRuns.number,
  parameterSetId: balanceRuns.parameterSetId,
  engineVersion: balanceRuns.engineVersion,
  inputSha256: balanceRuns.inputSha256,
  problem: balanceRuns.problem,
  warnings: balanceRuns.warnings,
  computedAt: balanceRuns.computedAt,
  frozenById: balanceRuns.frozenById,
  acceptedById: balanceRuns.acceptedById,
  acceptedAt: balanceRuns.acceptedAt,
  note: balanceRuns.note,
};

export async function findWorkingRun(tx: Transaction, siteId: string) {
  const [row] = await tx
    .select(runColumns)
    .from(balanceRuns)
    .where(and(eq(balanceRuns.siteId, siteId), eq(balanceRuns.kind, 'working')));
  return row ?? null;
}

export const listFrozenRuns = (tx: Transaction, siteId: string) =>
  tx
    .select(runColumns)
    .from(balanceRuns)
    .where(and(eq(balanceRuns.siteId, siteId), eq(balanceRuns.kind, 'frozen')))
    .orderBy(desc(balanceRuns.number));

export async function findRun(tx: Transaction, siteId: string, id: string) {
  const [row] = await tx
    .select()
    .from(balanceRuns)
    .where(and(eq(balanceRuns.siteId, siteId), eq(balanceRuns.id, id)));
  return row ?? null;
}

export const insertRun = (tx: Transaction, row: typeof balanceRuns.$inferInsert) =>
  tx.insert(balanceRuns).values(row);
export const acceptRun = (tx: Transaction, id: string, acceptedById: string, acceptedAt: string) =>
  tx.update(balanceRuns).set({ acceptedById, acceptedAt }).where(eq(balanceRuns.id, id));

export async function deleteWorkingRun(tx: Transaction, siteId: string): Promise<void> {
  const rows = await tx
    .select({ id: balanceRuns.id })
    .from(balanceRuns)
    .where(and(eq(balanceRuns.siteId, siteId), eq(balanceRuns.kind, 'working')));
  if (!rows.length) return;
  const ids = rows.map((row) => row.id);
  await tx.delete(balanceSteps).where(inArray(balanceSteps.runId, ids));
  await tx.delete(balanceRuns).where(inArray(balanceRuns.id, ids));
}

export async function insertSteps(
  tx: Transaction,
  rows: (typeof balanceSteps.$inferInsert)[],
): Promise<void> {
  for (let start = 0; start < rows.length; start += rowsPerInsert)
    await tx.insert(balanceSteps).values(rows.slice(start, start + rowsPerInsert));
}

export const listSteps = (tx: Transaction, runId: string, firstMonth = '0000-01', lastMonth = '9999-12') =>
  tx
    .select()
    .from(balanceSteps)
    .where(
      and(eq(balanceSteps.runId, runId), sql`${balanceSteps.month} between ${firstMonth} and ${lastMonth}`),
    )
    .orderBy(asc(balanceSteps.month), asc(balanceSteps.fromOn));

/** One computation of a site's working run at a time, until the transaction ends. */
export const lockWorkingRun = (tx: Transaction, siteId: string) =>
  tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`run:${siteId}`}, 0))`);
