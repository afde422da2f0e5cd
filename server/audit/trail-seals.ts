import { createHash } from 'node:crypto';
import { asc, desc, eq, gt, sql } from 'drizzle-orm';
import { trailEntries, trailSeals } from '../db/schema/reporting.ts';
import type { Transaction } from '../db/transaction.ts';
import { trailLock } from './record-change.ts';

type TrailRow = typeof trailEntries.$inferSelect;

const firstHash = '0'.repeat(64);

/** Object keys sorted at every depth, because the database does not keep their order. */
function canonical(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(canonical);
  if (value === null || typeof value !== 'object') return value;
  return Object.fromEntries(
    Object.entries(value)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, inner]) => [key, canonical(inner)]),
  );
}

/** SHA-256 over the hash before and every row of the batch in order. */
export function sealHash(previousHash: string, rows: readonly TrailRow[]): string {
  const hash = createHash('sha256').update(previousHash);
  for (const row of rows)
    hash.update(`\n${JSON.stringify(canonical({ ...row, at: new Date(row.at).toISOString() }))}`);
  return hash.digest('hex');
}

/**
 * Chains every trail row that is not sealed yet. Waits briefly for writers, so that no row can appear behind a seal.
 * @returns how many rows were sealed; 0 when there was nothing to do or writers were busy
 */
export async function sealTrail(tx: Transaction, organisationId: string): Promise<number> {
  const lock = await tx.execute<{ held: boolean }>(
    sql`select pg_try_advisory_xact_lock(${trailLock(organisationId)}) as held`,
  );
  if (!lock.rows[0]?.held) return 0;
  const [last] = await tx.select().from(trailSeals).orderBy(desc(trailSeals.number)).limit(1);
  const rows = await tx
    .select()
    .from(trailEntries)
    .where(gt(trailEntries.sequence, last?.lastSequence ?? 0))
    .orderBy(asc(trailEntries.sequence));
  if (!rows.length) return 0;
  const previousHash = last?.hash ?? firstHash;
  await tx.insert(trailSeals).values({
    organisationId,
    number: (last?.number ?? 0) + 1,
    firstSequence: rows[0]!.sequence,
    lastSequence: rows.at(-1)!.sequence,
    rowCount: rows.length,
    previousHash,
    hash: sealHash(previousHash, rows),
  });
  return rows.length;
}

export interface TrailCheck {
  sealedCount: number;
  unsealedCount: number;
  headHash: string;
  /** Sentence naming the first batch that does not agree, or null. */
  firstFault: string | null;
}

/** Recomputes the whole chain and names the first batch that does not agree with what was sealed. */
export async function checkTrail(tx: Transaction, organisationId: string): Promise<TrailCheck> {
  const seals = await tx
    .select()
    .from(trailSeals)
    .where(eq(trailSeals.organisationId, organisationId))
    .orderBy(asc(trailSeals.number));
  const rows = await tx
    .select()
    .from(trailEntries)
    .where(eq(trailEntries.organisationId, organisationId))
    .orderBy(asc(trailEntries.sequence));
  let previousHash = firstHash;
  let sealedCount = 0;
  let position = 0;
  for (const [index, seal] of seals.entries()) {
    const batch: TrailRow[] = [];
    while (position < rows.length && rows[position]!.sequence <= seal.lastSequence)
      batch.push(rows[position++]!);
    const agrees =
      seal.number === index + 1 &&
      seal.previousHash === previousHash &&
      batch.length === seal.rowCount &&
      sealHash(previousHash, batch) === seal.hash;
    if (!agrees) {
      return {
        sealedCount,
        unsealedCount: rows.length - position,
        headHash: previousHash,
        firstFault: `Batch ${seal.number}, rows ${seal.firstSequence} to ${seal.lastSequence}, differs from what was sealed on ${seal.sealedAt}.`,
      };
    }
    previousHash = seal.hash;
    sealedCount += batch.length;
  }
  return { sealedCount, unsealedCount: rows.length - position, headHash: previousHash, firstFault: null };
}
