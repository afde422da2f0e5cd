import { and, asc, desc, eq, isNull } from 'drizzle-orm';
import { importRows, imports } from '../../db/schema/lab.ts';
import type { Transaction } from '../../db/transaction.ts';

const rowsPerInsert = 4_000;

export const insertImport = (tx: Transaction, row: typeof imports.$inferInsert) =>
  tx.insert(imports).values(row);
export const updateImport = (tx: Transaction, id: string, row: Partial<typeof imports.$inferInsert>) =>
  tx.update(imports).set(row).where(eq(imports.id, id));

export async function findImport(tx: Transaction, siteId: string, id: string) {
  const [row] = await tx
    .select()
    .from(imports)
    .where(and(eq(imports.siteId, siteId), eq(imports.id, id)));
  return row ?? null;
}

export const listImports = (
  tx: Transaction,
  siteId: string,
  kind: 'lab' | 'climate',
  laboratoryId: string | null,
) =>
  tx
    .select()
    .from(imports)
    .where(
      and(
        eq(imports.siteId, siteId),
        eq(imports.kind, kind),
        laboratoryId ? eq(imports.laboratoryId, laboratoryId) : undefined,
      ),
    )
    .orderBy(desc(imports.uploadedAt));

/** A confirmed import of the same bytes that still stands. */
export async function findSameFile(
  tx: Transaction,
  siteId: string,
  kind: 'lab' | 'climate',
  fileSha256: string,
) {
  const rows = await tx
    .select()
    .from(imports)
    .where(
      and(
        eq(imports.siteId, siteId),
        eq(imports.kind, kind),
        eq(imports.fileSha256, fileSha256),
        isNull(imports.undoneAt),
      ),
    );
  return rows.find((row) => row.confirmedAt !== null) ?? null;
}

export async function replaceRows(
  tx: Transaction,
  importId: string,
  rows: (typeof importRows.$inferInsert)[],
): Promise<void> {
  await tx.delete(importRows).where(eq(importRows.importId, importId));
  for (let start = 0; start < rows.length; start += rowsPerInsert)
    await tx.insert(importRows).values(rows.slice(start, start + rowsPerInsert));
}

export const listRows = (tx: Transaction, importId: string) =>
  tx.select().from(importRows).where(eq(importRows.importId, importId)).orderBy(asc(importRows.position));
