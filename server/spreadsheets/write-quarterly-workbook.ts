import ExcelJS from 'exceljs';
import type { Quarter } from '../features/reports/quarter.ts';
import { quarterTitle } from '../features/reports/quarter-figures.ts';
import { monthShortName } from '#shared/calendar/month.ts';
import { monthlyVolumesChart } from '#shared/charts/compare-chart.ts';
import { addCharts } from './quarterly/add-charts.ts';
import { addBalanceSheet } from './quarterly/balance-sheet.ts';
import { addInputsSheet, addLabSheet, addLoadsSheet, addNotesSheet } from './quarterly/record-sheets.ts';
import { drawChart } from './quarterly/draw-chart.ts';
import type { NativeChart } from './quarterly/native-chart.ts';
import { addSheet, monthDate } from './quarterly/sheet-tools.ts';
import {
  addChecksSheet,
  fillAboutSheet,
  fillSummarySheet,
  type IssueWords,
} from './quarterly/summary-sheets.ts';
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
  const loads = addLoadsSheet(workbook, quarter, title);
  const { siteRow } = fillSummarySheet(summary, quarter, compare);
  const checks = addChecksSheet(workbook, quarter, title, {
    balanceLastRow: balance.lastRow,
    compare,
    siteRow,
    pumped,
  });
  addNotesSheet(workbook, quarter, title);
  fillAboutSheet(about, quarter, words, checks);
  const picture = placePicture(workbook, summary, quarter);
  return addCharts(
    Buffer.from(await workbook.xlsx.writeBuffer()),
    nativeCharts(quarter, compare.history, loads.verdictRows),
    [picture],
  );
}

const label = (month: string) => `${monthShortName(month)} ${month.slice(0, 4)}`;

/** The twelve months as a picture under the Summary: it looks right in every viewer. @returns its alternative text */
function placePicture(workbook: ExcelJS.Workbook, summary: ExcelJS.Worksheet, quarter: Quarter): string {
  const size = { widthPx: 760, heightPx: 300 };
  const image = workbook.addImage({
    buffer: drawChart(monthlyVolumesChart(quarter.history), size) as never,
    extension: 'png',
  });
  const top = summary.rowCount + 2;
  summary.getCell(top, 1).value =
    'Leachate of the whole site, predicted and pumped; the numbers stand on sheet Compare.';
  summary.addImage(image, { tl: { col: 0, row: top }, br: { col: 8, row: top + 16 } } as never);
  const last = quarter.history.at(-1);
  return `Line chart of predicted and pumped leachate of the whole site, m³ a month, from ${label(quarter.history[0]?.month ?? quarter.months[0]!)} to ${label(last?.month ?? quarter.months[2]!)}. The table on sheet Compare has the numbers.`;
}

function nativeCharts(
  quarter: Quarter,
  history: { firstRow: number; lastRow: number },
  verdicts: { firstRow: number; lastRow: number },
): NativeChart[] {
  const span = (
    sheet: string,
    column: string,
    { firstRow, lastRow }: { firstRow: number; lastRow: number },
  ) => `${sheet}!$${column}$${firstRow}:$${column}$${lastRow}`;
  const shares = quarter.verdicts.map((one) =>
    one.limit.statistic === 'range' || one.verdict.valueText === null || !Number(one.limit.valueText)
      ? null
      : Number(one.verdict.valueText.replace('<', '')) / Number(one.limit.valueText),
  );
  const charts: NativeChart[] = [];
  if (quarter.history.length > 1) {
    charts.push({
      sheet: 'Compare',
      kind: 'line',
      title: 'Leachate of the whole site',
      axisTitle: 'm³ a month',
      description:
        'Line chart of predicted and pumped leachate of the whole site over twelve months; the rows beside it have the numbers.',
      categories: {
        range: span('Compare', 'A', history),
        monthNumbers: quarter.history.map((one) => monthDate(one.month).getTime() / 86_400_000 + 25_569),
      },
      lines: [
        {
          series: 'predicted',
          name: 'Predicted',
          range: span('Compare', 'B', history),
          values: quarter.history.map((one) => one.predictedM3),
        },
        {
          series: 'pumped',
          name: 'Pumped',
          range: span('Compare', 'C', history),
          values: quarter.history.map((one) => one.measuredM3),
        },
      ],
      anchor: { fromColumn: 4, fromRow: history.firstRow - 2, toColumn: 12, toRow: history.firstRow + 16 },
    });
  }
  if (quarter.verdicts.length) {
    charts.push({
      sheet: 'Loads',
      kind: 'bar',
      title: 'Deciding value as a share of its limit',
      axisTitle: 'share of the limit; 1 is the limit',
      description:
        'Bar chart of each deciding value as a share of its limit; column Share of limit has the numbers.',
      categories: {
        range: span('Loads', 'B', verdicts),
        texts: quarter.verdicts.map((one) => one.analyteName),
      },
      lines: [
        { series: 'effluent', name: 'Share of limit', range: span('Loads', 'K', verdicts), values: shares },
      ],
      anchor: { fromColumn: 17, fromRow: 2, toColumn: 26, toRow: Math.max(20, verdicts.lastRow) },
    });
  }
  return charts;
}
