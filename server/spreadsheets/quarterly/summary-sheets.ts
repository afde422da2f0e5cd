import type ExcelJS from 'exceljs';
import { monthName } from '#shared/calendar/month.ts';
import { dayName, firstDay, lastDay } from '#shared/calendar/day.ts';
import { totalPairs, type PairTotal } from '#shared/reconciliation/total-pairs.ts';
import type { Quarter } from '../../features/reports/quarter.ts';
import { balanceColumn, balanceFirstRow } from './balance-sheet.ts';
import { addSheet, addTable, formats, letters, type CellInput, type ColumnSpec } from './sheet-tools.ts';
import type { CompareRows } from './volume-sheets.ts';

const summaryHeader = 3;

/** A sum that says in words when there is nothing to add: SUM alone would make it a zero. */
const sumOf = (range: string, result: number | null, words: string): CellInput => ({
  formula: `IF(COUNT(${range})=0,"${words}",SUM(${range}))`,
  result: result ?? words,
});

/** The three columns of the quarter: no difference while a month of it lacks one side. */
const quarterOf = (row: number, total: PairTotal): CellInput[] => [
  sumOf(`B${row},D${row},F${row}`, total.predictedM3, 'no prediction'),
  sumOf(`C${row},E${row},G${row}`, total.measuredM3, 'not read'),
  total.differenceM3 === null ? 'not whole' : { formula: `I${row}-H${row}`, result: total.differenceM3 },
];

/** One page: predicted and pumped by cell and month, the quarter, and the worst of every limit. */
export function fillSummarySheet(
  sheet: ExcelJS.Worksheet,
  quarter: Quarter,
  compare: CompareRows,
): { siteRow: number } {
  const cell = (column: string, code: string, monthIndex: number) => {
    const index = quarter.cellMonths.findIndex(
      (one) => one.cellCode === code && one.month === quarter.months[monthIndex],
    );
    return `Compare!${column}${compare.firstRow + index}`;
  };
  const columns: ColumnSpec[] = [
    { header: 'Leachate, m³', width: 34 },
    ...quarter.months.flatMap((month): ColumnSpec[] => [
      { header: `${monthName(month)} predicted`, format: formats.m3 },
      { header: `${monthName(month)} pumped`, format: formats.m3 },
    ]),
    { header: 'Quarter predicted', format: formats.m3 },
    { header: 'Quarter pumped', format: formats.m3 },
    { header: 'Quarter difference', format: formats.difference },
  ];
  const figures = quarter.cells.map((one) =>
    quarter.months.map((month) =>
      quarter.cellMonths.find((row) => row.cellCode === one.code && row.month === month)!,
    ),
  );
  const rows = quarter.cells.map((one, index): CellInput[] => {
    const row = summaryHeader + 1 + index;
    const own = figures[index]!;
    const total = totalPairs(own.filter((item) => item.isOpen));
    return [
      `${one.code} ${one.name}`,
      ...own.flatMap((item, monthIndex): CellInput[] => [
        {
          formula: cell('D', one.code, monthIndex),
          result: item.predictedM3 ?? (item.isOpen ? 'no prediction' : 'not open'),
        },
        {
          formula: cell('G', one.code, monthIndex),
          result: item.measuredM3 ?? (item.isOpen ? 'not read' : 'not open'),
        },
      ]),
      ...quarterOf(row, total),
    ];
  });
  const siteRow = summaryHeader + 1 + rows.length;
  const lastColumn = columns.length;
  const siteMonths = quarter.months.map((month) =>
    totalPairs(quarter.cellMonths.filter((item) => item.isOpen && item.month === month)),
  );
  rows.push([
    'Site',
    ...siteMonths.flatMap((month, index): CellInput[] => [
      sumOf(
        `${letters(2 * index + 2)}${summaryHeader + 1}:${letters(2 * index + 2)}${siteRow - 1}`,
        month.predictedM3,
        'no prediction',
      ),
      sumOf(
        `${letters(2 * index + 3)}${summaryHeader + 1}:${letters(2 * index + 3)}${siteRow - 1}`,
        month.measuredM3,
        'not read',
      ),
    ]),
    ...quarterOf(siteRow, totalPairs(quarter.cellMonths.filter((item) => item.isOpen))),
  ]);
  addTable(sheet, summaryHeader, columns, rows);
  for (let column = 1; column <= lastColumn; column += 1)
    sheet.getCell(siteRow, column).font = { name: 'Work Sans', size: 10, bold: true };
  sheet.getCell(siteRow + 1, 1).value =
    'Totals are summed from unrounded values, so printed rows may not add to the total because of rounding.';
  const leakHeader = addVerdicts(sheet, quarter, siteRow + 3);
  const storeHeader = addLeakDetection(sheet, quarter, leakHeader);
  addStores(sheet, quarter, storeHeader);
  return { siteRow };
}

/** Limits with the value that decides and the verdict. @returns the row of the next table's header */
function addVerdicts(sheet: ExcelJS.Worksheet, quarter: Quarter, limitHeader: number): number {
  const verdicts = quarter.verdicts.map((one, index): CellInput[] => [
    `${one.analyteName}, ${one.limit.statistic.replace('-', ' ')}`,
    monthName(one.month),
    {
      formula: `Loads!H${4 + index}`,
      result: one.verdict.valueText === null ? 'no value' : Number(one.verdict.valueText.replace('<', '')),
    },
    one.limit.statistic === 'range'
      ? `${one.limit.lowText} to ${one.limit.highText}`
      : Number(one.limit.valueText),
    one.limit.unit,
    one.verdict.word,
  ]);
  addTable(
    sheet,
    limitHeader,
    [
      { header: 'Limit', width: 32 },
      { header: 'Month' },
      { header: 'Value', format: '0.####' },
      { header: 'Limit' },
      { header: 'Unit' },
      { header: 'Verdict', width: 17 },
    ],
    verdicts,
    { freeze: false },
  );
  return limitHeader + verdicts.length + 3;
}

/** Leak detection by sump and month. @returns the row of the next table's header */
function addLeakDetection(sheet: ExcelJS.Worksheet, quarter: Quarter, leakHeader: number): number {
  addTable(
    sheet,
    leakHeader,
    [
      { header: 'Leak detection' },
      { header: 'Month' },
      { header: 'Volume, m³', format: '0.000' },
      { header: 'Rate, L/ha·d', format: '0.0' },
      { header: 'Action rate, L/ha·d', format: '0.0' },
      { header: 'Verdict' },
    ],
    quarter.leakDetection.map((one): CellInput[] => [
      one.sumpCode,
      monthName(one.month),
      one.volumeM3 ?? 'not read',
      one.lPerHaDay ?? 'not read',
      one.actionRateLPerHaDay ?? '–',
      one.lPerHaDay === null || one.actionRateLPerHaDay === null
        ? 'cannot be judged'
        : one.lPerHaDay > one.actionRateLPerHaDay
          ? 'exceed'
          : 'pass',
    ]),
    { freeze: false },
  );
  return leakHeader + quarter.leakDetection.length + 3;
}

/** Stores from opening to closing. */
function addStores(sheet: ExcelJS.Worksheet, quarter: Quarter, storeHeader: number): void {
  addTable(
    sheet,
    storeHeader,
    [
      { header: 'Store' },
      { header: 'Month' },
      { header: 'Opening, m³', format: formats.m3 },
      { header: 'In, m³', format: formats.m3 },
      { header: 'Rain, m³', format: formats.m3 },
      { header: 'Out, m³', format: formats.m3 },
      { header: 'Evaporation, m³', format: formats.m3 },
      { header: 'Closing measured, m³', format: formats.m3 },
      { header: 'Unaccounted, m³', format: formats.difference },
      { header: 'Tolerance, m³', format: formats.m3 },
    ],
    quarter.stores.map(({ month, name, balance }, index): CellInput[] => {
      const row = storeHeader + 1 + index;
      if (!balance) return [name, monthName(month), 'no level', '–', '–', '–', '–', '–', '–', '–'];
      return [
        name,
        monthName(month),
        balance.openingM3,
        balance.inM3,
        balance.rainM3,
        balance.outM3,
        balance.evaporationM3,
        balance.measuredClosingM3,
        { formula: `H${row}-(C${row}+D${row}+E${row}-F${row}-G${row})`, result: balance.unaccountedM3 },
        balance.toleranceM3,
      ];
    }),
    { freeze: false },
  );
}

export interface CheckRow {
  what: string;
  formula: string;
  workbookValue: number;
  appValue: number;
}

const checkToleranceM3 = 1e-6;

/** Compares the workbook's own results with the application's numbers; the auditor's page. */
export function addChecksSheet(
  workbook: ExcelJS.Workbook,
  quarter: Quarter,
  title: string,
  context: {
    balanceLastRow: number;
    compare: CompareRows;
    siteRow: number;
    pumped: { firstRow: number; lastRow: number };
  },
): { checkCount: number; lastRow: number } {
  const { balanceLastRow, compare, siteRow, pumped } = context;
  const checks: CheckRow[] = quarter.cellMonths.flatMap((one, index): CheckRow[] => {
    const row = compare.firstRow + index;
    if (one.predictedM3 === null) return [];
    const predicted: CheckRow = {
      what: `${one.cellCode} predicted, ${monthName(one.month)}, m³`,
      formula: `Compare!D${row}`,
      workbookValue: one.predictedM3,
      appValue: one.predictedM3,
    };
    if (one.measuredM3 === null) return [predicted];
    const direct = quarter.days
      .filter((day) => day.cellCode === one.cellCode && day.month === one.month)
      .reduce((sum, day) => sum + day.volumeM3 * day.counts, 0);
    return [
      predicted,
      {
        what: `${one.cellCode} pumped, ${monthName(one.month)}, m³`,
        formula: `Compare!G${row}`,
        workbookValue: direct + one.allocatedM3,
        appValue: one.measuredM3,
      },
    ];
  });
  const total = quarter.cellMonths.reduce((sum, one) => sum + (one.predictedM3 ?? 0), 0);
  checks.push({
    what: 'Site predicted, quarter, m³',
    formula: `Summary!H${siteRow}`,
    workbookValue: total,
    appValue: total,
  });
  const pumpedTotal = quarter.days.reduce((sum, day) => sum + day.volumeM3 * day.counts, 0);
  checks.push({
    what: 'Sum of counted site days, m³',
    formula: `SUM(Pumped!Y${pumped.firstRow}:Y${pumped.lastRow})`,
    workbookValue: pumpedTotal,
    appValue: quarter.cellMonths.reduce((sum, one) => sum + (one.measuredM3 ?? 0) - one.allocatedM3, 0),
  });
  for (const [name, words] of [
    ['soilResidual', 'Soil'],
    ['wasteResidual', 'Waste'],
  ] as const) {
    const range = `Balance!${balanceColumn(name)}${balanceFirstRow}:${balanceColumn(name)}${balanceLastRow}`;
    checks.push({
      what: `${words} lines: largest left over, mm`,
      formula: `MAX(MAX(${range}),-MIN(${range}))`,
      workbookValue: 0,
      appValue: 0,
    });
  }
  const sheet = addSheet(workbook, 'Checks', `${title}: checks`, quarter.site.paperSize, false);
  sheet.getCell('A2').value =
    `Each line compares this workbook's own result with the application's number; more than ${checkToleranceM3} apart says LOOK.`;
  const rows = checks.map((check, index): CellInput[] => {
    const row = 4 + index;
    const difference = check.workbookValue - check.appValue;
    return [
      check.what,
      { formula: check.formula, result: check.workbookValue },
      check.appValue,
      { formula: `B${row}-C${row}`, result: difference },
      {
        formula: `IF(ABS(D${row})<=${checkToleranceM3},"OK","LOOK")`,
        result: Math.abs(difference) <= checkToleranceM3 ? 'OK' : 'LOOK',
      },
    ];
  });
  addTable(
    sheet,
    3,
    [
      { header: 'What', width: 44 },
      { header: 'Workbook', format: '#,##0.000' },
      { header: 'Application', format: '#,##0.000' },
      { header: 'Difference', format: '0.0E+00' },
      { header: 'Verdict', width: 10 },
    ],
    rows,
  );
  return { checkCount: checks.length, lastRow: 3 + checks.length };
}

export interface IssueWords {
  issue: number | null;
  signedBy: string | null;
  signedAt: string | null;
  certification: string | null;
  /** Why it was signed although something was open; null when nothing was. */
  reason: string | null;
  /** Newest link of the trail's chain when it was signed. */
  trailHead: string | null;
  changes: { name: string; issued: number; now: number }[];
  snapshotSha256: string;
}

const instantWords = (iso: string): string => `${dayName(iso.slice(0, 10))}, ${iso.slice(11, 16)} UTC`;

const contents: [string, string][] = [
  ['Summary', 'one page: leachate by cell, limits, leak detection, stores'],
  ['Inputs', 'parameters and constants with their source'],
  ['Balance', 'water balance, one row per plot and step'],
  ['Pumped', 'registers, intervals and site days'],
  ['Compare', 'predicted against pumped'],
  ['Lab', 'laboratory results as they came'],
  ['Loads', 'limits, verdicts and loads'],
  ['Checks', 'this workbook against the application'],
  ['Notes', 'missing days, estimates, edits, definitions'],
];

/** What the book is, for whom, of when, and how to read it. */
export function fillAboutSheet(
  sheet: ExcelJS.Worksheet,
  quarter: Quarter,
  words: IssueWords,
  checks: { checkCount: number; lastRow: number },
): void {
  const lines: (readonly [string, CellInput])[] = [
    ['Site', quarter.site.name],
    ['Period', `${dayName(firstDay(quarter.months[0]!))} to ${dayName(lastDay(quarter.months[2]!))}`],
    ['Issue', words.issue === null ? 'preview, not signed' : `issue ${words.issue}`],
    ['Signed', words.signedBy ? `${words.signedBy}, ${instantWords(words.signedAt!)}` : 'not signed'],
    ['Certification', words.certification ?? 'The words of the permit stand here when the report is signed.'],
    [
      'Checks',
      {
        formula: `IF(COUNTIF(Checks!E4:E${checks.lastRow},"OK")=${checks.checkCount},"All ${checks.checkCount} checks OK","LOOK at the Checks sheet")`,
        result: `All ${checks.checkCount} checks OK`,
      },
    ],
    ...(words.reason ? ([['Signed with open points', words.reason]] as const) : []),
    ['Made', instantWords(quarter.generatedAt)],
    ['Data snapshot, SHA-256', words.snapshotSha256],
    ['Trail when signed, SHA-256', words.trailHead ?? 'not signed'],
    [
      'Balance',
      `${quarter.run.kind === 'frozen' ? `frozen run ${quarter.run.number}` : 'working run, not accepted'}, engine ${quarter.run.engineVersion}, ${quarter.parameterSet}`,
    ],
  ];
  lines.forEach(([name, value], index) => {
    sheet.getCell(3 + index, 1).value = name;
    sheet.getCell(3 + index, 1).font = { name: 'Work Sans', size: 10, bold: true };
    sheet.getCell(3 + index, 2).value = value as ExcelJS.CellValue;
    sheet.getCell(3 + index, 2).alignment = { wrapText: true, vertical: 'top' };
  });
  sheet.getColumn(1).width = 26;
  sheet.getColumn(2).width = 90;
  const start = 3 + lines.length + 1;
  sheet.getCell(start, 1).value = 'Contents';
  contents.forEach(([name, what], index) => {
    sheet.getCell(start + 1 + index, 1).value = { text: name, hyperlink: `#'${name}'!A1` };
    sheet.getCell(start + 1 + index, 2).value = what;
  });
  const key = start + contents.length + 2;
  [
    'Blue on pale blue: entered. Black: computed.',
    'Marks: A apportioned, E estimated, L allocated; estimated and apportioned days are hatched as well.',
    'Missing is written as words: not read, no value, no flow that day. A blank is never a zero.',
  ].forEach((text, index) => {
    sheet.getCell(key + index, 1).value = index === 0 ? 'How to read' : '';
    sheet.getCell(key + index, 2).value = text;
  });
  words.changes.forEach((change, index) => {
    sheet.getCell(key + 4 + index, 1).value = index === 0 ? 'Changed since the last issue' : '';
    sheet.getCell(key + 4 + index, 2).value = `${change.name}: ${change.issued} → ${change.now}`;
  });
  sheet.views = [{ state: 'normal', activeCell: 'A1' }];
}
