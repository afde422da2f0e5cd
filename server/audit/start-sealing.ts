import { sql } from 'drizzle-orm';
import { withOrganisation } from '../db/transaction.ts';
import type { Dependencies } from '../http/route.ts';
import { sealTrail } from './trail-seals.ts';

/** Seals the trail of every organisation about once a second, one round at a time. */
export function startSealing(deps: Dependencies) {
  let running: Promise<void> = Promise.resolve();
  const round = async () => {
    const found = await withOrganisation(deps.database, { organisationId: null, personId: null }, (tx) =>
      tx.execute<{ organisation_id: string }>(sql`select organisation_id from organisations_to_seal()`),
    );
    for (const { organisation_id: organisationId } of found.rows) {
      await withOrganisation(deps.database, { organisationId, personId: null }, (tx) =>
        sealTrail(tx, organisationId),
      );
    }
  };
  let busy = false;
  const timer = setInterval(() => {
    if (busy) return;
    busy = true;
    running = round()
      .catch((error: unknown) => deps.log.warn({ err: error }, 'sealing the trail'))
      .finally(() => {
        busy = false;
      });
  }, 1_000);
  return {
    async stop(): Promise<void> {
      clearInterval(timer);
      await running;
    },
  };
}
