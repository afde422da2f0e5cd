import { createHash } from 'node:crypto';
import { and, eq, sql } from 'drizzle-orm';
import { Problem } from '#shared/problems.ts';
import { idempotencyKeys } from '../db/schema/reporting.ts';
import type { Transaction } from '../db/transaction.ts';
import type { Context, UploadedFile } from './route.ts';

export interface FirstAnswer {
  status: number;
  response: unknown;
}

export const payloadHash = (route: string, body: unknown, file: UploadedFile | undefined): string =>
  createHash('sha256')
    .update(`${route}\n${JSON.stringify(body ?? null)}\n`)
    .update(file?.bytes ?? '')
    .digest('hex');

/**
 * Looks the key up inside the caller's transaction and holds it until the transaction ends.
 * @returns the first answer when the same write was made before, else null
 * @throws Problem `still-being-written` when the same key is in flight, `key-used-for-other-content` for another payload
 */
export async function claimKey(
  tx: Transaction,
  context: Context,
  key: string,
  hash: string,
): Promise<FirstAnswer | null> {
  const lock = await tx.execute<{ held: boolean }>(
    sql`select pg_try_advisory_xact_lock(hashtextextended(${`${context.organisationId}:${key}`}, 0)) as held`,
  );
  if (!lock.rows[0]?.held) {
    throw new Problem(
      'still-being-written',
      'The same request is still being written. Ask again in a moment.',
    );
  }
  const [known] = await tx
    .select()
    .from(idempotencyKeys)
    .where(and(eq(idempotencyKeys.organisationId, context.organisationId), eq(idempotencyKeys.key, key)));
  if (!known) return null;
  if (known.payloadSha256 !== hash || known.personId !== context.personId) {
    throw new Problem(
      'key-used-for-other-content',
      'This Idempotency-Key was used for another request. Nothing was written.',
    );
  }
  return { status: known.status, response: known.response };
}

/** Stores the first answer with the write itself, so that both exist or neither. */
export async function keepAnswer(
  tx: Transaction,
  context: Context,
  key: string,
  route: string,
  hash: string,
  answer: FirstAnswer,
): Promise<void> {
  await tx.insert(idempotencyKeys).values({
    organisationId: context.organisationId,
    key,
    personId: context.personId,
    route,
    payloadSha256: hash,
    status: answer.status,
    response: answer.response ?? null,
  });
}
