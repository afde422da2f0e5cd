/** One result as the sheet gives it, before anything is looked up. */
export interface RawLabRow {
  sheet: string;
  rowNumber: number;
  cell: string;
  pointText: string;
  sampledText: string;
  analyteText: string;
  /** Fraction that a section row or column gives to its rows. */
  fractionText: string;
  cas: string;
  resultText: string;
  /** A true number of the workbook, whose decimal mark nobody has to guess. */
  isNumberCell: boolean;
  unitText: string;
  reportingLimitText: string;
  reportingLimitUnitText: string;
  detectionLimitText: string;
  qualifierText: string;
  dilutionText: string;
  kindText: string;
  laboratoryNumber: string;
  /** What the laboratory wrote beside the row. */
  commentText: string;
}

export type LabRowState = 'ok' | 'warned' | 'held' | 'skipped';

/** A row as it will be written, with what was noticed on the way. */
export interface LabRow extends RawLabRow {
  state: LabRowState;
  messages: string[];
  /** Question that holds the row, with what an answer would be remembered for. */
  question: {
    kind: 'sample-point' | 'analyte' | 'unit' | 'qualifier' | 'limit' | 'equal-to-limit' | 'value' | 'date';
    text: string;
  } | null;
  samplePointId: string | null;
  analyteId: string | null;
  fraction: string;
  sampledOn: string | null;
  sampledTime: string | null;
  comparator: '=' | '<' | '>' | '~';
  value: string | null;
  unit: string;
  reportingLimit: string | null;
  detectionLimit: string | null;
  qualifier: string | null;
  qualifierMeaning: string | null;
  missingReason: string | null;
  printedDecimals: number | null;
  /** Result in the record that this row replaces, with its value as words. */
  supersedesId: string | null;
  supersedesWords: string | null;
}

/** Keeps a row out of the record until its question is answered. */
export function hold(row: LabRow, kind: NonNullable<LabRow['question']>['kind'], text: string): void {
  row.state = 'held';
  row.messages.push(text);
  row.question ??= { kind, text };
}

/** Says what was noticed; the row is written all the same. */
export function warn(row: LabRow, text: string): void {
  if (row.state === 'ok') row.state = 'warned';
  row.messages.push(text);
}
