import { describe, expect, it } from 'vitest';
import { readLabSheets } from '#shared/lab/read-lab-sheet.ts';
import { resolveLabRows } from '#shared/lab/resolve-lab-rows.ts';
import { labCatalog } from '../factories/lab-catalog.ts';
import { sheetOf } from '../factories/sheets.ts';

const history = (values: string[]) =>
  new Map([
    [
      'eff bod5 ',
      values.map((value, index) => ({ sampledOn: `2026-02-${String(index + 1).padStart(2, '0')}`, value })),
    ],
  ]);
const read = (rows: [string, string][], values: string[] = []) =>
  resolveLabRows(
    readLabSheets([
      sheetOf([
        ['Client ID', 'Sampled', 'Parameter', 'Result', 'Units'],
        ...rows.map(([name, result]) => ['EFF-01', '2026-03-04', name, result, 'mg/L']),
      ]),
    ]).rows,
    labCatalog({ history: history(values) }),
  );

describe('what is unlikely is noticed, never held', () => {
  it('BOD5 above COD of one sample is said on both rows; below it, or below a limit, is not', () => {
    expect(
      read([
        ['BOD5', '61'],
        ['COD', '60'],
      ]).map((row) => row.state),
    ).toEqual(['warned', 'warned']);
    expect(
      read([
        ['BOD5', '60'],
        ['COD', '60'],
      ]).map((row) => row.state),
    ).toEqual(['ok', 'ok']);
    expect(
      read([
        ['BOD5', '61'],
        ['COD', '<60'],
      ]).map((row) => row.state),
    ).toEqual(['ok', 'ok']);
  });

  // Median of 5, 6, 7, 8 is 6.5: ten times up is 65, ten times down 0.65.
  it.each([
    ['65', 'warned'],
    ['64', 'ok'],
    ['0.65', 'warned'],
    ['0.66', 'ok'],
    ['<0.1', 'ok'],
  ])('%s after 5, 6, 7, 8 is %s', (result, state) => {
    expect(read([['BOD5', result]], ['8', '5', '7', '6'])[0]!.state).toBe(state);
  });

  it('looks at the last eight only, and at nothing when there are fewer than four', () => {
    const old = ['900', '900', '900', '900'];
    expect(read([['BOD5', '70']], [...old, '6', '6', '6', '6', '6', '6', '6', '6'])[0]!.state).toBe('warned');
    expect(read([['BOD5', '70']], ['6', '6', '6'])[0]!.state).toBe('ok');
    expect(read([['BOD5', '70']], ['6', '6', '6', '6'])[0]!.messages.join(' ')).toContain(
      'Is the unit right?',
    );
  });
});
