import type { LabLayout } from '#shared/lab/detect-layout.ts';
import type { LabRow, RawLabRow } from '#shared/lab/lab-row.ts';
import type { LabReading, SkippedRow } from '#shared/lab/read-lab-sheet.ts';
import { resolveLabRows, type LabCatalog } from '#shared/lab/resolve-lab-rows.ts';
import { mappingKey } from '#shared/lab/tidy-name.ts';
import { Problem } from '#shared/problems.ts';
import { cellText, type SheetFile } from '#shared/sheets/sheet.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import * as importRepository from '../imports/import-repository.ts';
import { siteDaysOf, siteOf } from '../sites/site-service.ts';
import * as repository from './lab-repository.ts';

export interface StoredReading {
  shape: LabLayout['shape'];
  jobNumber: string | null;
  notes: string[];
  skipped: SkippedRow[];
  qualifierKey: LabReading['qualifierKey'];
  preview: { number: number; cells: string[] }[];
  sheetName: string;
  headerRow: number;
  /** Answers for the whole file; uploads of before have none. */
  dateOrder: 'day-first' | 'month-first' | null;
  equalToLimit?: 'below' | 'measured' | null;
}

const previewRowsMax = 24;

export const countsOf = (rows: readonly LabRow[], skippedCount: number) => {
  const count = (state: LabRow['state']) => rows.filter((row) => row.state === state).length;
  return {
    read: rows.length + skippedCount,
    ok: count('ok'),
    warned: count('warned'),
    held: count('held'),
    skipped: count('skipped') + skippedCount,
  };
};

/** Measured values that count, in order of sampling. */
function historyOf(live: Awaited<ReturnType<typeof repository.listLiveResults>>): LabCatalog['history'] {
  const history = new Map<string, { sampledOn: string; value: string }[]>();
  const counted = live.filter((one) => one.isCounted && one.comparator === '=' && one.value !== null);
  for (const one of counted.sort((a, b) => (a.sampledOn < b.sampledOn ? -1 : 1))) {
    const key = `${one.samplePointId} ${one.analyteId} ${one.fraction}`;
    const own = history.get(key) ?? [];
    history.set(key, own);
    own.push({ sampledOn: one.sampledOn, value: one.value! });
  }
  return history;
}

export async function catalogOf(
  tx: Transaction,
  siteId: string,
  laboratoryId: string,
  receivedOn: string,
  { dateOrder, equalToLimit = null }: Pick<StoredReading, 'dateOrder' | 'equalToLimit'>,
): Promise<LabCatalog> {
  const mappings = await repository.listMappings(tx, laboratoryId);
  const live = await repository.listLiveResults(tx, siteId);
  const { localTime } = await siteDaysOf(tx, siteId);
  return {
    points: (await repository.listSamplePoints(tx, siteId)).map((one) => ({
      id: one.id,
      code: one.code,
      aliases: [one.name, ...one.aliases],
    })),
    analytes: await repository.listAnalytes(tx),
    qualifiers: new Map(
      (await repository.listQualifiers(tx, laboratoryId)).map((one) => [one.letter, one.meaning]),
    ),
    mappings: new Map(mappings.map((one) => [mappingKey(one.kind, one.fromText), one.toValue])),
    existing: new Map(
      live
        .filter((one) => one.isCounted)
        .map((one) => [
          `${one.samplePointId} ${one.analyteId} ${one.fraction} ${one.sampledOn}`,
          { id: one.id, comparator: one.comparator, value: one.value, unit: one.unit },
        ]),
    ),
    history: historyOf(live),
    receivedOn,
    localTime,
    answers: { dateOrder, equalToLimit },
  };
}

export async function stage(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  importId: string,
  raws: readonly RawLabRow[],
  catalog: LabCatalog,
  skippedCount: number,
) {
  const rows = resolveLabRows(raws, catalog);
  await importRepository.replaceRows(
    tx,
    importId,
    rows.map((row, position) => ({
      organisationId: context.organisationId,
      id: deps.newId(),
      importId,
      position,
      sheet: row.sheet,
      rowNumber: row.rowNumber,
      state: row.state,
      payload: row,
    })),
  );
  const counts = countsOf(rows, skippedCount);
  await importRepository.updateImport(tx, importId, { counts });
  return counts;
}

export function previewOf(file: SheetFile, reading: LabReading) {
  const sheet = file.sheets.find((one) => one.name === reading.rows[0]?.sheet) ?? file.sheets[0]!;
  return {
    sheetName: sheet.name,
    preview: sheet.rows
      .slice(0, previewRowsMax)
      .map((row) => ({ number: row.number, cells: row.cells.map(cellText) })),
  };
}

export async function today(tx: Transaction, siteId: string, deps: Dependencies): Promise<string> {
  return (await siteDaysOf(tx, siteId)).dayOf(deps.now().getTime());
}

export async function openImport(tx: Transaction, context: Context, importId: string) {
  const row = await importRepository.findImport(tx, siteOf(context), importId);
  const isOthers = context.laboratoryId !== null && row?.laboratoryId !== context.laboratoryId;
  if (!row || row.kind !== 'lab' || isOthers)
    throw new Problem('not-found', 'There is no such upload at this site.');
  return row;
}
