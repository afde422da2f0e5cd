import { describe, expect, it } from 'vitest';
import { detectClimateMapping, readClimateSheet } from '#shared/climate/read-climate-sheet.ts';
import { settleGap, summariseMonth, noClimate } from '#shared/climate/month-climate.ts';
import { sheetOf } from '../../factories/sheets.ts';

const read = (rows: (string | number | null)[][]) => {
  const sheet = sheetOf(rows);
  const mapping = detectClimateMapping(sheet)!;
  return { mapping, rows: readClimateSheet(sheet, mapping) };
};

describe('climate sheets', () => {
  it('finds year, month and columns with their units from the header', () => {
    const { mapping } = read([
      ['year', 'month', 'prcp_in', 'tmax_f', 'tmin_f'],
      [2026, 1, 1, 50, 32],
    ]);
    expect(mapping).toMatchObject({
      kind: 'monthly',
      columns: expect.arrayContaining([
        { field: 'precipitationMm', column: 2, unit: 'in' },
        { field: 'tMaxC', column: 3, unit: 'F' },
      ]) as unknown,
    });
  });

  it('turns inches and Fahrenheit exactly: 1 in = 25.4 mm, 50 °F = 10 °C', () => {
    expect(
      read([
        ['date', 'prcp_in', 'tmax_f', 'tmin_f'],
        ['2026-01-01', 1, 50, 32],
      ]).rows[0]!.values,
    ).toEqual({ precipitationMm: '25.4', tMaxC: '10', tMinC: '0' });
  });

  it('a blank and a missing mark stay missing; nothing is filled', () => {
    const { rows } = read([
      ['date', 'prcp_mm', 'tmax_c', 'tmin_c'],
      ['2026-01-01', null, 5, 1],
      ['2026-01-02', 'NA', null, null],
    ]);
    expect(rows[0]!.values).toEqual({ tMaxC: '5', tMinC: '1' });
    expect(rows[1]).toMatchObject({ state: 'warned', values: {} });
  });

  it.each([
    [['2026-01-01', -1, 5, 1], 'Precipitation is below 0'],
    [['2026-01-01', 1, 1, 5], 'above the maximum'],
    [['2026-01-01', 1, 95, 80], 'not a temperature on Earth'],
    [['2026-02-30', 1, 5, 1], 'No day'],
    [['2026-01-01', 'wet', 5, 1], '"wet"'],
    [['2026-01-01', 5000, 5, 1], 'not plausible'],
  ] as [(string | number)[], string][])('holds %j', (row, words) => {
    const { rows } = read([['date', 'prcp_mm', 'tmax_c', 'tmin_c'], row]);
    expect(rows[0]!.state).toBe('held');
    expect(rows[0]!.messages.join(' ')).toContain(words);
  });

  it('a day that stands twice is held the second time', () => {
    const { rows } = read([
      ['date', 'prcp_mm'],
      ['2026-01-01', 1],
      ['2026-01-01', 2],
    ]);
    expect(rows.map((row) => row.state)).toEqual(['ok', 'held']);
  });
});

describe('a station without rain', () => {
  it('keeps its days of temperature; rain of another station stands beside them', () => {
    const days = new Map(
      Array.from(
        { length: 30 },
        (_, index) =>
          [
            `2026-06-${String(index + 1).padStart(2, '0')}`,
            { ...noClimate, tMinC: 4, tMaxC: 8 + index / 10 },
          ] as const,
      ),
    );
    const month = summariseMonth('2026-06', days);
    expect(month.days).toMatchObject({ precipitationMm: null });
    expect(month.days!.tMaxC).toHaveLength(30);
    expect(month.isComplete).toBe(false);
  });
});

describe('a month with missing days', () => {
  const day = (precipitationMm: number | null) => ({ ...noClimate, precipitationMm, tMinC: 4, tMaxC: 8 });
  const days = new Map(
    Array.from(
      { length: 30 },
      (_, index) => [`2026-06-${String(index + 1).padStart(2, '0')}`, day(index === 9 ? null : 2)] as const,
    ),
  );
  const june = summariseMonth('2026-06', days);

  it('shows 29 of 30 days and is not scaled', () => {
    expect(june).toMatchObject({
      rainDayCount: 29,
      dayCount: 30,
      precipitationMm: 58,
      isComplete: false,
      tMeanC: 6,
    });
  });

  it('is scaled, filled or left out only by the engineer’s choice', () => {
    expect(settleGap(june, 'scale-by-days', null, null)!.precipitationMm).toBeCloseTo(60, 9);
    expect(settleGap(june, 'leave-out', null, null)).toBeNull();
    expect(
      settleGap(june, 'other-station', null, { ...june, precipitationMm: 71, isComplete: true })!
        .precipitationMm,
    ).toBe(71);
    expect(settleGap(june, 'other-station', null, june)).toBeNull();
  });
});
