import { mean, median } from 'simple-statistics';
import { addDays, dayName, type Day } from '../calendar/day.ts';
import { counted } from '../count-words.ts';
import { addMonths, monthName, type Month } from '../calendar/month.ts';
import {
  climateFieldNames,
  type ClimateField,
  type ClimateMapping,
  type ClimateRow,
} from './read-climate-sheet.ts';

const rowsMin = { daily: 60, monthly: 6 } as const;
const wetDayMm = 0.05;

/**
 * What depths look like as a whole: [median of wet days or months, largest], mm.
 * @assumed our choice: a record of millimetres has wet days of some millimetres and months of some centimetres
 */
const depthLooks = {
  daily: { inchMedian: 0.6, inchMax: 12, tenthsMedian: 25 },
  monthly: { inchMedian: 8, inchMax: 25, tenthsMedian: 700 },
} as const;

function depthDoubt(
  field: ClimateField,
  values: readonly number[],
  kind: ClimateMapping['kind'],
): string | null {
  const wet = values.filter((value) => value > wetDayMm);
  if (wet.length < rowsMin[kind] / 3) return null;
  const [middle, max] = [median(wet), Math.max(...wet)];
  const looks = depthLooks[kind];
  const what = climateFieldNames[field];
  const unit = kind === 'daily' ? 'days' : 'months';
  if (middle < looks.inchMedian && max < looks.inchMax)
    return `The ${what} looks like inches: wet ${unit} have ${middle.toFixed(2)} mm in the middle and ${max.toFixed(1)} mm at most. Choose its unit above if it is.`;
  if (middle > looks.tenthsMedian)
    return `The ${what} looks like tenths of a millimetre: wet ${unit} have ${middle.toFixed(0)} mm in the middle. Choose its unit above if it is.`;
  return null;
}

/** @assumed our choice: hotter on average than any inhabited place in °C */
const meanMaxC = { tMinC: 30, tMeanC: 33, tMaxC: 40 } as const;

function temperatureDoubt(field: 'tMinC' | 'tMeanC' | 'tMaxC', values: readonly number[]): string | null {
  const average = mean(values);
  return average > meanMaxC[field]
    ? `The ${climateFieldNames[field]} looks like degrees Fahrenheit: it is ${average.toFixed(0)} °C on average. Choose its unit above if it is.`
    : null;
}

/** Days or months between the first and the last that no row is for. */
function holes(rows: readonly ClimateRow[], kind: ClimateMapping['kind']): string | null {
  const present = new Set(
    rows.flatMap((row) => (row.when && Object.keys(row.values).length ? [row.when] : [])),
  );
  const ordered = [...present].sort();
  const [first, last] = [ordered[0], ordered.at(-1)];
  if (!first || !last) return null;
  const next = (when: Day | Month) => (kind === 'daily' ? addDays(when, 1) : addMonths(when, 1));
  const name = (when: Day | Month) => (kind === 'daily' ? dayName(when) : monthName(when));
  const missing: (Day | Month)[] = [];
  for (let when = first; when < last; when = next(when)) if (!present.has(when)) missing.push(when);
  if (!missing.length) return null;
  return `${counted(missing.length, kind === 'daily' ? 'day is' : 'month is', kind === 'daily' ? 'days are' : 'months are')} missing between ${name(first)} and ${name(last)}, the first ${name(missing[0]!)}. They stay missing.`;
}

/**
 * What the columns look like as a whole: a wrong unit shows in all rows and in none alone.
 * @returns sentences with the cure; empty when nothing is odd
 */
export function seriesDoubts(rows: readonly ClimateRow[], { kind, columns }: ClimateMapping): string[] {
  const sentences: (string | null)[] = columns.map(({ field }) => {
    const values = rows.flatMap((row) =>
      row.values[field] === undefined ? [] : [Number(row.values[field])],
    );
    if (values.length < rowsMin[kind]) return null;
    if (field === 'precipitationMm' || field === 'petMm' || field === 'panMm')
      return depthDoubt(field, values, kind);
    if (field === 'tMinC' || field === 'tMeanC' || field === 'tMaxC') return temperatureDoubt(field, values);
    return null;
  });
  return [...sentences, holes(rows, kind)].filter((one): one is string => one !== null);
}
