import { analyteTemplates } from '#shared/lab/analyte-templates.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import * as repository from './lab-repository.ts';

/** Parameters a new organisation starts with; an organisation that has some keeps its own. */
export async function ensureAnalytes(tx: Transaction, context: Context, deps: Dependencies): Promise<void> {
  if ((await repository.listAnalytes(tx)).length) return;
  await repository.insertAnalytes(
    tx,
    analyteTemplates.map((template) => ({
      organisationId: context.organisationId,
      id: deps.newId(),
      ...template,
    })),
  );
}
