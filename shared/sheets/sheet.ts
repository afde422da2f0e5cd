/** One cell of an uploaded sheet as it was stored and as it looks. */
export type SheetCell =
  | { kind: 'text'; text: string }
  | { kind: 'number'; text: string; value: number }
  /** A true date of the workbook, as plain calendar text; time is empty for a whole day. */
  | { kind: 'date'; text: string; day: string; time: string }
  | { kind: 'boolean'; text: string }
  /** An error of the sheet, or a formula without a stored result. */
  | { kind: 'error'; text: string };

export interface SheetRow {
  number: number;
  isHidden: boolean;
  /** By column index from 0; null for an empty cell. */
  cells: (SheetCell | null)[];
}

export interface Sheet {
  name: string;
  isHidden: boolean;
  rows: SheetRow[];
  /** Merged ranges by row and column numbers from 1. */
  merges: { top: number; left: number; bottom: number; right: number }[];
}

export interface SheetFile {
  sheets: Sheet[];
  /** What was detected about the file, in words. */
  notes: string[];
}

/** @example columnLetter(0) // 'A' */
export function columnLetter(index: number): string {
  const rest = Math.floor(index / 26);
  return (rest > 0 ? columnLetter(rest - 1) : '') + String.fromCharCode(65 + (index % 26));
}

/** Text of a cell with odd spaces and a leading apostrophe removed; '' for an empty cell. */
export const cellText = (cell: SheetCell | null | undefined): string =>
  cell
    ? cell.text
        .replace(/[\u00a0\u2009\u202f\s]+/g, ' ')
        .trim()
        .replace(/^'/, '')
    : '';
