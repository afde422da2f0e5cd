// Runs in a child process with a small heap and no environment: reads one uploaded file from stdin, writes typed rows to stdout.
import { Readable } from 'node:stream';
import { parse } from 'csv-parse/sync';
import ExcelJS from 'exceljs';
import type { Sheet, SheetCell, SheetFile } from '#shared/sheets/sheet.ts';
import { FileRefused, guardZip, type WorkbookParts } from './guard-zip.ts';

const rowsMax = 50_000;
const columnsMax = 200;
const textMax = 32_767;

const pad = (value: number) => String(value).padStart(2, '0');

/** A date of a workbook has no zone: exceljs gives it at UTC, so UTC parts only. */
function dateCell(date: Date): SheetCell {
  if (Number.isNaN(date.getTime())) return { kind: 'error', text: 'a date that does not exist' };
  const day = date.toISOString().slice(0, 10);
  const time =
    date.getUTCHours() + date.getUTCMinutes() > 0
      ? `${pad(date.getUTCHours())}:${pad(date.getUTCMinutes())}`
      : '';
  return { kind: 'date', text: time ? `${day} ${time}` : day, day, time };
}

function typedCell(value: ExcelJS.CellValue): SheetCell | null {
  if (value === null || value === undefined) return null;
  if (typeof value === 'number') {
    return Number.isFinite(value)
      ? { kind: 'number', text: String(value), value }
      : { kind: 'error', text: 'a number cell without a number' };
  }
  if (typeof value === 'string')
    return value.trim() === '' ? null : { kind: 'text', text: value.slice(0, textMax) };
  if (typeof value === 'boolean') return { kind: 'boolean', text: value ? 'TRUE' : 'FALSE' };
  if (value instanceof Date) return dateCell(value);
  if ('error' in value) return { kind: 'error', text: String(value.error) };
  if ('richText' in value) return typedCell(value.richText.map((part) => part.text).join(''));
  if ('hyperlink' in value) return typedCell(value.text);
  if ('formula' in value || 'sharedFormula' in value) {
    const { result } = value;
    return result === undefined || result === null
      ? { kind: 'error', text: 'a formula without a stored result' }
      : typedCell(result as ExcelJS.CellValue);
  }
  return { kind: 'error', text: 'a kind of cell that is not known' };
}

function columnNumber(letters: string): number {
  return [...letters].reduce((sum, letter) => sum * 26 + letter.charCodeAt(0) - 64, 0);
}

function mergeOf(range: string): Sheet['merges'][number] | null {
  const match = /^([A-Z]+)(\d+):([A-Z]+)(\d+)$/.exec(range);
  if (!match) return null;
  return {
    left: columnNumber(match[1]!),
    top: Number(match[2]),
    right: columnNumber(match[3]!),
    bottom: Number(match[4]),
  };
}

async function readWorkbook(bytes: Buffer, parts: WorkbookParts): Promise<SheetFile> {
  const reader = new ExcelJS.stream.xlsx.WorkbookReader(Readable.from(bytes, { objectMode: false }), {
    worksheets: 'emit',
    sharedStrings: 'cache',
    styles: 'cache',
    hyperlinks: 'ignore',
    entries: 'ignore',
  });
  const sheets: Sheet[] = [];
  let rowCount = 0;
  for await (const worksheet of reader) {
    const source = worksheet as unknown as { id: number; name: string; state?: string };
    const merges = (parts.merges.get(`xl/worksheets/sheet${source.id}.xml`) ?? [])
      .map(mergeOf)
      .filter((one) => one !== null);
    const sheet: Sheet = {
      name: source.name,
      isHidden: source.state === 'hidden' || source.state === 'veryHidden',
      rows: [],
      merges,
    };
    for await (const row of worksheet) {
      if ((rowCount += 1) > rowsMax)
        throw new FileRefused(
          `The file has more than ${rowsMax.toLocaleString('en-GB')} rows. Split it and send the parts.`,
        );
      const cells: (SheetCell | null)[] = [];
      row.eachCell({ includeEmpty: false }, (cell, column) => {
        if (column > columnsMax)
          throw new FileRefused(
            `The sheet "${sheet.name}" uses more than ${columnsMax} columns. Remove what lies far to the right.`,
          );
        while (cells.length < column) cells.push(null);
        cells[column - 1] = typedCell(cell.value);
      });
      if (cells.some((cell) => cell !== null))
        sheet.rows.push({ number: row.number, isHidden: row.hidden === true, cells });
    }
    sheets.push(sheet);
  }
  const notes = sheets
    .filter((sheet) => sheet.isHidden)
    .map((sheet) => `Sheet "${sheet.name}" is hidden and was not read.`);
  return { sheets, notes };
}

function decode(bytes: Buffer): { text: string; note: string } {
  try {
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), note: 'Characters: UTF-8.' };
  } catch {
    return {
      text: new TextDecoder('windows-1252').decode(bytes),
      note: 'Characters: Windows-1252, because the file is not UTF-8.',
    };
  }
}

const delimiters = [',', ';', '\t'] as const;

function readCsv(bytes: Buffer): SheetFile {
  const { text, note } = decode(bytes);
  if (text.includes('\0')) throw new FileRefused('The file is not text. Save the sheet as .csv or .xlsx.');
  const head = text.split(/\r?\n/).slice(0, 20);
  const delimiter = [...delimiters].sort(
    (a, b) => head.join('\n').split(b).length - head.join('\n').split(a).length,
  )[0]!;
  const records = parse(text, {
    delimiter,
    bom: true,
    relax_column_count: true,
    skip_empty_lines: false,
    relax_quotes: true,
    max_record_size: 1_000_000,
    to: rowsMax + 1,
  });
  if (records.length > rowsMax)
    throw new FileRefused(
      `The file has more than ${rowsMax.toLocaleString('en-GB')} rows. Split it and send the parts.`,
    );
  const rows = (records as string[][])
    .map((record, index) => ({
      number: index + 1,
      isHidden: false,
      cells: record
        .slice(0, columnsMax)
        .map((cell): SheetCell | null =>
          cell.trim() === '' ? null : { kind: 'text', text: cell.slice(0, textMax) },
        ),
    }))
    .filter((row) => row.cells.some((cell) => cell !== null));
  const name = { ',': 'comma', ';': 'semicolon', '\t': 'tab' }[delimiter];
  return {
    sheets: [{ name: 'Sheet', isHidden: false, rows, merges: [] }],
    notes: [note, `Columns separated by ${name}.`],
  };
}

async function main(): Promise<void> {
  const chunks: Buffer[] = [];
  for await (const chunk of process.stdin) chunks.push(chunk as Buffer);
  const bytes = Buffer.concat(chunks);
  let answer: { file?: SheetFile; refused?: string };
  try {
    const isZip = bytes.subarray(0, 4).equals(Buffer.from([0x50, 0x4b, 3, 4]));
    const file = isZip ? await readWorkbook(bytes, await guardZip(bytes)) : readCsv(bytes);
    if (!file.sheets.some((sheet) => sheet.rows.length)) throw new FileRefused('The file holds no rows.');
    answer = { file };
  } catch (error) {
    answer = {
      refused:
        error instanceof FileRefused
          ? error.message
          : 'The file is damaged or not a workbook. Open it in a spreadsheet program, save it as .xlsx and send it again.',
    };
  }
  process.stdout.write(JSON.stringify(answer));
}

await main();
