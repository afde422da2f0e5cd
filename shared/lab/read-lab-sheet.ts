import { cellText, columnLetter, type Sheet, type SheetRow } from '../sheets/sheet.ts';
import {
  detectLayout,
  type CrosstabLayout,
  type LabColumn,
  type LabLayout,
  type LongLayout,
} from './detect-layout.ts';
import type { RawLabRow } from './lab-row.ts';
import { readSamplesDown } from './read-samples-down.ts';

export interface SkippedRow {
  sheet: string;
  rowNumber: number;
  text: string;
  why: string;
}

export interface LabReading {
  layout: LabLayout | null;
  rows: RawLabRow[];
  skipped: SkippedRow[];
  jobNumber: string | null;
  /** Letters and words of a qualifier key printed with the table. */
  qualifierKey: { letter: string; words: string }[];
}

const rowText = (row: SheetRow) => row.cells.map(cellText).filter(Boolean).join(' ');

/** Job number in the letterhead: "Job: 26-0147". */
function findJobNumber(sheet: Sheet, headerRow: number): string | null {
  for (const row of sheet.rows.filter((one) => one.number < headerRow)) {
    const texts = row.cells.map(cellText).filter(Boolean);
    for (const [index, text] of texts.entries()) {
      const match = /^job(?: no\.?| number)?\s*:?\s*(\S+)?$/i.exec(text);
      if (match) return match[1] ?? texts[index + 1] ?? null;
    }
  }
  return null;
}

const keyOf = (text: string) =>
  [...text.matchAll(/(?:^|[;,.]\s*)([A-Z]{1,2})\s*[=:]\s*([^;]+)/g)].map((match) => ({
    letter: match[1]!,
    words: match[2]!.trim(),
  }));

function rawRow(sheet: Sheet, row: SheetRow, columns: LongLayout['columns'], valueColumn: number): RawLabRow {
  const at = (name: LabColumn) => (columns[name] === undefined ? '' : cellText(row.cells[columns[name]]));
  return {
    sheet: sheet.name,
    rowNumber: row.number,
    cell: `${columnLetter(valueColumn)}${row.number}`,
    // Without a column of points the laboratory's own number has to name the sample.
    pointText: columns.point === undefined ? at('laboratoryNumber') : at('point'),
    sampledText: [at('sampled'), at('time')].filter(Boolean).join(' '),
    analyteText: at('analyte'),
    fractionText: '',
    cas: at('cas'),
    resultText: cellText(row.cells[valueColumn]),
    isNumberCell: row.cells[valueColumn]?.kind === 'number',
    unitText: at('unit'),
    reportingLimitText: at('reportingLimit'),
    reportingLimitUnitText: at('reportingLimitUnit'),
    detectionLimitText: at('detectionLimit'),
    qualifierText: at('qualifier'),
    dilutionText: at('dilution'),
    kindText: at('kind'),
    laboratoryNumber: at('laboratoryNumber'),
    commentText: at('comment'),
  };
}

function readLongList(sheet: Sheet, layout: LongLayout, reading: LabReading): void {
  const { columns } = layout;
  for (const row of sheet.rows.filter((one) => one.number > layout.headerRow)) {
    const analyte = cellText(row.cells[columns.analyte!]);
    const result = cellText(row.cells[columns.result!]);
    if (!analyte || (!result && row.cells.filter(Boolean).length < 3)) {
      const text = rowText(row);
      reading.qualifierKey.push(...keyOf(text));
      reading.skipped.push({ sheet: sheet.name, rowNumber: row.number, text, why: 'note under the table' });
      continue;
    }
    if (/^(average|avg|mean|total|sum)$/i.test(analyte)) {
      reading.skipped.push({
        sheet: sheet.name,
        rowNumber: row.number,
        text: rowText(row),
        why: 'summary row, not a sample',
      });
      continue;
    }
    reading.rows.push(rawRow(sheet, row, columns, columns.result!));
  }
}

/** A section row gives its fraction to the rows under it, until the next section row. */
const sectionFraction = (text: string) =>
  /\bdissolved\b/i.test(text)
    ? 'dissolved'
    : /\btotal recoverable\b/i.test(text)
      ? 'total recoverable'
      : /\btotal\b/i.test(text)
        ? 'total'
        : '';

function readCrosstab(sheet: Sheet, layout: CrosstabLayout, reading: LabReading): void {
  const { columns, samples } = layout;
  let fractionText = '';
  for (const row of sheet.rows.filter((one) => one.number > layout.headerRow)) {
    const analyte = cellText(row.cells[columns.analyte!]);
    const filled = row.cells.filter((cell) => cellText(cell) !== '').length;
    if (analyte && filled === 1) {
      fractionText = sectionFraction(analyte);
      const key = keyOf(analyte);
      reading.qualifierKey.push(...key);
      reading.skipped.push({
        sheet: sheet.name,
        rowNumber: row.number,
        text: analyte,
        why: key.length ? 'note under the table' : 'heading of a section',
      });
      continue;
    }
    if (!analyte) {
      reading.skipped.push({
        sheet: sheet.name,
        rowNumber: row.number,
        text: rowText(row),
        why: 'no parameter in this row',
      });
      continue;
    }
    for (const sample of samples) {
      const base = rawRow(sheet, row, columns, sample.valueColumn);
      reading.rows.push({
        ...base,
        pointText: sample.point,
        sampledText: sample.sampledText,
        fractionText,
        reportingLimitText:
          sample.limitColumn === null ? base.reportingLimitText : cellText(row.cells[sample.limitColumn]),
      });
    }
  }
}

/**
 * Reads every visible sheet of a file that holds results, whatever its layout, without looking anything up.
 * Hidden sheets are reported by the file's notes, never read silently.
 */
export function readLabSheets(sheets: readonly Sheet[]): LabReading {
  const reading: LabReading = { layout: null, rows: [], skipped: [], jobNumber: null, qualifierKey: [] };
  for (const sheet of sheets.filter((one) => !one.isHidden)) {
    const layout = detectLayout(sheet);
    if (!layout) continue;
    reading.layout ??= layout;
    reading.jobNumber ??= findJobNumber(sheet, layout.headerRow);
    if (layout.shape === 'long-list') readLongList(sheet, layout, reading);
    else if (layout.shape === 'crosstab') readCrosstab(sheet, layout, reading);
    else {
      const { rows, skipped } = readSamplesDown(sheet, layout, (row, valueColumn) =>
        rawRow(sheet, row, layout.columns, valueColumn),
      );
      reading.rows.push(...rows);
      for (const { row, why } of skipped) {
        const text = rowText(row);
        reading.qualifierKey.push(...keyOf(text));
        reading.skipped.push({ sheet: sheet.name, rowNumber: row.number, text, why });
      }
    }
  }
  return reading;
}
