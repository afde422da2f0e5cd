import type ExcelJS from 'exceljs';
import { volumeUnitsM3 } from '#shared/units/unit-factors.ts';
import type { Quarter } from '../../features/reports/quarter.ts';
import { balanceColumn, balanceFirstRow } from './balance-sheet.ts';
import { addSheet, addTable, dayDate, formats, monthDate, type CellInput } from './sheet-tools.ts';

const basisMarks: Record<string, string> = {
  measured: '',
  apportioned: 'A',
  estimated: 'E',
  calculated: 'C',
  allocated: 'L',
};

/** Intervals of every register, and the site days they were cut into. */
export function addPumpedSheet(
  workbook: ExcelJS.Workbook,
  quarter: Quarter,
  title: string,
): { firstRow: number; lastRow: number } {
  const sheet = addSheet(
    workbook,
    'Pumped',
    `${title}: registers and site days`,
    quarter.site.paperSize,
    true,
  );
  sheet.getCell('A2').value =
    'Left: one row per interval between two readings. Right: the site days it was cut into. Mark A apportioned, E estimated.';
  const headerRow = 3;
  const rows = quarter.intervals.map((one, index): CellInput[] => {
    const row = headerRow + 1 + index;
    const factor = Number(volumeUnitsM3[one.unit].factor);
    const computed =
      (Number(one.closing) - Number(one.opening) + Number(one.wrap)) * Number(one.multiplier) * factor;
    const volume = one.volumeM3 === null ? null : Number(one.volumeM3);
    return [
      one.meterCode,
      one.from.replace('T', ' '),
      one.to.replace('T', ' '),
      one.hours,
      Number(one.opening),
      Number(one.closing),
      Number(one.wrap),
      Number(one.multiplier),
      factor,
      { formula: `(F${row}-E${row}+G${row})*H${row}*I${row}`, result: computed },
      volume === null ? 'held' : volume - computed,
      volume === null ? 'held' : { formula: `J${row}+K${row}`, result: volume },
      one.basis,
    ];
  });
  addTable(
    sheet,
    headerRow,
    [
      { header: 'Meter', width: 9 },
      { header: 'From', width: 17 },
      { header: 'To', width: 17 },
      { header: 'Hours', format: '0.0', width: 8 },
      { header: 'Opening' },
      { header: 'Closing' },
      { header: 'Wrap', width: 8 },
      { header: 'Multiplier', width: 10 },
      { header: 'm³ per unit', format: '0.000000' },
      { header: 'Register volume, m³', format: '0.00' },
      { header: 'Adjustment, m³', format: '0.00' },
      { header: 'Volume, m³', format: '0.00' },
      { header: 'Basis' },
    ],
    rows,
    { inputColumns: [4, 5, 6, 7] },
  );
  const days = quarter.days.map((one, index): CellInput[] => {
    const row = headerRow + 1 + index;
    return [
      one.meterCode,
      dayDate(one.siteDay),
      monthDate(one.month),
      one.from,
      one.to,
      one.volumeM3,
      one.basis,
      basisMarks[one.basis] ?? '',
      one.cellCode || '–',
      one.counts,
      { formula: `T${row}*X${row}`, result: one.volumeM3 * one.counts },
    ];
  });
  addTable(
    sheet,
    headerRow,
    [
      { header: 'Meter', width: 9 },
      { header: 'Site day', format: formats.day },
      { header: 'Month', format: formats.month },
      { header: 'From', width: 18 },
      { header: 'To', width: 18 },
      { header: 'Volume, m³', format: '0.00' },
      { header: 'Basis' },
      { header: 'Mark', width: 7 },
      { header: 'Cell', width: 8 },
      { header: 'Counts', width: 8 },
      { header: 'Counted, m³', format: '0.00' },
    ],
    days,
    { firstColumn: 15, freeze: false },
  );
  quarter.days.forEach((one, index) => {
    if (one.basis === 'measured') return;
    sheet.getCell(headerRow + 1 + index, 20).fill = {
      type: 'pattern',
      pattern: 'lightUp',
      fgColor: { argb: 'FF7B7488' },
    };
  });
  return { firstRow: headerRow + 1, lastRow: headerRow + Math.max(1, days.length) };
}

export interface CompareRows {
  firstRow: number;
  lastRow: number;
  /** Rows of the table of the whole site over twelve months. */
  history: { firstRow: number; lastRow: number };
}

/** Predicted against measured by cell and month, summed from Balance and Pumped. */
export function addCompareSheet(
  workbook: ExcelJS.Workbook,
  quarter: Quarter,
  title: string,
  balanceLastRow: number,
  pumped: { firstRow: number; lastRow: number },
): CompareRows {
  const sheet = addSheet(
    workbook,
    'Compare',
    `${title}: predicted against pumped`,
    quarter.site.paperSize,
    true,
  );
  sheet.getCell('A2').value =
    'Difference is pumped − predicted, positive when more was pumped. Percent is of the predicted.';
  const range = (column: string) => `Balance!$${column}$${balanceFirstRow}:$${column}$${balanceLastRow}`;
  const day = (column: string) => `Pumped!$${column}$${pumped.firstRow}:$${column}$${pumped.lastRow}`;
  const headerRow = 3;
  let running = 0;
  const rows = quarter.cellMonths.map((one, index): CellInput[] => {
    const row = headerRow + 1 + index;
    const isFirst = index === 0 || quarter.cellMonths[index - 1]!.cellCode !== one.cellCode;
    const own = quarter.days.filter((entry) => entry.cellCode === one.cellCode && entry.month === one.month);
    const direct = own.reduce((sum, entry) => sum + entry.volumeM3 * entry.counts, 0);
    const measured = direct + one.allocatedM3;
    const difference = measured - (one.predictedM3 ?? 0);
    const missing = !one.isOpen
      ? 'not open'
      : one.predictedM3 === null
        ? 'no prediction'
        : one.measuredM3 === null
          ? 'not read'
          : null;
    running = (isFirst ? 0 : running) + (missing ? 0 : difference);
    return [
      one.cellCode,
      monthDate(one.month),
      one.areaM2,
      one.predictedM3 === null
        ? missing
        : {
            formula: `SUMIFS(${range(balanceColumn('leachateM3'))},${range(balanceColumn('cell'))},A${row},${range(balanceColumn('month'))},B${row})`,
            result: one.predictedM3,
          },
      { formula: `SUMIFS(${day('Y')},${day('W')},A${row},${day('Q')},B${row})`, result: direct },
      one.allocatedM3,
      one.measuredM3 === null
        ? one.isOpen
          ? 'not read'
          : 'not open'
        : { formula: `E${row}+F${row}`, result: measured },
      missing ?? { formula: `G${row}-D${row}`, result: difference },
      missing ?? {
        formula: `IF(D${row}=0,"not defined",H${row}/D${row})`,
        result: one.predictedM3 === 0 ? 'not defined' : difference / one.predictedM3!,
      },
      missing ?? { formula: isFirst ? `H${row}` : `N(J${row - 1})+H${row}`, result: running },
      one.estimatedM3,
      one.measuredM3 === null || measured === 0
        ? 0
        : { formula: `K${row}/G${row}`, result: one.estimatedM3 / measured },
    ];
  });
  addTable(
    sheet,
    headerRow,
    [
      { header: 'Cell', width: 8 },
      { header: 'Month', format: formats.month },
      { header: 'Area, m²', format: formats.m3 },
      { header: 'Predicted, m³', format: formats.m3 },
      { header: 'Pumped from own sumps, m³', format: formats.m3 },
      { header: 'Allocated from shared header, m³', format: formats.m3 },
      { header: 'Pumped, m³', format: formats.m3 },
      { header: 'Difference, m³', format: formats.difference },
      { header: 'Difference, % of predicted', format: formats.percent },
      { header: 'Running difference, m³', format: formats.difference },
      { header: 'Of it estimated, m³', format: formats.m3 },
      { header: 'Estimated', format: formats.percent },
    ],
    rows,
  );
  const historyHeader = headerRow + rows.length + 3;
  sheet.getCell(historyHeader - 1, 1).value =
    'The whole site, twelve months to the end of the quarter; the chart beside it draws these rows.';
  addTable(
    sheet,
    historyHeader,
    [
      { header: 'Month', format: formats.month },
      { header: 'Predicted, m³', format: formats.m3 },
      { header: 'Pumped, m³', format: formats.m3 },
    ],
    quarter.history.map((one): CellInput[] => [
      monthDate(one.month),
      one.predictedM3,
      one.measuredM3 ?? 'not read',
    ]),
    { freeze: false },
  );
  return {
    firstRow: headerRow + 1,
    lastRow: headerRow + rows.length,
    history: { firstRow: historyHeader + 1, lastRow: historyHeader + quarter.history.length },
  };
}
