import { cellText, type Sheet, type SheetRow } from '../sheets/sheet.ts';
import { readUnit } from './concentration-units.ts';
import type { LabColumn, SamplesDownLayout } from './detect-layout.ts';
import type { RawLabRow } from './lab-row.ts';

/** A unit is a word of its own at the end of a header, in brackets or after a blank; "-" alone is none. */
const isUnit = (text: string) => /[a-z]/i.test(text) && readUnit(text) !== null;

/**
 * Parameter and unit of a column header.
 * @example splitHeader('NH3-N (mg/L)') // { analyteText: 'NH3-N', unitText: 'mg/L' }
 */
export function splitHeader(text: string): { analyteText: string; unitText: string } {
  const match =
    /^(.*\S)\s*[([]\s*([^()[\]]+?)\s*[)\]]$/.exec(text) ?? /^(.*?[^\s,])[\s,]+(\S+(?: as \w+)?)$/.exec(text);
  return match && isUnit(match[2]!)
    ? { analyteText: match[1]!, unitText: match[2]! }
    : { analyteText: text, unitText: '' };
}

/** Rows that are no sample but speak of the columns: limits, units. */
type ColumnRow = 'reportingLimit' | 'detectionLimit' | 'unit';
const columnRowWords: [ColumnRow, RegExp][] = [
  ['reportingLimit', /^(rl|pql|loq|bg|reporting limits?|quantitation limits?)$/i],
  ['detectionLimit', /^(mdl|lod|dl|detection limits?)$/i],
  ['unit', /^(units?|einheit|uom)$/i],
];
const summaryWords = /^(average|avg|mean|min|max|minimum|maximum|median|total|sum)$/i;

/** What a row says of its columns, by its label, or because everything in it is a unit. */
function columnRowOf(row: SheetRow, layout: SamplesDownLayout): ColumnRow | null {
  const labels = Object.values(layout.columns).map((index) => cellText(row.cells[index]));
  const named = columnRowWords.find(([, words]) => labels.some((label) => words.test(label)));
  if (named) return named[0];
  const values = layout.analytes.map((one) => cellText(row.cells[one.valueColumn])).filter(Boolean);
  return values.length > 0 && values.every(isUnit) ? 'unit' : null;
}

export interface SamplesDownReading {
  rows: RawLabRow[];
  skipped: { row: SheetRow; why: string }[];
}

/**
 * A table with a sample in each row and a parameter in each column; units stand in the header or in a row of their own,
 * limits in a row of their own.
 * @param rawRow the row as a long list would give it, for one value column
 */
export function readSamplesDown(
  sheet: Sheet,
  layout: SamplesDownLayout,
  rawRow: (row: SheetRow, valueColumn: number) => RawLabRow,
): SamplesDownReading {
  const reading: SamplesDownReading = { rows: [], skipped: [] };
  const ofColumns = new Map<ColumnRow, SheetRow>();
  const samples: SheetRow[] = [];
  const at = (row: SheetRow, name: LabColumn) =>
    layout.columns[name] === undefined ? '' : cellText(row.cells[layout.columns[name]]);
  for (const row of sheet.rows.filter((one) => one.number > layout.headerRow)) {
    const name = columnRowOf(row, layout);
    if (name) {
      ofColumns.set(name, row);
      reading.skipped.push({ row, why: name === 'unit' ? 'units of the columns' : 'limits of the columns' });
    } else if ([at(row, 'sampled'), at(row, 'point')].some((label) => summaryWords.test(label)))
      reading.skipped.push({ row, why: 'summary row, not a sample' });
    else if (!layout.analytes.some((one) => cellText(row.cells[one.valueColumn])) || !at(row, 'sampled'))
      reading.skipped.push({ row, why: 'note under the table' });
    else samples.push(row);
  }
  const ofColumn = (name: ColumnRow, column: number) => cellText(ofColumns.get(name)?.cells[column]);
  // One column of marks for several parameters speaks of the sample: nobody knows which of them it means.
  const isMarkOfRow =
    layout.analytes.length > 1 &&
    layout.analytes.filter((one) => one.own.qualifier !== undefined).length === 1;
  for (const row of samples)
    for (const { analyteText, unitText, valueColumn, own } of layout.analytes) {
      const beside = (name: LabColumn) => (own[name] === undefined ? '' : cellText(row.cells[own[name]]));
      const mark = isMarkOfRow ? at(row, 'qualifier') : '';
      reading.rows.push({
        ...rawRow(row, valueColumn),
        analyteText,
        unitText: beside('unit') || unitText || ofColumn('unit', valueColumn),
        reportingLimitText: beside('reportingLimit') || ofColumn('reportingLimit', valueColumn),
        detectionLimitText: beside('detectionLimit') || ofColumn('detectionLimit', valueColumn),
        qualifierText: isMarkOfRow ? '' : beside('qualifier'),
        commentText: [mark && `mark ${mark} for the whole row`, at(row, 'comment')]
          .filter(Boolean)
          .join('; '),
      });
    }
  return reading;
}
