import type ExcelJS from 'exceljs';

/** One column of a table: header with its unit, width, format, and whether its cells are meant to be changed. */
export interface ColumnSpec {
  header: string;
  width?: number;
  format?: string;
}

export type CellInput = string | number | Date | null | { formula: string; result: number | string };

export const formats = {
  m3: '#,##0',
  mm: '0.0',
  concentration: '0.###',
  load: '0.000',
  difference: '+#,##0;-#,##0;0',
  percent: '0.0 %',
  day: 'yyyy-mm-dd',
  month: 'mmm yyyy',
  share: '0.00',
  plain: '0.000',
};

const font = { name: 'Work Sans', size: 10 };

/** A plain calendar day or month as the date the workbook stores: midnight UTC, so that no zone can shift it. */
export const dayDate = (day: string): Date => new Date(`${day}T00:00:00Z`);
export const monthDate = (month: string): Date => new Date(`${month}-01T00:00:00Z`);

/** Refuses what a workbook must not hold. */
function checked(value: CellInput): CellInput {
  if (typeof value === 'number' && !Number.isFinite(value))
    throw new RangeError('A number of the workbook is not finite.');
  return value;
}

/** A sheet with its title in A1, print set-up and footer. */
export function addSheet(
  workbook: ExcelJS.Workbook,
  name: string,
  title: string,
  paperSize: 'A4' | 'Letter',
  isWide: boolean,
): ExcelJS.Worksheet {
  const sheet = workbook.addWorksheet(name, {
    pageSetup: {
      paperSize: paperSize === 'A4' ? 9 : (1 as never),
      orientation: isWide ? 'landscape' : 'portrait',
      fitToPage: true,
      fitToWidth: 1,
      fitToHeight: 0,
    },
    headerFooter: { oddFooter: `&L${title.replaceAll('&', '&&')}&C${name}&RPage &P of &N` },
  });
  sheet.getCell('A1').value = title;
  sheet.getCell('A1').font = { ...font, size: 12, bold: true };
  return sheet;
}

/**
 * Writes a table with its header in the given row and freezes it.
 * @returns the row number of the first data row
 */
export function addTable(
  sheet: ExcelJS.Worksheet,
  headerRow: number,
  columns: readonly ColumnSpec[],
  rows: readonly (readonly CellInput[])[],
  options: { firstColumn?: number; freeze?: boolean; inputColumns?: readonly number[] } = {},
): number {
  const { firstColumn = 1, freeze = true, inputColumns = [] } = options;
  columns.forEach((column, index) => {
    const cell = sheet.getCell(headerRow, firstColumn + index);
    cell.value = column.header;
    cell.font = { ...font, bold: true };
    cell.alignment = { wrapText: true, vertical: 'bottom' };
    cell.border = { bottom: { style: 'thin' } };
    sheet.getColumn(firstColumn + index).width = column.width ?? 12;
  });
  rows.forEach((row, rowIndex) => {
    row.forEach((value, index) => {
      const cell = sheet.getCell(headerRow + 1 + rowIndex, firstColumn + index);
      cell.value = checked(value) as ExcelJS.CellValue;
      cell.font = inputColumns.includes(index) ? { ...font, color: { argb: 'FF1D4B86' } } : font;
      if (inputColumns.includes(index))
        cell.fill = { type: 'pattern', pattern: 'solid', fgColor: { argb: 'FFE5EEF8' } };
      const format = columns[index]?.format;
      if (format && typeof value !== 'string') cell.numFmt = format;
    });
  });
  if (freeze) {
    sheet.views = [{ state: 'frozen', xSplit: 1, ySplit: headerRow, activeCell: 'A1' }];
    sheet.pageSetup.printTitlesRow = `${headerRow}:${headerRow}`;
  }
  if (rows.length && freeze)
    sheet.autoFilter = {
      from: { row: headerRow, column: firstColumn },
      to: { row: headerRow + rows.length, column: firstColumn + columns.length - 1 },
    };
  return headerRow + 1;
}

/** Letters of a column number from 1. */
export function letters(column: number): string {
  const rest = Math.floor((column - 1) / 26);
  return (rest > 0 ? letters(rest) : '') + String.fromCharCode(65 + ((column - 1) % 26));
}
