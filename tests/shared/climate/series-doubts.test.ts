import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import type { ClimateMapping, ClimateRow } from '#shared/climate/read-climate-sheet.ts';
import { seriesDoubts } from '#shared/climate/series-doubts.ts';

const read = (name: string) =>
  parse(readFileSync(new URL(`../../../data/climate/${name}`, import.meta.url)), {
    columns: true,
    cast: true,
  }) as Record<string, number | string>[];
const mapping = (kind: 'daily' | 'monthly', field: 'precipitationMm' | 'tMaxC'): ClimateMapping => ({
  sheetName: 'Sheet',
  headerRow: 1,
  kind,
  dateColumn: 0,
  yearColumn: null,
  monthColumn: null,
  columns: [{ field, column: 1, unit: field === 'tMaxC' ? 'C' : 'mm' }],
});
const rowsOf = (
  values: readonly { when: string; value: number }[],
  field: 'precipitationMm' | 'tMaxC',
): ClimateRow[] =>
  values.map(({ when, value }, index) => ({
    rowNumber: index + 2,
    when,
    values: { [field]: String(value) },
    state: 'ok',
    messages: [],
  }));

/** Real series of US agencies, as they are and in the wrong unit. */
describe('a column in the wrong unit shows as a whole', () => {
  const seattle = read('seattle_wa_daily_2012_2015.csv');
  const wichita = read('wichita_ks_monthly_1980_2011.csv');
  const daily = (field: 'precipitationMm' | 'tMaxC', change: (value: number) => number) =>
    seriesDoubts(
      rowsOf(
        seattle.map((row) => ({
          when: String(row['date']),
          value: change(Number(field === 'tMaxC' ? row['tmax_c'] : row['prcp_mm'])),
        })),
        field,
      ),
      mapping('daily', field),
    );
  const rainOf = (row: Record<string, number | string>) => Number(row['prcp_mm']);
  const monthly = (change: (value: number) => number) =>
    seriesDoubts(
      rowsOf(
        wichita.map((row) => ({
          when: `${row['year']}-${String(row['month']).padStart(2, '0')}`,
          value: change(rainOf(row)),
        })),
        'precipitationMm',
      ),
      mapping('monthly', 'precipitationMm'),
    );

  it('millimetres and degrees Celsius raise no doubt, in days of Seattle and months of Wichita', () => {
    expect(daily('precipitationMm', (value) => value)).toEqual([]);
    expect(daily('tMaxC', (value) => value)).toEqual([]);
    expect(monthly((value) => value)).toEqual([]);
  });

  it('inches, tenths and Fahrenheit each get their sentence', () => {
    expect(daily('precipitationMm', (value) => value / 25.4)[0]).toContain('looks like inches');
    expect(daily('precipitationMm', (value) => value * 10)[0]).toContain('tenths of a millimetre');
    expect(daily('tMaxC', (value) => value * 1.8 + 32)[0]).toContain('Fahrenheit');
    expect(monthly((value) => value / 25.4)[0]).toContain('looks like inches');
  });

  it('a missing year is counted and named', () => {
    const rows = rowsOf(
      wichita
        .filter((row) => row['year'] !== 1990)
        .map((row) => ({
          when: `${row['year']}-${String(row['month']).padStart(2, '0')}`,
          value: rainOf(row),
        })),
      'precipitationMm',
    );
    expect(seriesDoubts(rows, mapping('monthly', 'precipitationMm'))).toEqual([
      expect.stringMatching(/^12 months are missing .* the first January 1990\. They stay missing\.$/),
    ]);
  });
});
