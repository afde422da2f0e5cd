import ExcelJS from 'exceljs';
import JSZip from 'jszip';
import { HyperFormula, type RawCellContent } from 'hyperformula';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { BalanceView } from '#shared/views/balance-view.ts';
import type { ReportView } from '#shared/views/lab-view.ts';
import { openTestRecord, siteIdOf, type Agent, type TestRecord } from '../setup/test-record.ts';

const quarter = '2025-Q4';

type Value = ExcelJS.CellValue;
const formulaOf = (value: Value): string | null =>
  value && typeof value === 'object' && 'formula' in value ? String(value.formula) : null;
const excelDay = (date: Date) => date.getTime() / 86_400_000 + 25_569;

/** What a cell holds, for an engine that computes everything itself. */
function rawOf(value: Value): RawCellContent {
  const formula = formulaOf(value);
  if (formula !== null) return `=${formula}`;
  if (value instanceof Date) return excelDay(value);
  if (value && typeof value === 'object')
    return 'hyperlink' in value
      ? String(value.text)
      : 'richText' in value
        ? value.richText.map((part) => part.text).join('')
        : null;
  return value === undefined
    ? null
    : typeof value === 'string' && value.startsWith('=')
      ? `'${value}`
      : value;
}
/** Stored result of a formula; the reader drops a zero from the cell's value but keeps it here. */
const cachedOf = (cell: ExcelJS.Cell): unknown => {
  const result: unknown = cell.result;
  return result instanceof Date ? excelDay(result) : result;
};

describe('the quarterly workbook, recomputed by an independent spreadsheet engine (HyperFormula)', () => {
  let record: TestRecord;
  let engineer: Agent;
  let siteId: string;
  let zip: JSZip;
  let workbook: ExcelJS.Workbook;
  let engine: HyperFormula;
  let view: ReportView;
  beforeAll(async () => {
    record = await openTestRecord('demo_record');
    engineer = await record.as('engineer');
    siteId = await siteIdOf(engineer);
    const answer = await engineer
      .get(`/api/v1/sites/${siteId}/reports/${quarter}/preview`)
      .buffer(true)
      .parse((response, done) => {
        const chunks: Buffer[] = [];
        response.on('data', (chunk: Buffer) => chunks.push(chunk));
        response.on('end', () => done(null, Buffer.concat(chunks)));
      })
      .expect(200);
    zip = await JSZip.loadAsync(answer.body as Buffer);
    workbook = new ExcelJS.Workbook();
    await workbook.xlsx.load(answer.body as never);
    const sheets = Object.fromEntries(
      workbook.worksheets.map((sheet) => {
        const rows: RawCellContent[][] = [];
        for (let row = 1; row <= sheet.rowCount; row += 1)
          rows.push(
            Array.from({ length: sheet.columnCount }, (_, column) =>
              rawOf(sheet.getCell(row, column + 1).value),
            ),
          );
        return [sheet.name, rows];
      }),
    );
    engine = HyperFormula.buildFromSheets(sheets, { licenseKey: 'gpl-v3', smartRounding: false });
    for (const { name, ranges } of workbook.definedNames.model) {
      const [range] = ranges;
      if (range && !name.startsWith('_xlnm') && engine.isItPossibleToAddNamedExpression(name, `=${range}`))
        engine.addNamedExpression(
          name,
          `=${range.replace(/^'?([^'!]+)'?!/, (_all, sheet: string) => `'${sheet}'!`)}`,
        );
    }
    view = (await engineer.get(`/api/v1/sites/${siteId}/reports/${quarter}`).expect(200)).body as ReportView;
  });
  afterAll(() => record.close());

  const formulaCells = () =>
    workbook.worksheets.flatMap((sheet) => {
      const cells: { sheet: string; address: string; row: number; column: number; cell: ExcelJS.Cell }[] = [];
      sheet.eachRow((row) =>
        row.eachCell((cell) => {
          if (formulaOf(cell.value) !== null)
            cells.push({
              sheet: sheet.name,
              address: cell.address,
              row: cell.fullAddress.row,
              column: cell.fullAddress.col,
              cell,
            });
        }),
      );
      return cells;
    });

  it('has its ten sheets in order, each with a title, and no merged cells', () => {
    expect(workbook.worksheets.map((sheet) => sheet.name)).toEqual([
      'About',
      'Summary',
      'Inputs',
      'Balance',
      'Pumped',
      'Compare',
      'Lab',
      'Loads',
      'Checks',
      'Notes',
    ]);
    for (const sheet of workbook.worksheets) {
      expect(String(sheet.getCell('A1').text)).not.toBe('');
      expect((sheet as unknown as { model: { merges: string[] } }).model.merges).toEqual([]);
    }
  });

  it('every formula has a stored result, and the engine computes the same one', () => {
    const cells = formulaCells();
    expect(cells.length).toBeGreaterThan(300);
    for (const cell of cells) {
      const where = `${cell.sheet}!${cell.address} = ${formulaOf(cell.cell.value)}`;
      const cached = cachedOf(cell.cell);
      expect(cached, where).toBeDefined();
      const computed = engine.getCellValue({
        sheet: engine.getSheetId(cell.sheet)!,
        row: cell.row - 1,
        col: cell.column - 1,
      });
      if (typeof cached === 'number') {
        expect(typeof computed, `${where} gives ${JSON.stringify(computed)}`).toBe('number');
        expect(Math.abs((computed as number) - cached), where).toBeLessThanOrEqual(
          1e-9 * Math.max(1, Math.abs(cached)),
        );
      } else expect(computed, where).toBe(cached);
    }
  });

  it('all its checks say OK', () => {
    const sheet = workbook.getWorksheet('Checks')!;
    const words: string[] = [];
    sheet.eachRow((row) =>
      row.eachCell((cell) => {
        const result = cachedOf(cell);
        if (result === 'OK' || result === 'LOOK') words.push(result as string);
      }),
    );
    expect(words.length).toBeGreaterThan(10);
    expect(new Set(words)).toEqual(new Set(['OK']));
  });

  it('its Compare sheet carries the numbers of the screen', () => {
    const text = JSON.stringify(workbook.getWorksheet('Compare')!.getSheetValues());
    for (const row of view.cellMonths) {
      expect(text, `${row.cellCode} ${row.month} predicted`).toContain(String(row.predictedM3).slice(0, 9));
    }
  });

  it('its Balance sheet has every plot and step of the quarter with the terms of the screen', async () => {
    for (const month of view.months) {
      const balance = (await engineer.get(`/api/v1/sites/${siteId}/balance/${month}`).expect(200))
        .body as BalanceView;
      const sheet = workbook.getWorksheet('Balance')!;
      const names: string[] = [];
      sheet.eachRow((row) =>
        row.eachCell((cell) => {
          if (typeof cell.value === 'string') names.push(cell.value);
        }),
      );
      for (const cell of balance.cells)
        for (const plot of cell.plots)
          expect(
            names.some((name) => name.includes(plot.plotName)),
            plot.plotName,
          ).toBe(true);
    }
  });

  it('nothing in it is an error, a hidden sheet or a formula without a unit in its column', () => {
    for (const sheet of workbook.worksheets) {
      expect(sheet.state).toBe('visible');
      sheet.eachRow((row) =>
        row.eachCell((cell) => expect(JSON.stringify(cell.value)).not.toMatch(/#(REF|DIV|VALUE|NAME|N\/A)/)),
      );
    }
  });

  it('has a picture and two native charts, each with alternative text, and every part they name exists', async () => {
    const parts = Object.keys(zip.files);
    expect(parts.filter((part) => part.startsWith('xl/charts/'))).toHaveLength(2);
    expect(parts.filter((part) => /^xl\/media\/.*\.png$/.test(part))).toHaveLength(1);
    const types = await zip.file('[Content_Types].xml')!.async('string');
    for (const [, part] of types.matchAll(/PartName="\/([^"]+)"/g)) expect(parts, part).toContain(part);
    for (const part of parts.filter((one) => one.endsWith('.rels'))) {
      const folder = part.replace(/_rels\/[^/]+$/, '');
      for (const [, target, mode] of (await zip.file(part)!.async('string')).matchAll(
        /Target="([^"]+)"(?: TargetMode="(\w+)")?/g,
      )) {
        if (mode === 'External' || target!.startsWith('#')) continue;
        const path = new URL(target!, `file:///${folder}`).pathname.slice(1);
        expect(parts, `${part} names ${target}`).toContain(path);
      }
    }
    for (const part of parts.filter((one) => /^xl\/drawings\/[^_].*\.xml$/.test(one)))
      expect(await zip.file(part)!.async('string'), part).toMatch(/descr="[^"]{40,}"/);
  });

  it('its charts draw the cells they name', async () => {
    const chart = await zip.file('xl/charts/chart1.xml')!.async('string');
    const cached = [
      ...chart.matchAll(/<c:f>Compare!\$([BC])\$(\d+):\$[BC]\$(\d+)<\/c:f><c:numCache>(.*?)<\/c:numCache>/g),
    ];
    expect(cached).toHaveLength(2);
    for (const [, column, first, , numbers] of cached) {
      for (const [, index, value] of numbers!.matchAll(/idx="(\d+)"><c:v>([^<]+)</g))
        expect(
          workbook.getWorksheet('Compare')!.getCell(`${column}${Number(first) + Number(index)}`).value,
        ).toBe(Number(value));
    }
  });
});
