import type ExcelJS from 'exceljs';
import { monthName } from '#shared/calendar/month.ts';
import type { Quarter } from '../../features/reports/quarter.ts';
import { addSheet, addTable, dayDate, formats, monthDate, type CellInput } from './sheet-tools.ts';

/** Laboratory results, one per row, as they came. */
export function addLabSheet(workbook: ExcelJS.Workbook, quarter: Quarter, title: string): void {
  const sheet = addSheet(workbook, 'Lab', `${title}: laboratory results`, quarter.site.paperSize, true);
  sheet.getCell('A2').value =
    'Qualifier "<" stands before the limit the laboratory gives; it is not the value. Text is kept as the laboratory wrote it.';
  addTable(
    sheet,
    3,
    [
      { header: 'Sample point', width: 14 },
      { header: 'Sampled on', format: formats.day },
      { header: 'Parameter', width: 24 },
      { header: 'Fraction' },
      { header: 'Qualifier', width: 9 },
      { header: 'Value', format: formats.concentration },
      { header: 'Unit' },
      { header: 'Laboratory letter', width: 10 },
      { header: 'As written', width: 14 },
      { header: 'Laboratory', width: 22 },
      { header: 'Sheet and cell', width: 20 },
    ],
    quarter.results.map((one): CellInput[] => [
      one.pointCode,
      dayDate(one.siteDay),
      one.analyteName,
      one.fraction || '–',
      one.comparator === '=' ? '' : one.comparator,
      one.value ?? `no result: ${one.missingReason ?? ''}`,
      one.unit,
      one.qualifier ?? '',
      one.rawText,
      one.laboratory,
      one.file,
    ]),
  );
}

/** Every limit of every month with its value, ratio and verdict; loads are computed from flow and concentration. */
export function addLoadsSheet(
  workbook: ExcelJS.Workbook,
  quarter: Quarter,
  title: string,
): { loadRows: { row: number; value: number }[]; verdictRows: { firstRow: number; lastRow: number } } {
  const sheet = addSheet(workbook, 'Loads', `${title}: limits and loads`, quarter.site.paperSize, true);
  sheet.getCell('A2').value =
    'Load, kg/d = flow, m³/d × concentration, mg/L × 0.001. Verdict words: pass, exceed, incomplete, cannot be judged, no discharge, not required.';
  const headerRow = 3;
  const rows = quarter.verdicts.map((one, index): CellInput[] => {
    const row = headerRow + 1 + index;
    const value = one.verdict.valueText === null ? null : Number(one.verdict.valueText.replace('<', ''));
    const limit =
      one.limit.statistic === 'range'
        ? `${one.limit.lowText} to ${one.limit.highText}`
        : Number(one.limit.valueText);
    const ratio = typeof limit === 'number' && value !== null && limit !== 0 ? value / limit : null;
    return [
      one.pointCode,
      one.analyteName,
      one.limit.fraction || '–',
      one.limit.quantity,
      one.limit.statistic.replace('-', ' '),
      monthDate(one.month),
      one.verdict.sampleCount,
      value ?? 'no value',
      limit,
      one.limit.unit,
      ratio === null ? '–' : { formula: `H${row}/I${row}`, result: ratio },
      one.verdict.word,
      one.verdict.sentence,
      one.verdict.note ?? '',
      one.limit.citation,
      one.limit.confirmedAt ? 'confirmed' : 'template',
    ];
  });
  addTable(
    sheet,
    headerRow,
    [
      { header: 'Sample point', width: 12 },
      { header: 'Parameter', width: 20 },
      { header: 'Fraction' },
      { header: 'Kind', width: 14 },
      { header: 'Statistic', width: 16 },
      { header: 'Month', format: formats.month },
      { header: 'Samples', width: 9 },
      { header: 'Value', format: '0.####' },
      { header: 'Limit', width: 12 },
      { header: 'Unit' },
      { header: 'Share of limit', format: formats.share },
      { header: 'Verdict', width: 17 },
      { header: 'Working', width: 60 },
      { header: 'Under another rule', width: 40 },
      { header: 'Citation', width: 22 },
      { header: 'Limit is', width: 11 },
    ],
    rows,
  );
  const loadHeader = headerRow + rows.length + 3;
  sheet.getCell(loadHeader - 1, 1).value = 'Daily loads';
  const loadRows: { row: number; value: number }[] = [];
  const loads = quarter.verdicts
    .filter((one) => one.limit.quantity === 'load')
    .flatMap((one) => one.verdict.days.map((day) => ({ one, day })));
  const table = loads.map(({ one, day }, index): CellInput[] => {
    const row = loadHeader + 1 + index;
    if (day.flowM3 === null)
      return [
        one.pointCode,
        one.analyteName,
        dayDate(day.siteDay),
        'no flow that day',
        '–',
        '–',
        'cannot be judged',
      ];
    const flow = Number(day.flowM3);
    const load = Number(day.valueText.replace('<', ''));
    const concentration =
      one.limit.unit === 'kg/d' && flow > 0 ? concentrationOf(quarter, one, day.siteDay) : null;
    if (concentration === null)
      return [
        one.pointCode,
        one.analyteName,
        dayDate(day.siteDay),
        flow,
        '–',
        load,
        day.exceeds ? 'exceed' : 'pass',
      ];
    loadRows.push({ row, value: (flow * concentration) / 1000 });
    return [
      one.pointCode,
      one.analyteName,
      dayDate(day.siteDay),
      flow,
      concentration,
      { formula: `D${row}*E${row}*0.001`, result: (flow * concentration) / 1000 },
      day.exceeds ? 'exceed' : 'pass',
    ];
  });
  addTable(
    sheet,
    loadHeader,
    [
      { header: 'Sample point' },
      { header: 'Parameter' },
      { header: 'Day', format: formats.day },
      { header: 'Flow, m³/d', format: '#,##0.0' },
      { header: 'Counted concentration, mg/L', format: formats.concentration },
      { header: 'Load, kg/d', format: formats.load },
      { header: 'Against the limit' },
    ],
    table,
    { freeze: false },
  );
  return {
    loadRows,
    verdictRows: { firstRow: headerRow + 1, lastRow: headerRow + Math.max(1, rows.length) },
  };
}

/** Concentration a load was computed with: the day's mean, values below detection by the limit's rule. */
function concentrationOf(quarter: Quarter, one: Quarter['verdicts'][number], siteDay: string): number | null {
  const own = quarter.results.filter(
    (row) =>
      row.pointCode === one.pointCode &&
      row.analyteName === one.analyteName &&
      row.siteDay === siteDay &&
      row.value !== null &&
      row.fraction === one.limit.fraction,
  );
  if (!own.length) return null;
  const share = { zero: 0, half: 0.5, full: 1, carried: 1 }[one.limit.belowDetectionRule];
  return (
    own.reduce((sum, row) => sum + (row.comparator === '<' ? row.value! * share : row.value!), 0) / own.length
  );
}

/** Site constants and parameters, one per row; about a dozen have names that formulas use. */
export function addInputsSheet(workbook: ExcelJS.Workbook, quarter: Quarter, title: string): void {
  const sheet = addSheet(workbook, 'Inputs', `${title}: inputs`, quarter.site.paperSize, false);
  sheet.getCell('A2').value =
    'Blue on pale blue: a value somebody entered. Everything black on other sheets is computed.';
  const p = quarter.parameters;
  const rows: [string, CellInput, string, string, string][] = [
    [
      'Recession constant of the waste',
      p.recessionPerMonth,
      '1/month',
      quarter.parameterSet,
      'Recession_per_month',
    ],
    ['Channelled share', p.channelledFraction, '–', quarter.parameterSet, 'Channelled_share'],
    ['Leak share', p.leakFraction, '–', quarter.parameterSet, 'Leak_share'],
    ['Runoff factor', p.runoffFactor, '–', quarter.parameterSet, 'Runoff_factor'],
    ['Evapotranspiration factor', p.petFactor, '–', quarter.parameterSet, 'PET_factor'],
    ['Floor under which percent is muted', p.percentFloorMm, 'mm', quarter.parameterSet, 'Percent_floor_mm'],
    ['Method of potential ET', p.petMethod, '–', quarter.parameterSet, ''],
    ['Soil law', p.soilLaw, '–', quarter.parameterSet, ''],
    ['Latitude', Number(quarter.site.latitudeDeg), '°', 'site', 'Latitude_deg'],
    [
      'Run',
      quarter.run.kind === 'frozen' ? `frozen run ${quarter.run.number}` : 'working run, not accepted',
      '–',
      `engine ${quarter.run.engineVersion}`,
      '',
    ],
    ['SHA-256 of the run’s input', quarter.run.inputSha256, '–', 'engine input as canonical JSON', ''],
  ];
  const first = addTable(
    sheet,
    3,
    [
      { header: 'Name', width: 36 },
      { header: 'Value', width: 22 },
      { header: 'Unit' },
      { header: 'Source', width: 40 },
      { header: 'Name in formulas', width: 22 },
    ],
    rows,
    { inputColumns: [1] },
  );
  rows.forEach(([, , , , name], index) => {
    if (name) sheet.getCell(first + index, 2).name = name;
  });
}

/** Missing days, estimates, edits with their reason, and definitions. */
export function addNotesSheet(workbook: ExcelJS.Workbook, quarter: Quarter, title: string): void {
  const sheet = addSheet(workbook, 'Notes', `${title}: notes and data quality`, quarter.site.paperSize, true);
  const estimated = quarter.cellMonths
    .filter((one) => one.estimatedM3 > 0)
    .map(
      (one) =>
        `${one.cellCode} ${monthName(one.month)}: ${((100 * one.estimatedM3) / (one.measuredM3 ?? one.estimatedM3)).toFixed(1)} % estimated`,
    );
  sheet.getCell('A2').value = estimated.length
    ? `Estimated: ${estimated.join('; ')}.`
    : 'No estimated volume among the leachate of the cells in this quarter.';
  addTable(
    sheet,
    3,
    [
      { header: 'When', width: 14 },
      { header: 'What', width: 24 },
      { header: 'Note', width: 100 },
    ],
    [
      ...quarter.notes.map((one): CellInput[] => [one.when, one.subject, one.sentence]),
      [
        '',
        'Definitions',
        'Measured: between readings at most 36 h apart. Apportioned: measured over a longer time and spread evenly. Estimated: entered with a method and its inputs. Allocated: a share of a common header.',
      ],
      [
        '',
        'Caution',
        'A computed pass is not a compliance determination: the permit and the laboratory’s report govern. Head and leakage formulas are design checks, not a proof that a liner is sound.',
      ],
    ],
  );
}
