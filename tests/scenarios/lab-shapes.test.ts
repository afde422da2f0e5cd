import { describe, expect, it } from 'vitest';
import { readLabSheets } from '#shared/lab/read-lab-sheet.ts';
import { resolveLabRows } from '#shared/lab/resolve-lab-rows.ts';
import { labCatalog } from '../factories/lab-catalog.ts';
import { sheetOf } from '../factories/sheets.ts';

/** Shape 1 of the project's lab sheets: a long list under a letterhead; all rows invented. */
const shape1 = sheetOf([
  ['Northmoor Analytical (invented)'],
  [],
  [],
  [],
  ['Project: Leachate Q1', null, 'Job: 26-0147', null, 'Report date: 19-Mar-26'],
  [],
  [],
  [],
  ['Client ID', 'Sampled', 'Parameter', 'Result', 'Units', 'RL', 'RL Units'],
  ['EFF-01', '04-Mar-26 09:10', 'Ammonia (as N)', '3.2', 'mg/L', '100', 'ug/L'],
  ['EFF-01', '04-Mar-26 09:10', 'Zinc, Total', '0.05 U', 'mg/L', '50', 'ug/L'],
  ['EFF-01', '04-Mar-26 09:10', 'Phenol', '4.1 J', 'ug/L', '5', 'ug/L'],
  ['EFF-01', '04-Mar-26 09:10', 'BOD5', 'Pending', 'mg/L', '2', 'mg/L'],
  [],
  ['U = not detected at RL; J = estimated below RL'],
]);

describe('shape 1: long list under a letterhead', () => {
  const reading = readLabSheets([shape1]);
  const rows = resolveLabRows(reading.rows, labCatalog());
  const row = (code: string) => rows.find((one) => one.analyteId === code)!;

  it('finds header row 9, four rows, the job, and the footnote as a key of letters', () => {
    expect(reading.layout).toMatchObject({ shape: 'long-list', headerRow: 9 });
    expect(reading.rows).toHaveLength(4);
    expect(reading.jobNumber).toBe('26-0147');
    expect(reading.qualifierKey).toEqual([
      { letter: 'U', words: 'not detected at RL' },
      { letter: 'J', words: 'estimated below RL' },
    ]);
    expect(reading.skipped.map((one) => one.rowNumber)).toContain(15);
  });

  it('reads ammonia 3.2 mg/L as N with RL 0.100', () => {
    expect(row('ammonia')).toMatchObject({
      comparator: '=',
      value: '3.2',
      unit: 'mg/L',
      sampledOn: '2026-03-04',
      samplePointId: 'eff',
    });
    expect(Number(row('ammonia').reportingLimit)).toBe(0.1);
  });

  it('reads zinc total below 0.05, phenol 0.0041 as estimated below reporting, BOD5 as pending', () => {
    expect(row('zinc')).toMatchObject({
      comparator: '<',
      value: '0.05',
      fraction: 'total',
      qualifierMeaning: 'non-detect',
    });
    expect(row('phenol')).toMatchObject({
      comparator: '=',
      value: '0.0041',
      qualifierMeaning: 'estimated-below-reporting',
    });
    expect(row('bod5')).toMatchObject({ value: null, missingReason: 'pending' });
  });

  it('a letter that is not in the laboratory’s table holds its row only', () => {
    const strict = resolveLabRows(reading.rows, labCatalog({ qualifiers: new Map([['U', 'non-detect']]) }));
    expect(strict.filter((one) => one.state === 'held').map((one) => one.analyteId)).toEqual(['phenol']);
    expect(strict.find((one) => one.analyteId === 'phenol')!.question!.kind).toBe('qualifier');
  });
});

/** Shape 2: parameters down, samples across, two merged header rows, sections that carry the fraction. */
const shape2 = sheetOf(
  [
    [null, null, null, 'LCH-C1', null, 'LCH-C3', null],
    ['Analyte', 'CAS', 'Unit', '2026-03-03', 'RL', '2026-03-03', 'RL'],
    ['Metals (dissolved)'],
    ['Iron', '7439-89-6', 'mg/L', 8.6, 0.1, 131, 0.1],
    ['Arsenic', '7440-38-2', 'µg/L', 'ND', 2, 14, 2],
    ['Inorganics'],
    ['Chloride', '16887-00-6', 'mg/L', '1,050', 10, '1,850', 50],
    ['Ammonia', '7664-41-7', 'mg/L as NH4', 785, 5, '1,005', 5],
  ],
  {
    merges: [
      { top: 1, left: 4, bottom: 1, right: 5 },
      { top: 1, left: 6, bottom: 1, right: 7 },
    ],
  },
);

describe('shape 2: crosstab', () => {
  const reading = readLabSheets([shape2]);
  const rows = resolveLabRows(reading.rows, labCatalog());
  const row = (point: string, code: string) =>
    rows.find((one) => one.samplePointId === point && one.analyteId === code)!;

  it('fans merged headers out into eight results', () => {
    expect(reading.layout).toMatchObject({ shape: 'crosstab' });
    expect(rows).toHaveLength(8);
    expect(rows.every((one) => one.sampledOn === '2026-03-03')).toBe(true);
  });

  it('a section carries dissolved to its own rows and stops at the next section', () => {
    expect(row('c1', 'iron').fraction).toBe('dissolved');
    expect(row('c1', 'arsenic')).toMatchObject({ fraction: 'dissolved', comparator: '<', unit: 'mg/L' });
    expect(Number(row('c1', 'arsenic').value)).toBe(0.002);
    expect(row('c1', 'chloride').fraction).toBe('');
  });

  it('settles thousands commas by the limit beside them: chloride 1 050 and 1 850', () => {
    expect([row('c1', 'chloride').value, row('c3', 'chloride').value]).toEqual(['1050', '1850']);
  });

  it('turns ammonia as NH4 into as N by 14.007/18.039: 609.5 and 780.4', () => {
    expect(Number(row('c1', 'ammonia').value)).toBeCloseTo(609.5, 1);
    expect(Number(row('c3', 'ammonia').value)).toBeCloseTo(780.4, 1);
    expect(row('c1', 'ammonia').resultText).toBe('785');
  });
});

describe('23: what is held, and what is left as text', () => {
  const list = (rows: (string | number | null)[][]) =>
    resolveLabRows(
      readLabSheets([sheetOf([['Client ID', 'Sampled', 'Parameter', 'Result', 'Units', 'RL'], ...rows])])
        .rows,
      labCatalog(),
    );

  it('a row without a unit, an ND without a limit and =2+5 are held; nothing is guessed', () => {
    const rows = list([
      ['EFF-01', '2026-03-04', 'Zinc', '0.18', '', ''],
      ['EFF-01', '2026-03-04', 'Phenol', 'ND', 'mg/L', ''],
      ['EFF-01', '2026-03-04', 'BOD5', '=2+5', 'mg/L', ''],
      ['EFF-01', '2026-03-04', 'TSS', '14', 'mg/L', ''],
    ]);
    expect(rows.map((row) => row.state)).toEqual(['held', 'held', 'held', 'ok']);
    expect(rows[0]!.question!.kind).toBe('unit');
    expect(rows[1]!.question!.kind).toBe('limit');
    expect(rows[2]!.resultText).toBe('=2+5');
  });

  it('a date that reads two ways is asked about once; one day above 12 in the file decides', () => {
    expect(list([['EFF-01', '03/04/2026', 'TSS', '14', 'mg/L', '']])[0]!.question!.kind).toBe('date');
    expect(
      list([
        ['EFF-01', '03/03/2026', 'TSS', '14', 'mg/L', ''],
        ['EFF-01', '18/03/2026', 'TSS', '15', 'mg/L', ''],
      ]).map((row) => row.sampledOn),
    ).toEqual(['2026-03-03', '2026-03-18']);
  });

  it('blank, dash, n/a and NS are missing with a reason, never zero', () => {
    const rows = list(
      ['-', 'n/a', 'NS'].map((text, index) => ['EFF-01', `2026-03-0${index + 1}`, 'TSS', text, 'mg/L', '']),
    );
    expect(rows.map((row) => [row.value, row.missingReason === null])).toEqual([
      [null, false],
      [null, false],
      [null, false],
    ]);
  });

  it('the same sample twice with two values holds both; the same value is one', () => {
    expect(
      list([
        ['EFF-01', '2026-03-04', 'TSS', '14', 'mg/L', ''],
        ['EFF-01', '2026-03-04', 'TSS', '15', 'mg/L', ''],
      ]).map((row) => row.state),
    ).toEqual(['held', 'held']);
    expect(
      list([
        ['EFF-01', '2026-03-04', 'TSS', '14', 'mg/L', ''],
        ['EFF-01', '2026-03-04', 'TSS', '14', 'mg/L', ''],
      ]).map((row) => row.state),
    ).toEqual(['ok', 'skipped']);
  });

  it('a remembered answer settles an unknown point and a missing unit', () => {
    const answered = (rows: (string | null)[][]) =>
      resolveLabRows(
        readLabSheets([sheetOf([['Client ID', 'Sampled', 'Parameter', 'Result', 'Units', 'RL'], ...rows])])
          .rows,
        labCatalog({
          mappings: new Map([
            ['sample-point of1b', 'eff'],
            ['unit tss', 'mg/L'],
          ]),
        }),
      );
    expect(answered([['OF-1b', '2026-03-04', 'TSS', '14', '', '']])[0]).toMatchObject({
      state: 'ok',
      samplePointId: 'eff',
      unit: 'mg/L',
    });
  });
});

describe('marks, names and ranges', () => {
  const head = ['Client ID', 'Sampled', 'Parameter', 'Result', 'Units', 'RL'];
  const read = (rows: (string | number)[][]) =>
    resolveLabRows(
      readLabSheets([
        sheetOf([
          head,
          ...rows.map(([name, result, unit]) => ['LCH-C1', '2026-03-03', name!, result!, unit!, '']),
        ]),
      ]).rows,
      labCatalog(),
    );

  it('a decimal comma of one value decides the others of its column', () => {
    const [ammonia, chloride] = read([
      ['Ammonia as N', '651,5', 'mg/L'],
      ['Chloride', '1,385', 'g/L'],
    ]);
    expect(Number(ammonia!.value)).toBe(651.5);
    expect(Number(chloride!.value)).toBe(1385);
    expect(chloride!.messages.join(' ')).toContain('read as 1.385');
  });

  it('a comma that nothing decides is asked about, below a limit too', () => {
    const rows = read([
      ['Chloride', '1,385', 'mg/L'],
      ['Ammonia as N', '<1,250', 'mg/L'],
    ]);
    expect(rows.map((row) => row.state)).toEqual(['held', 'held']);
  });

  it('“Total suspended solids” is TSS, not a total fraction of it', () => {
    const [tss] = read([['Total suspended solids', 14, 'mg/L']]);
    expect(tss).toMatchObject({ analyteId: 'tss', fraction: '' });
  });

  it('pH 74 is held', () => {
    expect(read([['pH', 74, 'pH']])[0]).toMatchObject({ state: 'held' });
  });
});

describe('CAS numbers beside the names', () => {
  const read = (rows: string[][]) =>
    resolveLabRows(
      readLabSheets([sheetOf([['Client ID', 'Sampled', 'CAS', 'Substance', 'Found', 'Unit'], ...rows])]).rows,
      labCatalog(),
    );
  const row = (cas: string, name: string) => read([['EFF-01', '2026-03-04', cas, name, '5', 'ug/l']])[0]!;

  it('a number that a spreadsheet turned into a date agrees with its name: written, with a warning', () => {
    expect(row('2-Sep-75', 'Methylene chloride')).toMatchObject({
      state: 'warned',
      analyteId: 'dichloromethane',
    });
  });

  it.each(['', '-', 'n/a'])('"%s" beside BOD5, which has no number, is not remarked on', (cas) => {
    expect(row(cas, 'BOD5').state).toBe('ok');
  });

  it('a name and a number of two parameters hold the row', () => {
    const held = row('7440-66-6', 'Benzene');
    expect(held.question?.kind).toBe('analyte');
    expect(held.messages.join(' ')).toContain('Zinc');
  });

  it('an unknown name is taken by its number, and said; a number that does not fit leaves the name', () => {
    expect(row('79-01-6', 'Tri')).toMatchObject({ state: 'warned', analyteId: 'trichloroethene' });
    expect(row('79-01-7', 'Tri').question?.kind).toBe('analyte');
    expect(row('71-43-3', 'Benzene')).toMatchObject({ state: 'warned', analyteId: 'benzene' });
  });

  it('a name that ends in -D is not dissolved when it is known as it stands', () => {
    const [herbicide] = resolveLabRows(
      readLabSheets([
        sheetOf([
          ['Client ID', 'Sampled', 'Substance', 'Found', 'Unit'],
          ['EFF-01', '2026-03-04', '2,4-D', '5', 'ug/l'],
        ]),
      ]).rows,
      labCatalog({
        analytes: [
          {
            id: '24d',
            code: '24-d',
            name: '2,4-D',
            cas: '94-75-7',
            basis: null,
            defaultFraction: null,
            standardUnit: 'mg/L',
            aliases: [],
          },
        ],
      }),
    );
    expect(herbicide).toMatchObject({ analyteId: '24d', fraction: '' });
  });
});

/** Shape 5: semicolons, decimal commas, German names; all rows invented. */
describe('shape 5: decimal commas and German names', () => {
  const reading = readLabSheets([
    sheetOf([
      ['Probe', 'Datum', 'Parameter', 'Wert', 'Einheit', 'BG'],
      ['EFF-01', '04.03.2026', 'Ammonium-N', '3,2', 'mg/l', '0,1'],
      ['EFF-01', '04.03.2026', 'Zink gesamt', '< 0,05', 'mg/l', '0,05'],
      ['EFF-01', '04.03.2026', 'Chlorid', '1.400', 'mg/l', '10'],
      ['EFF-01', '04.03.2026', 'AOX', '412', 'µg/l', '10'],
      ['EFF-01', '04.03.2026', 'Phenol-Index', 'n.n.', 'mg/l', '0,01'],
    ]),
  ]);
  const rows = resolveLabRows(reading.rows, labCatalog());

  it('reads 3.2, below 0.05, 1 400 shown as a decision, 0.412 and below 0.01', () => {
    expect(rows.map((row) => [row.analyteId, row.comparator, Number(row.value), row.state])).toEqual([
      ['ammonia', '=', 3.2, 'ok'],
      ['zinc', '<', 0.05, 'ok'],
      ['chloride', '=', 1400, 'warned'],
      ['aox', '=', 0.412, 'ok'],
      ['phenol-index', '<', 0.01, 'ok'],
    ]);
  });
});
