import type * as z from 'zod';
import { counted } from '#shared/count-words.ts';
import { dayName, monthOfDay } from '#shared/calendar/day.ts';
import { monthName } from '#shared/calendar/month.ts';
import type { LabRow } from '#shared/lab/lab-row.ts';
import { readLabSheets } from '#shared/lab/read-lab-sheet.ts';
import { resolveLabRows } from '#shared/lab/resolve-lab-rows.ts';
import { Problem, fieldProblem } from '#shared/problems.ts';
import type { labAnswerInput, labUploadInput } from '#shared/schemas/lab.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import { sha256Of } from '../../files/file-store.ts';
import type { Context, Dependencies, UploadedFile } from '../../http/route.ts';
import { readSheet } from '../../spreadsheets/read-sheet.ts';
import * as importRepository from '../imports/import-repository.ts';
import { insertPendingChange, listClosedMonths, lockSiteLedger } from '../ledger/entry-repository.ts';
import { openExceedances } from '../limits/exceedance-service.ts';
import { siteOf } from '../sites/site-service.ts';
import * as repository from './lab-repository.ts';
import { previewOf, catalogOf, openImport, stage, today, type StoredReading } from './lab-import-staging.ts';

/** The same bytes twice are one import. */
async function refuseSameFile(tx: Transaction, siteId: string, sha256: string): Promise<void> {
  const same = await importRepository.findSameFile(tx, siteId, 'lab', sha256);
  if (same)
    throw new Problem(
      'already-done',
      `This file was imported on ${dayName(same.confirmedAt!.slice(0, 10))} already. There is nothing to do.`,
    );
}

const isSameOutcome = (a: LabRow, b: LabRow): boolean =>
  a.state === b.state &&
  a.value === b.value &&
  a.unit === b.unit &&
  a.analyteId === b.analyteId &&
  a.samplePointId === b.samplePointId &&
  a.supersedesId === b.supersedesId;

/** Reads the staged rows again against the record as it is now. Nothing is in the record yet. */
export async function restageResults(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  importId: string,
) {
  const row = await openImport(tx, context, importId);
  if (row.confirmedAt) throw new Problem('already-done', 'This upload is written already.');
  const siteId = siteOf(context);
  const reading = row.reading as StoredReading;
  const counts = await stage(
    tx,
    context,
    deps,
    importId,
    (await importRepository.listRows(tx, importId)).map((one) => one.payload as LabRow),
    await catalogOf(tx, siteId, row.laboratoryId!, await today(tx, siteId, deps), reading),
    reading.skipped.length,
  );
  return { id: importId, counts };
}

/** Takes a laboratory's sheet: kept byte for byte, read in a child process, staged. Nothing is in the record yet. */
export async function uploadResults(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof labUploadInput>,
  file: UploadedFile | undefined,
) {
  const siteId = siteOf(context);
  if (!file) throw new Problem('file-not-readable', 'Choose a file to upload.');
  if (context.laboratoryId && context.laboratoryId !== input.laboratoryId)
    throw fieldProblem('/laboratoryId', 'You upload for your own laboratory.');
  if (!(await repository.listLaboratories(tx)).some((one) => one.id === input.laboratoryId))
    throw fieldProblem('/laboratoryId', 'Choose the laboratory.');
  const sha256 = sha256Of(file.bytes);
  await refuseSameFile(tx, siteId, sha256);
  const read = await readSheet(file);
  const reading = readLabSheets(read.sheets);
  if (!reading.layout || !reading.rows.length)
    throw new Problem(
      'file-not-readable',
      'No table of results was found. It needs a column of parameters, and results beside them or under sampling dates.',
    );
  await deps.files.put(file.bytes);
  const stored: StoredReading = {
    shape: reading.layout.shape,
    jobNumber: reading.jobNumber,
    notes: read.notes,
    skipped: reading.skipped,
    qualifierKey: reading.qualifierKey,
    headerRow: reading.layout.headerRow,
    dateOrder: null,
    equalToLimit: null,
    ...previewOf(read, reading),
  };
  await importRepository.insertImport(tx, {
    organisationId: context.organisationId,
    id: input.id,
    siteId,
    kind: 'lab',
    laboratoryId: input.laboratoryId,
    fileName: file.name.slice(0, 255),
    fileSha256: sha256,
    byteCount: file.bytes.length,
    jobNumber: reading.jobNumber,
    reading: stored,
    counts: {},
    uploadedById: context.personId,
    uploadedAt: deps.now().toISOString(),
  });
  const counts = await stage(
    tx,
    context,
    deps,
    input.id,
    reading.rows,
    await catalogOf(tx, siteId, input.laboratoryId, await today(tx, siteId, deps), stored),
    reading.skipped.length,
  );
  await recordChange(tx, context, {
    action: 'upload',
    subjectType: 'imports',
    subjectId: input.id,
    sentence: `Laboratory file ${file.name} was uploaded: ${counts.read} rows, ${counts.held} held.`,
    after: { sha256, counts },
  });
  return { id: input.id, counts };
}

/** Remembers an answer for the laboratory and reads the staged rows again. */
export async function answerQuestion(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  importId: string,
  input: z.output<typeof labAnswerInput>,
) {
  const row = await openImport(tx, context, importId);
  if (row.confirmedAt) throw new Problem('already-done', 'This upload is written already.');
  const laboratoryId = row.laboratoryId!;
  const reading = row.reading as StoredReading;
  if (input.kind === 'qualifier') {
    await repository.insertQualifier(tx, {
      organisationId: context.organisationId,
      id: deps.newId(),
      laboratoryId,
      letter: input.fromText.toUpperCase(),
      meaning: input.toValue as 'non-detect',
      wording: reading.qualifierKey.find((one) => one.letter === input.fromText)?.words ?? null,
    });
  } else if (input.kind === 'date-order') {
    reading.dateOrder = input.toValue === 'month-first' ? 'month-first' : 'day-first';
    await importRepository.updateImport(tx, importId, { reading });
  } else if (input.kind === 'equal-to-limit') {
    reading.equalToLimit = input.toValue === 'below' ? 'below' : 'measured';
    await importRepository.updateImport(tx, importId, { reading });
  } else {
    await repository.saveMapping(tx, {
      organisationId: context.organisationId,
      id: deps.newId(),
      laboratoryId,
      kind: input.kind,
      fromText: input.fromText,
      toValue: input.toValue,
    });
  }
  const { counts } = await restageResults(tx, context, deps, importId);
  await recordChange(tx, context, {
    action: 'answer',
    subjectType: 'imports',
    subjectId: importId,
    sentence: `"${input.fromText}" of this laboratory means ${input.toValue}.`,
    after: input,
  });
  return { id: importId, counts };
}

function resultRow(
  context: Context,
  deps: Dependencies,
  siteId: string,
  laboratoryId: string,
  importId: string,
  row: LabRow,
) {
  return {
    organisationId: context.organisationId,
    id: deps.newId(),
    recordedById: context.personId,
    recordedAt: deps.now().toISOString(),
    siteId,
    samplePointId: row.samplePointId!,
    analyteId: row.analyteId!,
    fraction: row.fraction,
    laboratoryId,
    importId,
    sheet: row.sheet,
    cell: row.cell,
    sampledOn: row.sampledOn!,
    siteDay: row.sampledOn!,
    rawText: row.resultText,
    rawUnit: row.unitText,
    comparator: row.comparator,
    value: row.value,
    unit: row.unit,
    reportingLimit: row.reportingLimit,
    detectionLimit: row.detectionLimit,
    qualifier: row.qualifier,
    qualifierMeaning: row.qualifierMeaning,
    missingReason: row.missingReason,
    printedDecimals: row.printedDecimals,
    isCounted: row.missingReason === null,
    notCountedReason: row.missingReason,
    supersedesId: row.supersedesId,
    reason: row.supersedesId ? 'Revised by the laboratory' : null,
  };
}

/** Writes the good rows in this transaction, keeps the held ones, and looks at the limits they touch. */
export async function confirmResults(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  importId: string,
) {
  const siteId = siteOf(context);
  await lockSiteLedger(tx, siteId);
  const row = await openImport(tx, context, importId);
  if (row.confirmedAt) throw new Problem('already-done', 'This upload is written already.');
  if (row.undoneAt) throw new Problem('already-done', 'This upload was discarded.');
  await refuseSameFile(tx, siteId, row.fileSha256);
  const staged = (await importRepository.listRows(tx, importId)).map((one) => one.payload as LabRow);
  const receivedOn = await today(tx, siteId, deps);
  const rows = resolveLabRows(
    staged,
    await catalogOf(tx, siteId, row.laboratoryId!, receivedOn, row.reading as StoredReading),
  );
  if (rows.some((one, index) => !isSameOutcome(one, staged[index]!)))
    throw new Problem(
      'changed-meanwhile',
      'The record or the answers of the laboratory changed since this upload was read. Nothing was written: read it again, then look at what would be written now.',
    );
  const good = rows.filter((one) => one.state === 'ok' || one.state === 'warned');
  if (!good.length)
    throw new Problem(
      'not-ready',
      'No row can be written yet. Answer the questions first, or leave the upload as it is.',
    );
  await repository.insertResults(
    tx,
    good.map((one) => resultRow(context, deps, siteId, row.laboratoryId!, importId, one)),
  );
  await importRepository.updateImport(tx, importId, {
    confirmedAt: deps.now().toISOString(),
    confirmedById: context.personId,
  });
  const closed = await listClosedMonths(tx, siteId);
  for (const month of new Set(good.map((one) => monthOfDay(one.sampledOn!)))) {
    if (closed.has(month))
      await insertPendingChange(tx, {
        organisationId: context.organisationId,
        id: deps.newId(),
        siteId,
        month,
        factId: importId,
        sentence: `Results of ${row.fileName} arrived after ${monthName(month)} was closed. They count; an issued report of the month becomes stale.`,
      });
  }
  const heldCount = rows.filter((one) => one.state === 'held').length;
  await recordChange(tx, context, {
    action: 'confirm',
    subjectType: 'imports',
    subjectId: importId,
    sentence: `${counted(good.length, 'result was', 'results were')} written from ${row.fileName}; ${counted(heldCount, 'row stays', 'rows stay')} held.`,
    after: row.counts,
  });
  const exceedances = await openExceedances(tx, context, deps, [
    ...new Set(good.map((one) => monthOfDay(one.sampledOn!))),
  ]);
  return { id: importId, writtenCount: good.length, heldCount, exceedanceCount: exceedances };
}

/** Lays an upload aside that was never written: its file and rows are kept, nothing waits for it any more. */
export async function discardResults(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  importId: string,
) {
  const row = await openImport(tx, context, importId);
  if (row.confirmedAt || row.undoneAt)
    throw new Problem(
      'already-done',
      row.confirmedAt ? 'This upload is written: undo it instead.' : 'This upload was discarded already.',
    );
  await importRepository.updateImport(tx, importId, {
    undoneAt: deps.now().toISOString(),
    undoneById: context.personId,
  });
  await recordChange(tx, context, {
    action: 'discard',
    subjectType: 'imports',
    subjectId: importId,
    sentence: `The upload of ${row.fileName} was discarded unwritten.`,
  });
  return { id: importId };
}

/** Voids every result of an upload by rows that say so; refused where a month is closed. */
export async function undoResults(tx: Transaction, context: Context, deps: Dependencies, importId: string) {
  const siteId = siteOf(context);
  const row = await openImport(tx, context, importId);
  if (!row.confirmedAt || row.undoneAt)
    throw new Problem(
      'already-done',
      row.undoneAt ? 'This upload was undone already.' : 'This upload was never written.',
    );
  const live = await repository.listResultsOfImport(tx, importId);
  const closed = await listClosedMonths(tx, siteId);
  const closedMonth = live.map((one) => monthOfDay(one.siteDay)).find((month) => closed.has(month));
  if (closedMonth)
    throw new Problem(
      'month-is-closed',
      `${monthName(closedMonth)} is closed. Ask the laboratory for a revised file instead; it is kept beside the old values.`,
    );
  await repository.insertResults(
    tx,
    live.map(({ sequence: _sequence, recordedAt: _recordedAt, ...one }) => ({
      ...one,
      id: deps.newId(),
      recordedById: context.personId,
      supersedesId: one.id,
      isVoid: 'yes' as const,
      reason: `Import of ${row.fileName} undone`,
    })),
  );
  await importRepository.updateImport(tx, importId, {
    undoneAt: deps.now().toISOString(),
    undoneById: context.personId,
  });
  await recordChange(tx, context, {
    action: 'undo',
    subjectType: 'imports',
    subjectId: importId,
    sentence: `The import of ${row.fileName} was undone: ${live.length} results.`,
  });
  return { id: importId };
}
