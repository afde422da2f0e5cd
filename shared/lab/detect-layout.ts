import { cellText, type Sheet } from '../sheets/sheet.ts';
import { splitHeader } from './read-samples-down.ts';

export type LabColumn =
  | 'point'
  | 'sampled'
  | 'analyte'
  | 'result'
  | 'unit'
  | 'reportingLimit'
  | 'reportingLimitUnit'
  | 'detectionLimit'
  | 'qualifier'
  | 'cas'
  | 'dilution'
  | 'kind'
  | 'laboratoryNumber'
  | 'comment'
  | 'time'
  | 'sampler';

const headerWords: [LabColumn, RegExp][] = [
  ['reportingLimitUnit', /^(rl|reporting limit|pql) ?units?$/],
  ['reportingLimit', /^(rl|pql|loq|bg|reporting limit|quantitation limit)$/],
  ['detectionLimit', /^(mdl|lod|dl|detection limit)$/],
  [
    'point',
    /^(client id|client sample id|our no\.?|sample ?point|point|site|station|location|probe|sample id|sample)$/,
  ],
  [
    'sampled',
    /^(sampled|sampled on|sample date|collected|collection date|taken on|date|datum|date sampled)$/,
  ],
  ['analyte', /^(parameter|param|analyte|substance|test|determinand|compound)$/],
  ['result', /^(result|results|found|value|wert|concentration)$/],
  ['unit', /^(units?|einheit|uom)$/],
  ['qualifier', /^(qualifier|qual|flag|mark|q)$/],
  ['cas', /^cas( no\.?| number)?$/],
  ['dilution', /^(dil\.?|dilution|df|dilution factor)$/],
  ['kind', /^(kind|type|sample type|qc type)$/],
  ['laboratoryNumber', /^(lab no\.?|lab id|lab sample id|laboratory number|ref)$/],
  ['comment', /^(comments?|remarks?|notes?)$/],
  ['time', /^(time|sample time|time sampled|uhrzeit)$/],
  ['sampler', /^(sampler|sampled by|taken by|initials|init)$/],
];

export interface LongLayout {
  shape: 'long-list';
  headerRow: number;
  columns: Partial<Record<LabColumn, number>>;
}

export interface CrosstabLayout {
  shape: 'crosstab';
  headerRow: number;
  columns: Partial<Record<LabColumn, number>>;
  samples: { point: string; sampledText: string; valueColumn: number; limitColumn: number | null }[];
}

/** Samples down, parameters across. */
export interface SamplesDownLayout {
  shape: 'samples-down';
  headerRow: number;
  columns: Partial<Record<LabColumn, number>>;
  analytes: {
    analyteText: string;
    unitText: string;
    valueColumn: number;
    /** Columns that stand between this parameter and the next: its limit, its mark, its unit. */
    own: Partial<Record<LabColumn, number>>;
  }[];
}

export type LabLayout = LongLayout | CrosstabLayout | SamplesDownLayout;

/** Columns that may stand beside each parameter. */
const beside: ReadonlySet<LabColumn> = new Set(['reportingLimit', 'detectionLimit', 'qualifier', 'unit']);

const columnOf = (text: string): LabColumn | null =>
  headerWords.find(([, pattern]) => pattern.test(text.toLowerCase()))?.[0] ?? null;

/** Header text of a cell, taking the value of the merged range it lies in. */
function fannedOut(sheet: Sheet, rowNumber: number, columnIndex: number): string {
  const row = sheet.rows.find((one) => one.number === rowNumber);
  const own = cellText(row?.cells[columnIndex]);
  if (own) return own;
  const merge = sheet.merges.find(
    (one) =>
      one.top <= rowNumber &&
      one.bottom >= rowNumber &&
      one.left <= columnIndex + 1 &&
      one.right >= columnIndex + 1,
  );
  return merge ? cellText(sheet.rows.find((one) => one.number === merge.top)?.cells[merge.left - 1]) : '';
}

const looksLikeDate = (text: string) =>
  /^\d{4}-\d{2}-\d{2}|^\d{1,2}[./-](\d{1,2}|[A-Za-z]{3})[./-]\d{2,4}/.test(text);

/** Columns of samples in a crosstab: a date over each value column, the point in the row above, "RL" beside it. */
function crosstabSamples(sheet: Sheet, headerRow: number, headers: string[]): CrosstabLayout['samples'] {
  const above = sheet.rows.filter((row) => row.number < headerRow).at(-1)?.number ?? headerRow;
  return headers.flatMap((header, column) => {
    if (!looksLikeDate(header)) return [];
    const point = fannedOut(sheet, above, column);
    const limitColumn = columnOf(headers[column + 1] ?? '') === 'reportingLimit' ? column + 1 : null;
    return point ? [{ point, sampledText: header, valueColumn: column, limitColumn }] : [];
  });
}

/** Parameters of a header row with samples down: every header that is no column of another kind. */
function analytesAcross(headers: readonly string[]): SamplesDownLayout['analytes'] {
  const analytes: SamplesDownLayout['analytes'] = [];
  headers.forEach((header, index) => {
    const name = columnOf(header);
    const last = analytes.at(-1);
    if (header && name === null) analytes.push({ ...splitHeader(header), valueColumn: index, own: {} });
    else if (name && last && beside.has(name)) last.own[name] ??= index;
  });
  return analytes;
}

/**
 * Finds the header row of a sheet and says how it is laid out; null when there is no table of results.
 * A long list has a result column; a crosstab has analytes down and samples across, or the other way round.
 */
export function detectLayout(sheet: Sheet): LabLayout | null {
  for (const row of sheet.rows.slice(0, 60)) {
    const headers = row.cells.map(cellText);
    const columns: Partial<Record<LabColumn, number>> = {};
    headers.forEach((header, index) => {
      const name = columnOf(header);
      if (name && columns[name] === undefined) columns[name] = index;
    });
    if (columns.analyte === undefined) {
      const analytes = analytesAcross(headers);
      if (columns.sampled === undefined || columns.point === undefined || !analytes.length) continue;
      return { shape: 'samples-down', headerRow: row.number, columns, analytes };
    }
    if (columns.result !== undefined) return { shape: 'long-list', headerRow: row.number, columns };
    const samples = crosstabSamples(sheet, row.number, headers);
    if (samples.length) return { shape: 'crosstab', headerRow: row.number, columns, samples };
  }
  return null;
}
