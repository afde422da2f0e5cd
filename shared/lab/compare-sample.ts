import { Decimal } from 'decimal.js';
import { warn, type LabRow } from './lab-row.ts';
import type { LabCatalog } from './resolve-lab-rows.ts';

/** Dissolved may exceed total by the scatter of two tests: common practice, no source. */
const dissolvedOverTotalMax = '1.1';
const isMeasured = (row: LabRow) => row.state !== 'held' && row.comparator === '=' && row.value !== null;

/** Warns both rows of a pair of one sample whose smaller part is the larger number. */
function warnPairs(
  rows: readonly LabRow[],
  keyOf: (row: LabRow) => string,
  [isPart, isWhole]: [(row: LabRow) => boolean, (row: LabRow) => boolean],
  ratioMax: string,
  wordsOf: (part: LabRow, whole: LabRow) => string,
): void {
  const wholes = new Map(
    rows.filter((row) => isMeasured(row) && isWhole(row)).map((row) => [keyOf(row), row]),
  );
  for (const part of rows.filter((row) => isMeasured(row) && isPart(row))) {
    const whole = wholes.get(keyOf(part));
    if (!whole || new Decimal(part.value!).lte(new Decimal(whole.value!).times(ratioMax))) continue;
    for (const one of [part, whole]) warn(one, wordsOf(part, whole));
  }
}

/** What cannot be in one sample: dissolved above total, BOD5 above COD. Nothing is held: both may be scatter or a swap. */
export function compareSamples(rows: readonly LabRow[], { analytes }: Pick<LabCatalog, 'analytes'>): void {
  const codes = new Map(analytes.map((one) => [one.id, one.code]));
  const codeOf = (row: LabRow) => codes.get(row.analyteId ?? '');
  const sampleOf = (row: LabRow) => `${row.samplePointId} ${row.sampledOn}`;
  warnPairs(
    rows,
    (row) => `${sampleOf(row)} ${row.analyteId}`,
    [(row) => row.fraction === 'dissolved', (row) => row.fraction === 'total'],
    dissolvedOverTotalMax,
    (part, whole) => `Dissolved ${part.resultText} lies above total ${whole.resultText} of the same sample.`,
  );
  warnPairs(
    rows,
    sampleOf,
    [(row) => codeOf(row) === 'bod5', (row) => codeOf(row) === 'cod'],
    '1',
    (part, whole) => `BOD5 ${part.resultText} lies above COD ${whole.resultText} of the same sample.`,
  );
}
