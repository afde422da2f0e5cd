import { Decimal } from 'decimal.js';
import { isDay, type Day } from '../calendar/day.ts';
import { isMonth, monthOf, type Month } from '../calendar/month.ts';
import { parseNumber } from '../ledger/parse-number.ts';
import { cellText, columnLetter, type Sheet, type SheetCell } from '../sheets/sheet.ts';
import { windAt2m } from '../water-balance/penman-monteith.ts';
import { depthUnitsMm, fahrenheitToCelsius, type DepthUnit } from '../units/unit-factors.ts';

export const climateFields = [
  'precipitationMm',
  'tMinC',
  'tMaxC',
  'tMeanC',
  'petMm',
  'panMm',
  'windMPerS',
  'relativeHumidityPercent',
  'sunshineHours',
] as const;
export type ClimateField = (typeof climateFields)[number];
export const climateFieldNames: Record<ClimateField, string> = {
  precipitationMm: 'precipitation',
  tMinC: 'minimum temperature',
  tMaxC: 'maximum temperature',
  tMeanC: 'mean temperature',
  petMm: 'potential evapotranspiration',
  panMm: 'pan evaporation',
  windMPerS: 'wind at 2 m',
  relativeHumidityPercent: 'relative humidity',
  sunshineHours: 'bright sunshine a day',
};

export type ClimateUnit =
  DepthUnit | 'C' | 'F' | 'm/s' | 'km/h' | 'mph' | 'm/s at 10 m' | 'km/h at 10 m' | '%' | 'h';

const depthChoices: readonly ClimateUnit[] = ['mm', 'cm', 'in', 'mm-tenths', 'in-hundredths'];
const temperatureChoices: readonly ClimateUnit[] = ['C', 'F'];

/** Units a column of a field may be in; the first is what the record keeps. */
export const climateUnitsOf: Record<ClimateField, readonly ClimateUnit[]> = {
  precipitationMm: depthChoices,
  tMinC: temperatureChoices,
  tMaxC: temperatureChoices,
  tMeanC: temperatureChoices,
  petMm: depthChoices,
  panMm: depthChoices,
  windMPerS: ['m/s', 'km/h', 'mph', 'm/s at 10 m', 'km/h at 10 m'],
  relativeHumidityPercent: ['%'],
  sunshineHours: ['h'],
};

export const climateUnitNames: Record<ClimateUnit, string> = {
  mm: 'mm',
  cm: 'cm',
  in: 'inches',
  'mm-tenths': 'tenths of a mm',
  'in-hundredths': 'hundredths of an inch',
  C: '°C',
  F: '°F',
  'm/s': 'm/s',
  'km/h': 'km/h',
  mph: 'miles an hour',
  'm/s at 10 m': 'm/s, measured at 10 m',
  'km/h at 10 m': 'km/h, measured at 10 m',
  '%': '%',
  h: 'hours',
};

/** How a sheet is read: which column is what, in which unit. The person can change it before confirming. */
export interface ClimateMapping {
  sheetName: string;
  headerRow: number;
  kind: 'daily' | 'monthly';
  dateColumn: number | null;
  yearColumn: number | null;
  monthColumn: number | null;
  columns: { field: ClimateField; column: number; unit: ClimateUnit }[];
}

export interface ClimateRow {
  rowNumber: number;
  /** Day or month the row is for; '' when it could not be read. */
  when: Day | Month;
  values: Partial<Record<ClimateField, string>>;
  state: 'ok' | 'warned' | 'held';
  messages: string[];
}

const fieldPatterns: [ClimateField, RegExp][] = [
  ['tMaxC', /^(t|temp).{0,3}max|max.{0,6}temp/i],
  ['tMinC', /^(t|temp).{0,3}min|min.{0,6}temp/i],
  ['tMeanC', /^(t|temp).{0,3}(mean|avg|med)|mean.{0,6}temp|^temp(erature)?\b|^tavg/i],
  ['panMm', /\bpan\b|^epan/i],
  ['petMm', /^(pet|eto?)\b|evapotransp/i],
  ['windMPerS', /^(wind|u2|wspd)/i],
  ['relativeHumidityPercent', /^(rh|rel.{0,10}hum|humidity)/i],
  ['sunshineHours', /^sun(shine)?(_|\b)|bright sun/i],
  ['precipitationMm', /^(prcp|precip|rain|prec|ppt)/i],
];

function unitOf(header: string, field: ClimateField): ClimateUnit {
  if (climateUnitsOf[field] === temperatureChoices) return /[_ (°]f\)?$/i.test(header) ? 'F' : 'C';
  if (field === 'windMPerS') return /km/i.test(header) ? 'km/h' : /mph|mi/i.test(header) ? 'mph' : 'm/s';
  if (climateUnitsOf[field] !== depthChoices) return climateUnitsOf[field][0]!;
  if (/[_ (,]in(ch(es)?)?\)?$/i.test(header)) return 'in';
  if (/[_ (,]cm\)?$/i.test(header)) return 'cm';
  return 'mm';
}

/** Proposes how a climate sheet is read from its header words; null when no row looks like a header. */
export function detectClimateMapping(sheet: Sheet): ClimateMapping | null {
  for (const row of sheet.rows.slice(0, 30)) {
    const headers = row.cells.map(cellText);
    const columns = fieldPatterns.flatMap(([field, pattern]) => {
      const column = headers.findIndex((header) => pattern.test(header));
      return column < 0 ? [] : [{ field, column, unit: unitOf(headers[column]!, field) }];
    });
    const dateColumn = headers.findIndex((header) => /^(date|day|datum)$/i.test(header));
    const yearColumn = headers.findIndex((header) => /^(year|yr)$/i.test(header));
    const monthColumn = headers.findIndex((header) => /^(month|mo)$/i.test(header));
    if (!columns.length || (dateColumn < 0 && (yearColumn < 0 || monthColumn < 0))) continue;
    const orNull = (index: number) => (index < 0 ? null : index);
    return {
      sheetName: sheet.name,
      headerRow: row.number,
      kind: dateColumn >= 0 ? 'daily' : 'monthly',
      dateColumn: orNull(dateColumn),
      yearColumn: orNull(yearColumn),
      monthColumn: orNull(monthColumn),
      columns,
    };
  }
  return null;
}

function dayOfCell(cell: SheetCell | null | undefined): string {
  if (cell?.kind === 'date') return cell.day;
  const text = cellText(cell).slice(0, 10);
  return isDay(text) ? text : '';
}

function whenOf(cells: (SheetCell | null)[], mapping: ClimateMapping): string {
  if (mapping.kind === 'daily') return dayOfCell(cells[mapping.dateColumn ?? 0]);
  const year = Number(cellText(cells[mapping.yearColumn ?? 0]));
  const monthOfYear = Number(cellText(cells[mapping.monthColumn ?? 1]));
  const month = Number.isInteger(year) && Number.isInteger(monthOfYear) ? monthOf(year, monthOfYear) : '';
  return isMonth(month) ? month : '';
}

const missingMarks = new Set(['', '-', '--', 'NA', 'N/A', 'null', '-9999', '-99.9', 'M']);

/** A value in the unit the record keeps, as exact text. 1 mile an hour is 0.44704 m/s exactly; wind at 10 m by FAO-56 eq. 47. */
function convert(value: string, unit: ClimateUnit): string {
  if (unit === 'C' || unit === 'm/s' || unit === '%' || unit === 'h') return new Decimal(value).toFixed();
  if (unit === 'F') return fahrenheitToCelsius(value).toDecimalPlaces(3).toFixed();
  if (unit === 'km/h') return new Decimal(value).div(3.6).toDecimalPlaces(3).toFixed();
  if (unit === 'm/s at 10 m' || unit === 'km/h at 10 m')
    return new Decimal(value)
      .div(unit === 'm/s at 10 m' ? 1 : 3.6)
      .times(windAt2m(1, 10))
      .toDecimalPlaces(3)
      .toFixed();
  if (unit === 'mph') return new Decimal(value).times(0.44704).toDecimalPlaces(3).toFixed();
  return new Decimal(value).times(depthUnitsMm[unit]).toDecimalPlaces(3).toFixed();
}

const warmestC = 60;

function checkRow(row: ClimateRow, kind: ClimateMapping['kind']): void {
  const number = (field: ClimateField) =>
    row.values[field] === undefined ? null : Number(row.values[field]);
  const [rain, tMin, tMax] = [number('precipitationMm'), number('tMinC'), number('tMaxC')];
  const hold = (message: string) => {
    row.state = 'held';
    row.messages.push(message);
  };
  if (rain !== null && rain < 0) hold('Precipitation is below 0. Correct the cell or leave it empty.');
  const rainMax = kind === 'daily' ? 500 : 3000;
  if (rain !== null && rain > rainMax)
    hold(
      `${rain} mm of precipitation is not plausible for a ${kind === 'daily' ? 'day' : 'month'}. Check the unit: tenths of a millimetre?`,
    );
  if (tMin !== null && tMax !== null && tMin > tMax)
    hold(`The minimum temperature (${tMin} °C) is above the maximum (${tMax} °C).`);
  for (const field of ['tMinC', 'tMaxC', 'tMeanC'] as const) {
    const value = number(field);
    if (value !== null && (value > warmestC || value < -90))
      hold(`${value} °C is not a temperature on Earth. Check the unit: °F, or tenths?`);
  }
  const within: [ClimateField, number, string][] = [
    ['petMm', kind === 'daily' ? 25 : 600, 'mm of potential evapotranspiration'],
    ['panMm', kind === 'daily' ? 30 : 700, 'mm of pan evaporation'],
    ['windMPerS', 60, 'm/s of wind'],
    ['relativeHumidityPercent', 100, '% of relative humidity'],
    ['sunshineHours', 24, 'hours of sunshine a day'],
  ];
  for (const [field, max, words] of within) {
    const value = number(field);
    if (value !== null && (value < 0 || value > max))
      hold(`${value} ${words} is not possible for a ${kind === 'daily' ? 'day' : 'month'}. Check the unit.`);
  }
}

/**
 * Reads every row of a climate sheet by its mapping. A blank stays missing; nothing is filled or scaled.
 * @returns rows in the order of the sheet, doubles of a day or month held
 */
export function readClimateSheet(sheet: Sheet, mapping: ClimateMapping): ClimateRow[] {
  const seen = new Map<string, number>();
  return sheet.rows
    .filter((row) => row.number > mapping.headerRow)
    .map(({ number, cells }) => {
      const row: ClimateRow = {
        rowNumber: number,
        when: whenOf(cells, mapping),
        values: {},
        state: 'ok',
        messages: [],
      };
      if (!row.when) {
        row.state = 'held';
        row.messages.push(
          `No ${mapping.kind === 'daily' ? 'day' : 'year and month'} could be read in this row.`,
        );
      }
      for (const { field, column, unit } of mapping.columns) {
        const text = cellText(cells[column]);
        if (missingMarks.has(text)) continue;
        const parsed = parseNumber(text, { decimals: 3 });
        if (parsed.kind === 'number') row.values[field] = convert(parsed.value, unit);
        else {
          row.state = 'held';
          row.messages.push(
            `Column ${columnLetter(column)}, "${text}": ${parsed.kind === 'wrong' ? parsed.reason : parsed.question}`,
          );
        }
      }
      if (row.when && Object.keys(row.values).length === 0) {
        row.state = 'warned';
        row.messages.push('No value in this row: the day stays missing.');
      }
      checkRow(row, mapping.kind);
      const before = seen.get(row.when);
      if (row.when && before !== undefined) {
        row.state = 'held';
        row.messages.push(`${row.when} stands in row ${before} already.`);
      }
      seen.set(row.when, number);
      return row;
    });
}
