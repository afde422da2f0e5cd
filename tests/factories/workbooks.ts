import ExcelJS from 'exceljs';

/** A real .xlsx from rows of plain values. */
export async function workbookOf(
  sheets: Record<string, (string | number | Date | null)[][]>,
  change: (workbook: ExcelJS.Workbook) => void = () => undefined,
): Promise<Buffer> {
  const workbook = new ExcelJS.Workbook();
  for (const [name, rows] of Object.entries(sheets)) workbook.addWorksheet(name).addRows(rows);
  change(workbook);
  return Buffer.from(await workbook.xlsx.writeBuffer());
}
