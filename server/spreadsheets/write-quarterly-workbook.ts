import ExcelJS from 'exceljs';
import { quarterTitle, type Quarter } from '../features/reports/quarter-service.ts';
import { addBalanceSheet } from './quarterly/balance-sheet.ts';
import { addInputsSheet, addLabSheet, addLoadsSheet, addNotesSheet } from './quarterly/record-sheets.ts';
import { addSheet } from './quarterly/sheet-tools.ts';
import { addChecksSheet, fillAboutSheet, fillSummarySheet, type IssueWords } from './quarterly/summary-sheets.ts';
import { addCompareSheet, addPumpedSheet } from './quarterly/volume-sheets.ts';

/**
 * The quarter as an Excel workbook: ten sheets, live formulas with the results the application computed.
 * exceljs never computes, so every formula is written with its result; a second program recomputes them in the tests.
 */
export async function writeQuarterlyWorkbook(quarter: Quarter, words: IssueWords): Promise<Buffer> {
  const title = quarterTitle(quarter);
  const workbook = new ExcelJS.Workbook();
  workbook.creator = 'Tallyweir';
  workbook.title = title;
  workbook.created = new Date(quarter.generatedAt);
  workbook.modified = new Date(quarter.generatedAt);
  workbook.calcProperties = { fullCalcOnLoad: true };
  const about = addSheet(workbook, 'About', title, quarter.site.paperSize, false);
  const summary = addSheet(workbook, 'Summary', `${title}: summary`, quarter.site.paperSize, true);
  addInputsSheet(workbook, quarter, title);
  const balance = addBalanceSheet(workbook, quarter, title);
  const pumped = addPumpedSheet(workbook, quarter, title);
  const compare = addCompareSheet(workbook, quarter, title, balance.lastRow, pumped);
  addLabSheet(workbook, quarter, title);
  addLoadsSheet(workbook, quarter, title);
  const { siteRow } = fillSummarySheet(summary, quarter, compare);
  const checks = addChecksSheet(workbook, quarter, title, { balanceLastRow: balance.lastRow, compare, siteRow, pumped });
  addNotesSheet(workbook, quarter, title);
  fillAboutSheet(about, quarter, words, checks);
  return Buffer.from(await workbook.xlsx.writeBuffer());
}
