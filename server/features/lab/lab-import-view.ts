import type { LabRow } from '#shared/lab/lab-row.ts';
import type { LabImportView } from '#shared/views/lab-view.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context } from '../../http/route.ts';
import * as importRepository from '../imports/import-repository.ts';
import { siteOf } from '../sites/site-service.ts';
import * as repository from './lab-repository.ts';
import type { countsOf } from './lab-import-staging.ts';
import { openImport, type StoredReading } from './lab-import-staging.ts';

/** An upload as the check page shows it, in its three bands. */
export async function readLabImport(
  tx: Transaction,
  context: Context,
  importId: string,
): Promise<LabImportView> {
  const siteId = siteOf(context);
  const row = await openImport(tx, context, importId);
  const rows = (await importRepository.listRows(tx, importId)).map((one) => one.payload as LabRow);
  const points = await repository.listSamplePoints(tx, siteId);
  const analyteRows = await repository.listAnalytes(tx);
  return {
    id: row.id,
    fileName: row.fileName,
    fileSha256: row.fileSha256,
    uploadedAt: row.uploadedAt,
    confirmedAt: row.confirmedAt,
    undoneAt: row.undoneAt,
    counts: row.counts as ReturnType<typeof countsOf>,
    reading: row.reading as StoredReading,
    laboratoryId: row.laboratoryId,
    rows: rows.map((one) => ({
      ...one,
      pointCode: points.find((point) => point.id === one.samplePointId)?.code ?? null,
      analyteName: analyteRows.find((analyte) => analyte.id === one.analyteId)?.name ?? null,
    })),
    points: points.map((one) => ({ id: one.id, code: one.code, name: one.name })),
    analytes: analyteRows.map((one) => ({ id: one.id, name: one.name, basis: one.basis })),
  };
}
