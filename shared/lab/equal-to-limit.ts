import { Decimal } from 'decimal.js';
import { hold, warn, type LabRow, type RawLabRow } from './lab-row.ts';
import { parseResultText } from './parse-result-text.ts';

/** What a person said once for the file about values that equal their limit. */
export type EqualToLimit = 'below' | 'measured';

/** Sheets that have a way of saying "below" of their own: one sign, word or letter is enough. */
export const sheetsThatSayBelow = (raws: readonly RawLabRow[]): ReadonlySet<string> =>
  new Set(
    raws
      .filter((raw) => {
        const text = parseResultText(raw.resultText);
        return raw.qualifierText !== '' || text.kind === 'below' || (text.kind === 'value' && text.qualifier);
      })
      .map((raw) => raw.sheet),
  );

/**
 * A value that equals its limit in a sheet that never says "below" may be a limit printed for a non-detect, told by a
 * colour alone: it is asked about, never taken for a detect.
 */
export function settleEqualToLimit(
  row: LabRow,
  saysBelow: ReadonlySet<string>,
  answer: EqualToLimit | null,
): void {
  const { value, reportingLimit } = row;
  if (row.comparator !== '=' || value === null || reportingLimit === null || saysBelow.has(row.sheet)) return;
  if (!new Decimal(value).eq(reportingLimit)) return;
  if (answer === null)
    return hold(
      row,
      'equal-to-limit',
      `"${row.resultText}" is the limit itself, and nothing in this sheet says "below". Was it found, or is it the limit of what was not found?`,
    );
  if (answer === 'below') row.comparator = '<';
  warn(
    row,
    answer === 'below'
      ? `"${row.resultText}" is the limit itself: read as below it, as answered for this file.`
      : `"${row.resultText}" is the limit itself: read as measured, as answered for this file.`,
  );
}
