import { and, asc, eq, gte, lte } from 'drizzle-orm';
import {
  analytes,
  labMappings,
  labQualifiers,
  laboratories,
  results,
  samplePoints,
  samplingPlanItems,
} from '../../db/schema/lab.ts';
import type { Transaction } from '../../db/transaction.ts';
import { isLive } from '../readings/reading-repository.ts';

const rowsPerInsert = 1_500;

export const listSamplePoints = (tx: Transaction, siteId: string) =>
  tx.select().from(samplePoints).where(eq(samplePoints.siteId, siteId)).orderBy(asc(samplePoints.code));
export const insertSamplePoint = (tx: Transaction, row: typeof samplePoints.$inferInsert) =>
  tx.insert(samplePoints).values(row);
export const listAnalytes = (tx: Transaction) => tx.select().from(analytes).orderBy(asc(analytes.name));
export const insertAnalytes = (tx: Transaction, rows: (typeof analytes.$inferInsert)[]) =>
  tx.insert(analytes).values(rows);
export const listLaboratories = (tx: Transaction) =>
  tx.select().from(laboratories).orderBy(asc(laboratories.name));
export const insertLaboratory = (tx: Transaction, row: typeof laboratories.$inferInsert) =>
  tx.insert(laboratories).values(row);
export const listQualifiers = (tx: Transaction, laboratoryId: string) =>
  tx
    .select()
    .from(labQualifiers)
    .where(eq(labQualifiers.laboratoryId, laboratoryId))
    .orderBy(asc(labQualifiers.letter));
export const insertQualifier = (tx: Transaction, row: typeof labQualifiers.$inferInsert) =>
  tx.insert(labQualifiers).values(row).onConflictDoNothing();
export const listMappings = (tx: Transaction, laboratoryId: string) =>
  tx.select().from(labMappings).where(eq(labMappings.laboratoryId, laboratoryId));
export const saveMapping = (tx: Transaction, row: typeof labMappings.$inferInsert) =>
  tx
    .insert(labMappings)
    .values(row)
    .onConflictDoUpdate({
      target: [labMappings.organisationId, labMappings.laboratoryId, labMappings.kind, labMappings.fromText],
      set: { toValue: row.toValue },
    });
export const listPlan = (tx: Transaction) => tx.select().from(samplingPlanItems);
export const insertPlanItems = (tx: Transaction, rows: (typeof samplingPlanItems.$inferInsert)[]) =>
  tx.insert(samplingPlanItems).values(rows);

export const listLiveResults = (
  tx: Transaction,
  siteId: string,
  firstDay = '0001-01-01',
  lastDay = '9999-12-31',
) =>
  tx
    .select()
    .from(results)
    .where(
      and(
        eq(results.siteId, siteId),
        gte(results.siteDay, firstDay),
        lte(results.siteDay, lastDay),
        isLive(results),
      ),
    )
    .orderBy(asc(results.siteDay), asc(results.sequence));

/** Every version of the results of a site, replaced ones included. */
export const listAllResults = (tx: Transaction, siteId: string) =>
  tx
    .select()
    .from(results)
    .where(eq(results.siteId, siteId))
    .orderBy(asc(results.siteDay), asc(results.sequence));

export const listResultsOfImport = (tx: Transaction, importId: string) =>
  tx
    .select()
    .from(results)
    .where(and(eq(results.importId, importId), isLive(results)));

export async function insertResults(tx: Transaction, rows: (typeof results.$inferInsert)[]): Promise<void> {
  for (let start = 0; start < rows.length; start += rowsPerInsert)
    await tx.insert(results).values(rows.slice(start, start + rowsPerInsert));
}
