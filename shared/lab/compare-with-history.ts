import { Decimal } from 'decimal.js';
import { median } from 'simple-statistics';
import { warn, type LabRow } from './lab-row.ts';

/** Values of a parameter at a point that the record holds, by `point analyte fraction`, in order of sampling. */
export type LabHistory = ReadonlyMap<string, readonly { sampledOn: string; value: string }[]>;

const lastCount = 8;
/** Fewer say little: our choice. */
const leastCount = 4;
/** Ten times up or down is what a wrong unit looks like most often. */
const slipFactor = 10;

/**
 * Notices a value that lies ten times above or below the median of the last eight before it: seldom the water, often the
 * unit. Values below a limit are not compared.
 */
export function compareWithHistory(row: LabRow, history: LabHistory): void {
  if (row.value === null || row.comparator !== '=' || row.sampledOn === null) return;
  const before = (history.get(`${row.samplePointId} ${row.analyteId} ${row.fraction}`) ?? [])
    .filter((one) => one.sampledOn < row.sampledOn!)
    .slice(-lastCount);
  if (before.length < leastCount) return;
  const usual = median(before.map((one) => Number(one.value)));
  const value = new Decimal(row.value);
  if (usual <= 0 || (value.lt(usual * slipFactor) && value.gt(usual / slipFactor))) return;
  warn(
    row,
    `${value.toFixed()} ${row.unit}: the middle of the last ${before.length} here is ${new Decimal(usual).toSignificantDigits(3).toFixed()} ${row.unit}. Is the unit right?`,
  );
}
