import { Decimal } from 'decimal.js';
import type { Day } from '../calendar/day.ts';
import { basisFactor, readUnit } from './concentration-units.ts';
import { compareSamples } from './compare-sample.ts';
import { compareWithHistory, type LabHistory } from './compare-with-history.ts';
import { settleEqualToLimit, sheetsThatSayBelow, type EqualToLimit } from './equal-to-limit.ts';
import { hold, warn, type LabRow, type RawLabRow } from './lab-row.ts';
import { decimalMarkOf, isEitherWay, withPoint, type DecimalMark } from './decimal-mark.ts';
import { parseResultText, type ResultText } from './parse-result-text.ts';
import { resolveAnalyte } from './resolve-analyte.ts';
import { mappingKey, tidyName } from './tidy-name.ts';
import { dateOrderOf, resolveDate } from './resolve-date.ts';

export interface LabCatalog {
  points: { id: string; code: string; aliases: string[] }[];
  analytes: {
    id: string;
    code: string;
    name: string;
    cas: string | null;
    basis: string | null;
    defaultFraction: string | null;
    standardUnit: string;
    aliases: string[];
  }[];
  /** The laboratory's own letters, in capitals. */
  qualifiers: ReadonlyMap<string, string>;
  /** Remembered answers of the laboratory: kind and tidy text to value. */
  mappings: ReadonlyMap<string, string>;
  /** Live results of the site by `point analyte fraction day`. */
  existing: ReadonlyMap<string, { id: string; comparator: string; value: string | null; unit: string }>;
  history: LabHistory;
  receivedOn: Day;
  /** 'YYYY-MM-DDTHH:MM' on the site's wall clock. */
  localTime: (instantMs: number) => string;
  /** What a person said once for the whole file. */
  answers: { dateOrder: 'day-first' | 'month-first' | null; equalToLimit: EqualToLimit | null };
}

function emptyRow(raw: RawLabRow): LabRow {
  return {
    ...raw,
    state: 'ok',
    messages: [],
    question: null,
    samplePointId: null,
    analyteId: null,
    fraction: '',
    sampledOn: null,
    sampledTime: null,
    comparator: '=',
    value: null,
    unit: '',
    reportingLimit: null,
    detectionLimit: null,
    qualifier: null,
    qualifierMeaning: null,
    missingReason: null,
    printedDecimals: null,
    supersedesId: null,
    supersedesWords: null,
  };
}

/** A spreadsheet drops the zeros in front of a name made of digits. */
const isSameName = (own: string, other: string): boolean =>
  own === other || (/^\d+$/.test(own + other) && Number(own) === Number(other));

function resolvePoint(row: LabRow, catalog: LabCatalog): void {
  const tidy = tidyName(row.pointText);
  const mapped = catalog.mappings.get(mappingKey('sample-point', row.pointText));
  const point = catalog.points.find(
    (one) => one.id === mapped || [one.code, ...one.aliases].some((own) => isSameName(tidyName(own), tidy)),
  );
  if (/^\d(\.\d+)?e\+?\d+$/i.test(row.pointText))
    hold(
      row,
      'value',
      `"${row.pointText}" lost its last digits in a spreadsheet: it names no sample any more.`,
    );
  else if (!row.pointText) hold(row, 'sample-point', 'No sample point is given in this row.');
  else if (!point) hold(row, 'sample-point', `Sample point "${row.pointText}" is not known here.`);
  else row.samplePointId = point.id;
}

/** Converts a number text into the analyte's unit and basis, exact, without losing printed digits. */
function convert(valueText: string, factors: readonly string[]): string {
  const value = factors.reduce((product, factor) => product.times(factor), new Decimal(valueText));
  return value.toSignificantDigits(12).toFixed();
}

const isPlainNumber = (text: string) => /^\d*\.?\d+$/.test(text.replace(/,/g, ''));
const limitText = (text: string) => text.replace(/,/g, text.includes('.') || /,\d{3}$/.test(text) ? '' : '.');

const lostSample = /\b(broken|lost|spilled|spilt|leaked|cracked)\b/i;

function applyText(row: LabRow, text: ResultText, factors: string[], limitFactors: string[]): void {
  if (isPlainNumber(row.reportingLimitText))
    row.reportingLimit = convert(limitText(row.reportingLimitText), limitFactors);
  if (isPlainNumber(row.detectionLimitText))
    row.detectionLimit = convert(limitText(row.detectionLimitText), limitFactors);
  if (text.kind === 'missing') {
    row.missingReason =
      !row.resultText && lostSample.test(row.commentText) ? 'sample broken or lost' : text.reason;
    warn(
      row,
      text.reason === 'pending'
        ? 'Still pending: a late result to be filled.'
        : `No result: ${row.missingReason}.`,
    );
  } else if (text.kind === 'question') hold(row, 'value', text.sentence);
  else if (text.kind === 'below') {
    const limit = text.limitText
      ? convert(text.limitText, factors)
      : (row.reportingLimit ?? row.detectionLimit);
    if (limit === null)
      return hold(row, 'limit', `"${row.resultText}" gives no limit. ND alone is not zero and not a number.`);
    row.comparator = '<';
    row.value = limit;
    row.qualifier = text.qualifier;
    row.reportingLimit ??= limit;
  } else {
    row.comparator = text.comparator;
    row.value = convert(text.valueText, factors);
    row.qualifier = text.qualifier;
    row.printedDecimals = text.valueText.split('.')[1]?.length ?? 0;
    if (row.unit === 'pH' && new Decimal(row.value).gt(14))
      return hold(row, 'value', `pH ${row.resultText}: pH lies between 0 and 14. Ask the laboratory.`);
    if (new Decimal(row.value).isZero() && row.unit === 'mg/L')
      warn(row, 'A true zero? Most laboratories cannot report zero.');
  }
}

/**
 * Reads the result by the decimal mark of its column, else of its sheet. A number that still reads two ways is
 * settled by the limit beside it, or asked about.
 */
function readResult(row: LabRow, mark: DecimalMark | null): ResultText {
  if (row.isNumberCell) return parseResultText(row.resultText);
  if (mark) {
    const text = withPoint(row.resultText, mark);
    if (isEitherWay(row.resultText))
      warn(row, `"${row.resultText}" read as ${text}: other values of the column divide by a ${mark}.`);
    row.reportingLimitText = withPoint(row.reportingLimitText, mark);
    row.detectionLimitText = withPoint(row.detectionLimitText, mark);
    return parseResultText(text);
  }
  const text = parseResultText(row.resultText);
  if ((text.kind !== 'value' && text.kind !== 'below') || text.isGroupedOrDecimal === null) return text;
  const grouped = text.kind === 'value' ? text.valueText : text.limitText!;
  const limit = Number(row.reportingLimitText.replace(/,/g, ''));
  if (Number.isFinite(limit) && limit > 0 && Number(text.isGroupedOrDecimal) < limit) {
    warn(
      row,
      `"${row.resultText}" read as ${grouped}: as a decimal it would lie below the limit ${row.reportingLimitText}.`,
    );
    return text;
  }
  return {
    kind: 'question',
    sentence: `Is "${row.resultText}" ${grouped} or ${text.isGroupedOrDecimal}? Correct the sheet, or ask the laboratory.`,
  };
}

/** The decimal mark by column, where the column alone decides, else by sheet. */
function decimalMarks(raws: readonly RawLabRow[]): (raw: RawLabRow) => DecimalMark | null {
  const texts = new Map<string, string[]>();
  for (const raw of raws)
    for (const key of [columnKey(raw), raw.sheet]) {
      const known = texts.get(key) ?? texts.set(key, []).get(key)!;
      if (!raw.isNumberCell) known.push(raw.resultText);
    }
  const marks = new Map([...texts].map(([key, own]) => [key, decimalMarkOf(own)]));
  return (raw) => marks.get(columnKey(raw)) ?? marks.get(raw.sheet) ?? null;
}

function resolveQualifier(row: LabRow, catalog: LabCatalog): void {
  const letters = [
    ...new Set(
      [row.qualifier, row.qualifierText.toUpperCase() || null].filter((one): one is string => Boolean(one)),
    ),
  ];
  for (const letter of letters) {
    const meaning = catalog.qualifiers.get(letter);
    if (!meaning)
      return hold(
        row,
        'qualifier',
        `The letter "${letter}" is not in this laboratory's table yet. Say what it means once.`,
      );
    row.qualifier = letter;
    row.qualifierMeaning = meaning;
    if (meaning === 'non-detect' && row.comparator === '=') row.comparator = '<';
  }
}

/** Sheet and column letter of a result. */
const columnKey = (raw: RawLabRow) => `${raw.sheet} ${raw.cell.replace(/\d+/, '')}`;

const qualityKinds =
  /^(ms|msd|mb|tb|fb|lcs|lcsd|blank|spike|method blank|trip blank|field blank|lab duplicate)$/i;

const wordsOf = (comparator: string, value: string | null, unit: string) =>
  value === null
    ? 'no value'
    : `${comparator === '<' ? 'below ' : comparator === '>' ? 'above ' : ''}${new Decimal(value).toFixed()} ${unit}`;

/** What the record already holds for this sample: the same (nothing to do), another value, or nothing. */
function compareWithRecord(row: LabRow, catalog: LabCatalog): void {
  const known = catalog.existing.get(
    `${row.samplePointId} ${row.analyteId} ${row.fraction} ${row.sampledOn}`,
  );
  if (!known) return;
  const isSame =
    known.comparator === row.comparator &&
    known.unit === row.unit &&
    (known.value === null
      ? row.value === null
      : row.value !== null && new Decimal(known.value).eq(row.value));
  if (isSame) {
    row.state = 'skipped';
    row.messages.push('Already here with the same value.');
    return;
  }
  row.supersedesId = known.id;
  row.supersedesWords = wordsOf(known.comparator, known.value, known.unit);
  warn(row, `Changes what is recorded: was ${row.supersedesWords}.`);
}

/** A second row of the same sample and parameter in one file: identical is one, different holds both. */
function settleDoubles(rows: readonly LabRow[]): void {
  const seen = new Map<string, LabRow>();
  for (const row of rows.filter((one) => one.state !== 'held' && one.state !== 'skipped')) {
    const key = `${row.samplePointId} ${row.analyteId} ${row.fraction} ${row.sampledOn}`;
    const first = seen.get(key);
    if (!first) seen.set(key, row);
    else if (first.value === row.value && first.comparator === row.comparator) {
      row.state = 'skipped';
      row.messages.push(`The same as row ${first.rowNumber}.`);
    } else {
      for (const one of [first, row])
        hold(
          one,
          'value',
          `Rows ${first.rowNumber} and ${row.rowNumber} give two values for one sample and parameter.`,
        );
    }
  }
}

/**
 * Looks every row up in the site's points, analytes, the laboratory's letters and its remembered answers.
 * Nothing is guessed: what is not known holds its row, never the file.
 */
export function resolveLabRows(raws: readonly RawLabRow[], catalog: LabCatalog): LabRow[] {
  const markOf = decimalMarks(raws);
  const order = dateOrderOf(
    raws.map((raw) => raw.sampledText),
    catalog,
  );
  const saysBelow = sheetsThatSayBelow(raws);
  const rows = raws.map((raw) => {
    const row = emptyRow(raw);
    if (qualityKinds.test(raw.kindText)) {
      row.state = 'skipped';
      row.messages.push('Quality control of the laboratory: kept, not a sample.');
      return row;
    }
    resolvePoint(row, catalog);
    resolveDate(row, catalog, order);
    const analyte = resolveAnalyte(row, catalog);
    const unitText =
      raw.unitText ||
      analyte?.unitInName ||
      catalog.mappings.get(mappingKey('unit', raw.analyteText)) ||
      (analyte?.standardUnit === 'pH' ? 'pH' : '');
    const unit = unitText ? readUnit(catalog.mappings.get(mappingKey('unit', unitText)) ?? unitText) : null;
    if (!unit)
      hold(
        row,
        'unit',
        unitText
          ? `The unit "${unitText}" is not known.`
          : `${raw.analyteText}: ${raw.resultText}, and no unit. Which one?`,
      );
    if (analyte && unit) {
      const basis = basisFactor(unit.basis ?? analyte.reportedBasis, analyte.basis);
      if (basis === null || unit.standard !== analyte.standardUnit)
        hold(
          row,
          'unit',
          `"${unitText}" cannot be turned into ${analyte.standardUnit}${analyte.basis ? ` as ${analyte.basis}` : ''}.`,
        );
      else {
        row.unit = unit.standard;
        if (basis !== '1')
          warn(
            row,
            `Reported as ${unit.basis ?? analyte.reportedBasis}, kept as ${analyte.basis}: × ${new Decimal(basis).toSignificantDigits(4).toFixed()}.`,
          );
        const limitUnit = raw.reportingLimitUnitText ? readUnit(raw.reportingLimitUnitText) : unit;
        applyText(
          row,
          readResult(row, markOf(raw)),
          [unit.factor, basis],
          [limitUnit?.factor ?? unit.factor, basis],
        );
      }
    }
    resolveQualifier(row, catalog);
    if (raw.commentText) row.messages.push(`The laboratory noted: ${raw.commentText}.`);
    settleEqualToLimit(row, saysBelow, catalog.answers.equalToLimit);
    if (row.state !== 'held') {
      compareWithHistory(row, catalog.history);
      compareWithRecord(row, catalog);
    }
    return row;
  });
  settleDoubles(rows);
  compareSamples(rows, catalog);
  return rows;
}
