import { describe, expect, it } from 'vitest';
import { readLabSheets } from '#shared/lab/read-lab-sheet.ts';
import { resolveLabRows } from '#shared/lab/resolve-lab-rows.ts';
import { labCatalog } from '../factories/lab-catalog.ts';
import { sheetOf } from '../factories/sheets.ts';

const head = ['Lab no.', 'CAS', 'Substance', 'Found', 'Unit', 'Taken on', 'Mark'];

/**
 * Shape 8 of the project's lab sheets: a long file, saved and saved again by a spreadsheet. All rows invented; the
 * expected parse was written down with the shape.
 */
const reading = readLabSheets([
  sheetOf([
    head,
    ['2.603E+15', '1975-09-02', 'Methylene chloride', 5, 'ug/l', 46085, 'U'],
    [2400000, '4-Jan-75', 'Vinyl chloride', 0.5, 'ug/l', '3/4/2026', 'U'],
    [417, '1979-01-06', 'Trichloroethene', "'1.2", 'ug/l\u00a0', '03/04/26', 'J'],
    ['EFF 01  ', '7664417', 'Ammonia as N', '1,2', 'mg/l', 44623, null],
    ['EFF-01', '007440-66-6', 'Zinc (Total) mg/l', '.11', null, '2026-03-04T09:10Z', null],
    [null, null, 'Results relate only to items tested', null, null, null, null],
  ]),
]);
const rows = resolveLabRows(
  reading.rows,
  labCatalog({
    points: [
      { id: 'eff', code: 'EFF-01', aliases: [] },
      { id: 'well', code: 'W-2', aliases: ['00417'] },
    ],
  }),
);
const words = (index: number) => rows[index]!.messages.join(' ');

describe('shape 8: damaged by a spreadsheet', () => {
  it('six rows read: none without a word, two noticed, three held, one a note', () => {
    expect(rows.map((row) => row.state)).toEqual(['held', 'held', 'warned', 'held', 'warned']);
    expect(reading.skipped).toHaveLength(1);
  });

  it('holds a sample number that lost its digits, without offering to remember it, and one nobody knows', () => {
    expect(rows[0]!.question?.kind).toBe('value');
    expect(words(0)).toContain('lost its last digits');
    expect(rows[1]!.question?.kind).toBe('sample-point');
  });

  it('finds 00417 where the spreadsheet left 417, and the number under its date', () => {
    expect(rows[2]).toMatchObject({ samplePointId: 'well', analyteId: 'trichloroethene', value: '0.0012' });
    expect(words(2)).toContain('79-01-6');
  });

  it('3/4/2026 and 03/04/26 are 4 March, because a serial number and an ISO date say so, and it is said', () => {
    expect(rows.slice(0, 3).map((row) => row.sampledOn)).toEqual(['2026-03-04', '2026-03-04', '2026-03-04']);
    expect(words(1)).toContain('4 March 2026');
  });

  it('44623 is of 2022, or of 4 March 2026 in the system of 1904: asked, never picked', () => {
    expect(rows[3]).toMatchObject({ sampledOn: null, question: { kind: 'date' } });
    expect(words(3)).toContain('4 March 2026');
    expect(words(3)).toContain('2022');
  });

  it('takes unit and fraction out of the name, and shows 09:10Z on the clock of the site, on its own day', () => {
    expect(rows[4]).toMatchObject({
      value: '0.11',
      unit: 'mg/L',
      fraction: 'total',
      sampledOn: '2026-03-04',
      sampledTime: '03:10',
    });
  });
});

describe('dates that lean on others', () => {
  const daysOf = (dates: (string | number)[]) =>
    resolveLabRows(
      readLabSheets([
        sheetOf([head, ...dates.map((date) => ['EFF-01', null, 'TSS', 14, 'mg/L', date, null])]),
      ]).rows,
      labCatalog(),
    ).map((row) => row.sampledOn);

  it('decides nothing when both orders fall on days of the file, or neither', () => {
    expect(daysOf(['2026-03-02', '2026-02-03', '02/03/2026'])[2]).toBeNull();
    expect(daysOf(['2026-01-09', '02/03/2026'])[1]).toBeNull();
  });

  it('a serial number with a part of a day keeps its time', () => {
    const [row] = resolveLabRows(
      readLabSheets([sheetOf([head, ['EFF-01', null, 'TSS', 14, 'mg/L', 46085.75, null]])]).rows,
      labCatalog(),
    );
    expect(row).toMatchObject({ sampledOn: '2026-03-04', sampledTime: '18:00' });
  });
});
