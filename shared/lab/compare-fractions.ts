import { Decimal } from 'decimal.js';
import { warn, type LabRow } from './lab-row.ts';

/** Dissolved may exceed total by the scatter of two tests: common practice, no source. */
const dissolvedOverTotalMax = '1.1';

/** Dissolved above total of one sample cannot be: both may be right within their scatter, or they are swapped. */
export function compareFractions(rows: readonly LabRow[]): void {
  const keyOf = (row: LabRow) => `${row.samplePointId} ${row.analyteId} ${row.sampledOn}`;
  const isMeasured = (row: LabRow) => row.comparator === '=' && row.value !== null;
  const totals = new Map(
    rows.filter((row) => row.fraction === 'total' && isMeasured(row)).map((row) => [keyOf(row), row]),
  );
  for (const row of rows.filter((one) => one.fraction === 'dissolved' && isMeasured(one))) {
    const total = totals.get(keyOf(row));
    if (!total || new Decimal(row.value!).lte(new Decimal(total.value!).times(dissolvedOverTotalMax)))
      continue;
    for (const one of [row, total])
      warn(one, `Dissolved ${row.resultText} lies above total ${total.resultText} of the same sample.`);
  }
}
