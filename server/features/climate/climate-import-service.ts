import type * as z from 'zod';
import { dayName, monthOfDay } from '#shared/calendar/day.ts';
import {
  detectClimateMapping,
  readClimateSheet,
  type ClimateMapping,
  type ClimateRow,
} from '#shared/climate/read-climate-sheet.ts';
import { seriesDoubts } from '#shared/climate/series-doubts.ts';
import { Problem } from '#shared/problems.ts';
import type { climateMappingInput, climateUploadInput } from '#shared/schemas/climate.ts';
import { cellText, type SheetFile } from '#shared/sheets/sheet.ts';
import type { ClimateImportView } from '#shared/views/lab-view.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import { sha256Of } from '../../files/file-store.ts';
import type { Context, Dependencies, UploadedFile } from '../../http/route.ts';
import { readSheet } from '../../spreadsheets/read-sheet.ts';
import * as importRepository from '../imports/import-repository.ts';
import { siteOf } from '../sites/site-service.ts';
import * as repository from './climate-repository.ts';

interface Reading {
  mapping: ClimateMapping;
  headers: string[];
  notes: string[];
}

const countsOf = (rows: readonly ClimateRow[]) => ({
  read: rows.length,
  ok: rows.filter((row) => row.state === 'ok').length,
  warned: rows.filter((row) => row.state === 'warned').length,
  held: rows.filter((row) => row.state === 'held').length,
  skipped: 0,
});

function rowsBy(file: SheetFile, mapping: ClimateMapping): ClimateRow[] {
  const sheet = file.sheets.find((one) => one.name === mapping.sheetName) ?? file.sheets[0]!;
  return readClimateSheet(sheet, mapping);
}

async function stage(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  importId: string,
  file: SheetFile,
  mapping: ClimateMapping,
) {
  const rows = rowsBy(file, mapping);
  await importRepository.replaceRows(
    tx,
    importId,
    rows.map((row, position) => ({
      organisationId: context.organisationId,
      id: deps.newId(),
      importId,
      position,
      sheet: mapping.sheetName,
      rowNumber: row.rowNumber,
      state: row.state,
      payload: row,
    })),
  );
  return countsOf(rows);
}

/** Takes an uploaded climate sheet: kept as sent, read, staged; nothing is stored in the record yet. */
export async function uploadClimate(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof climateUploadInput>,
  file: UploadedFile | undefined,
) {
  const siteId = siteOf(context);
  if (!file) throw new Problem('file-not-readable', 'Choose a file to upload.');
  const sha256 = sha256Of(file.bytes);
  const same = await importRepository.findSameFile(tx, siteId, 'climate', sha256);
  if (same)
    throw new Problem(
      'already-done',
      `This file was imported on ${dayName(same.confirmedAt!.slice(0, 10))} already. There is nothing to do.`,
    );
  const read = await readSheet(file);
  const sheet = read.sheets.find((one) => !one.isHidden && detectClimateMapping(one));
  const mapping = sheet && detectClimateMapping(sheet);
  if (!mapping || !sheet)
    throw new Problem(
      'file-not-readable',
      'No table of climate was found. It needs a header row with a date, or year and month, and at least one of precipitation, temperature or PET.',
    );
  await deps.files.put(file.bytes);
  const stationId = await repository.findOrAddStation(tx, {
    organisationId: context.organisationId,
    id: deps.newId(),
    siteId,
    name: input.stationName,
    kind: 'file',
    priority: 2,
    source: file.name,
  });
  const headers = (sheet.rows.find((row) => row.number === mapping.headerRow)?.cells ?? []).map(cellText);
  const reading: Reading = { mapping, headers, notes: read.notes };
  await importRepository.insertImport(tx, {
    organisationId: context.organisationId,
    id: input.id,
    siteId,
    kind: 'climate',
    stationId,
    fileName: file.name.slice(0, 255),
    fileSha256: sha256,
    byteCount: file.bytes.length,
    reading,
    counts: {},
    uploadedById: context.personId,
  });
  const counts = await stage(tx, context, deps, input.id, read, mapping);
  await importRepository.updateImport(tx, input.id, { counts });
  await recordChange(tx, context, {
    action: 'upload',
    subjectType: 'imports',
    subjectId: input.id,
    sentence: `Climate file ${file.name} was uploaded: ${counts.read} rows.`,
    after: { sha256, counts },
  });
  return { id: input.id, counts };
}

async function openImport(tx: Transaction, siteId: string, importId: string) {
  const row = await importRepository.findImport(tx, siteId, importId);
  if (!row || row.kind !== 'climate')
    throw new Problem('not-found', 'There is no such climate upload at this site.');
  return row;
}

/** Reads the kept file again with columns or units as the person corrected them. */
export async function remapClimate(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  importId: string,
  mapping: z.output<typeof climateMappingInput>,
) {
  const row = await openImport(tx, siteOf(context), importId);
  if (row.confirmedAt)
    throw new Problem(
      'already-done',
      'This upload is written already. Undo it first to read it differently.',
    );
  const file = await readSheet({ name: row.fileName, bytes: await deps.files.get(row.fileSha256) });
  const counts = await stage(tx, context, deps, importId, file, mapping);
  await importRepository.updateImport(tx, importId, {
    counts,
    reading: { ...(row.reading as Reading), mapping },
  });
  return { id: importId, counts };
}

/** Writes the good rows of a staged upload in this transaction; held rows stay with the upload. */
export async function confirmClimate(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  importId: string,
) {
  const row = await openImport(tx, siteOf(context), importId);
  if (row.confirmedAt) throw new Problem('already-done', 'This upload is written already.');
  const { mapping } = row.reading as Reading;
  const staged = (await importRepository.listRows(tx, importId))
    .map((one) => one.payload as ClimateRow)
    .filter((one) => one.state !== 'held' && Object.keys(one.values).length > 0);
  const fact = {
    organisationId: context.organisationId,
    recordedById: context.personId,
    importId,
    stationId: row.stationId!,
  };
  if (mapping.kind === 'daily') {
    const known = new Map(
      (await repository.listLiveDays(tx, [row.stationId!])).map((one) => [one.siteDay, one]),
    );
    await repository.insertDays(
      tx,
      staged.map((one) => ({
        ...fact,
        id: deps.newId(),
        siteDay: one.when,
        ...one.values,
        supersedesId: known.get(one.when)?.id ?? null,
        reason: known.has(one.when) ? `Import of ${row.fileName}` : null,
      })),
    );
  } else {
    const known = new Map(
      (await repository.listLiveMonths(tx, [row.stationId!])).map((one) => [one.month, one]),
    );
    await repository.insertMonths(
      tx,
      staged.map((one) => ({
        ...fact,
        id: deps.newId(),
        month: one.when,
        ...one.values,
        supersedesId: known.get(one.when)?.id ?? null,
        reason: known.has(one.when) ? `Import of ${row.fileName}` : null,
      })),
    );
  }
  await importRepository.updateImport(tx, importId, {
    confirmedAt: deps.now().toISOString(),
    confirmedById: context.personId,
  });
  await recordChange(tx, context, {
    action: 'confirm',
    subjectType: 'imports',
    subjectId: importId,
    sentence: `${staged.length} ${mapping.kind === 'daily' ? 'days' : 'months'} of climate were written from ${row.fileName}.`,
    after: row.counts,
  });
  return { id: importId, writtenCount: staged.length };
}

/** Voids every row of a confirmed upload by rows that say so; the file stays. */
export async function undoClimate(tx: Transaction, context: Context, deps: Dependencies, importId: string) {
  const row = await openImport(tx, siteOf(context), importId);
  if (!row.confirmedAt || row.undoneAt)
    throw new Problem(
      'already-done',
      row.undoneAt ? 'This upload was undone already.' : 'This upload was never written.',
    );
  const days = await repository.listDaysOfImport(tx, importId);
  const months = await repository.listMonthsOfImport(tx, importId);
  const voided = <T extends { id: string; sequence: number; recordedAt: string }>({
    sequence: _sequence,
    recordedAt: _recordedAt,
    ...one
  }: T) => ({
    ...one,
    id: deps.newId(),
    recordedById: context.personId,
    supersedesId: one.id,
    isVoid: 'yes' as const,
    reason: `Import of ${row.fileName} undone`,
  });
  await repository.insertDays(tx, days.map(voided));
  await repository.insertMonths(tx, months.map(voided));
  await importRepository.updateImport(tx, importId, {
    undoneAt: deps.now().toISOString(),
    undoneById: context.personId,
  });
  const months2 = new Set([...days.map((one) => monthOfDay(one.siteDay)), ...months.map((one) => one.month)]);
  await recordChange(tx, context, {
    action: 'undo',
    subjectType: 'imports',
    subjectId: importId,
    sentence: `The import of ${row.fileName} was undone: ${days.length + months.length} rows in ${months2.size} months.`,
  });
  return { id: importId };
}

/** A staged or written upload as the page shows it. */
export async function readClimateImport(
  tx: Transaction,
  context: Context,
  importId: string,
): Promise<ClimateImportView> {
  const row = await openImport(tx, siteOf(context), importId);
  const rows = (await importRepository.listRows(tx, importId)).map((one) => one.payload as ClimateRow);
  const { mapping, headers, notes } = row.reading as Reading;
  return {
    id: row.id,
    fileName: row.fileName,
    fileSha256: row.fileSha256,
    counts: row.counts as ReturnType<typeof countsOf>,
    confirmedAt: row.confirmedAt,
    undoneAt: row.undoneAt,
    mapping,
    headers,
    notes,
    doubts: seriesDoubts(rows, mapping),
    problems: rows.filter((one) => one.messages.length > 0),
    rows: rows.slice(0, 400),
    rowCount: rows.length,
  };
}
