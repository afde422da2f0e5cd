import { describe, expect, it } from 'vitest';
import { readLabSheets } from '#shared/lab/read-lab-sheet.ts';
import { splitHeader } from '#shared/lab/read-samples-down.ts';
import { resolveLabRows } from '#shared/lab/resolve-lab-rows.ts';
import type { LabCatalog } from '#shared/lab/resolve-lab-rows.ts';
import { labCatalog } from '../factories/lab-catalog.ts';
import { sheetOf } from '../factories/sheets.ts';

const read = (rows: (string | number | null)[][], change: Partial<LabCatalog> = {}) => {
  const reading = readLabSheets([sheetOf(rows)]);
  return { reading, rows: resolveLabRows(reading.rows, labCatalog(change)) };
};

/**
 * Shape 3 of the project's lab sheets: samples down, parameters across, units in the header, limits printed for what was
 * not found and told by grey italics alone. All rows invented; the expected parse was written down with the shape.
 */
const shape3 = [
  [
    'Date',
    'Site',
    'pH',
    'NH3-N (mg/L)',
    'BOD (mg/l)',
    'Zn-T (ug/L)',
    'Zn-D (ug/L)',
    'Benzene ppb',
    'Comments',
  ],
  ['RL', null, null, 0.1, 2, 5, 5, 1, null],
  ['4/3/26', 'EFF', 7.4, 3.2, 2, 61, 74, 1, null],
  ['11/3/26', 'EFF', 7.6, 0.1, 6, 5, 5, 1, 'dup taken'],
  ['18/3/26', 'Eff-01', 7.5, 6.1, 9, 121, 44, null, 'broken vial'],
];

describe('shape 3: samples down, parameters across', () => {
  const { reading, rows } = read(shape3);
  const row = (day: string, code: string, fraction = '') =>
    rows.find(
      (one) => one.sampledOn === day && one.analyteId === code && (!fraction || one.fraction === fraction),
    )!;

  it('takes row 2 for the limits of the columns, not for a sample', () => {
    expect(reading.layout).toMatchObject({ shape: 'samples-down', headerRow: 1 });
    expect(reading.skipped).toMatchObject([{ rowNumber: 2, why: 'limits of the columns' }]);
    expect(rows).toHaveLength(18);
  });

  it('18/3 proves that the day comes first: 4 March, not 3 April', () => {
    expect([...new Set(rows.map((one) => one.sampledOn))]).toEqual([
      '2026-03-04',
      '2026-03-11',
      '2026-03-18',
    ]);
  });

  it('EFF and Eff-01 are one sample point', () => {
    expect(rows.every((one) => one.samplePointId === 'eff')).toBe(true);
  });

  it('holds the six values that equal their limit, with one question', () => {
    const asked = rows.filter((one) => one.question?.kind === 'equal-to-limit');
    expect(asked.map((one) => [one.sampledOn, one.analyteText])).toEqual([
      ['2026-03-04', 'BOD'],
      ['2026-03-04', 'Benzene'],
      ['2026-03-11', 'NH3-N'],
      ['2026-03-11', 'Zn-T'],
      ['2026-03-11', 'Zn-D'],
      ['2026-03-11', 'Benzene'],
    ]);
    expect(rows.filter((one) => one.state === 'held')).toEqual(asked);
  });

  it('reads units from the header, ppb as µg/L, and total apart from dissolved', () => {
    expect(row('2026-03-18', 'ammonia')).toMatchObject({ value: '6.1', unit: 'mg/L', reportingLimit: '0.1' });
    expect(row('2026-03-18', 'zinc', 'total')).toMatchObject({ value: '0.121', reportingLimit: '0.005' });
    expect(row('2026-03-18', 'zinc', 'dissolved').value).toBe('0.044');
    expect(row('2026-03-04', 'ph')).toMatchObject({ value: '7.4', unit: 'pH' });
  });

  it('warns where dissolved zinc 74 lies above total 61, and only there', () => {
    const warned = rows.filter((one) => one.messages.some((text) => text.startsWith('Dissolved')));
    expect(warned.map((one) => [one.sampledOn, one.fraction, one.state])).toEqual([
      ['2026-03-04', 'total', 'warned'],
      ['2026-03-04', 'dissolved', 'warned'],
    ]);
  });

  it('a blank beside "broken vial" is a lost sample, and "dup taken" stays as a note', () => {
    expect(row('2026-03-18', 'benzene')).toMatchObject({
      value: null,
      missingReason: 'sample broken or lost',
    });
    expect(row('2026-03-11', 'bod5').messages.join(' ')).toContain('dup taken');
  });

  it('one answer settles all six: below the limit, or measured', () => {
    const settled = (equalToLimit: 'below' | 'measured') =>
      read(shape3, { answers: { dateOrder: null, equalToLimit } }).rows.filter((one) =>
        one.messages.some((text) => text.includes('the limit itself')),
      );
    expect(settled('below').map((one) => [one.comparator, one.state])).toEqual(
      Array.from({ length: 6 }, () => ['<', 'warned']),
    );
    expect(settled('measured').map((one) => one.comparator)).toEqual(Array.from({ length: 6 }, () => '='));
  });
});

describe('samples down, other hands', () => {
  it.each([
    ['NH3-N (mg/L)', 'NH3-N', 'mg/L'],
    ['Chlorid [mg/l]', 'Chlorid', 'mg/l'],
    ['Ammonia, mg/L as N', 'Ammonia', 'mg/L as N'],
    ['Benzene ppb', 'Benzene', 'ppb'],
    ['Zinc (dissolved)', 'Zinc (dissolved)', ''],
    ['pH', 'pH', ''],
  ])('%s is %s in "%s"', (header, analyteText, unitText) => {
    expect(splitHeader(header)).toEqual({ analyteText, unitText });
  });

  it('a row of units under the header, limits at the foot, an average that is no sample', () => {
    const { reading, rows } = read([
      ['Site', 'Date', 'Chloride', 'Zinc'],
      [null, null, 'mg/L', 'µg/L'],
      ['LCH-C1', '2026-03-03', 1050, 61],
      ['LCH-C3', '2026-03-03', 1850, 80],
      ['Average', null, 1450, 70.5],
      ['MDL', null, 1, 2],
    ]);
    expect(reading.skipped.map((one) => one.why)).toEqual([
      'units of the columns',
      'summary row, not a sample',
      'limits of the columns',
    ]);
    expect(rows.map((one) => [one.samplePointId, one.value, one.detectionLimit])).toEqual([
      ['c1', '1050', '1'],
      ['c1', '0.061', '0.002'],
      ['c3', '1850', '1'],
      ['c3', '0.08', '0.002'],
    ]);
  });

  it('a limit and a mark beside each parameter belong to it alone', () => {
    const { rows } = read([
      ['Site', 'Date', 'Zinc (mg/L)', 'RL', 'Q', 'Iron (mg/L)', 'RL', 'Q'],
      ['EFF', '2026-03-04', 0.05, 0.05, 'U', 8.6, 0.1, null],
    ]);
    expect(rows.map((one) => [one.comparator, one.reportingLimit, one.qualifier])).toEqual([
      ['<', '0.05', 'U'],
      ['=', '0.1', null],
    ]);
  });

  it('one mark for several parameters is a note: nobody knows which of them it means', () => {
    const { rows } = read([
      ['Site', 'Date', 'Zinc (mg/L)', 'Iron (mg/L)', 'Q'],
      ['EFF', '2026-03-04', 0.07, 8.6, 'U'],
    ]);
    expect(rows.map((one) => [one.comparator, one.messages.join(' ').includes('mark U')])).toEqual([
      ['=', true],
      ['=', true],
    ]);
  });

  it('a sheet that says "<" of its own is not asked about a value that equals its limit', () => {
    const { rows } = read([
      ['Site', 'Date', 'Zinc (mg/L)', 'RL', 'Iron (mg/L)', 'RL'],
      ['EFF', '2026-03-04', '< 0.05', 0.05, 0.1, 0.1],
    ]);
    expect(rows.map((one) => [one.comparator, one.state])).toEqual([
      ['<', 'ok'],
      ['=', 'ok'],
    ]);
  });
});
