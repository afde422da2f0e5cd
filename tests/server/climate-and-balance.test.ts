import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ProblemDocument } from '#shared/problems.ts';
import type { BalanceView } from '#shared/views/balance-view.ts';
import type { ClimateImportView } from '#shared/views/lab-view.ts';
import type { ClimateView } from '#shared/views/site-view.ts';
import { addCell, id, makeSite, type NewSite } from '../factories/new-site.ts';
import { workbookOf } from '../factories/workbooks.ts';
import { openTestRecord, write, type TestRecord } from '../setup/test-record.ts';

const file = (name: string) => readFileSync(new URL(`../../data/climate/${name}`, import.meta.url));
const wichita = file('wichita_ks_monthly_1980_2011.csv');
const seattle = file('seattle_wa_daily_2012_2015.csv');
type Cells = Record<string, string>;
const rowsOf = (bytes: Buffer) => parse(bytes, { columns: true }) as Cells[];

describe('climate files and the balance', () => {
  let record: TestRecord;
  let site: NewSite;
  beforeAll(async () => {
    record = await openTestRecord('empty_record');
    site = await makeSite(record, { dayBoundary: '00:00' });
    await addCell(site, 'working-area');
  });
  afterAll(() => record.close());

  const upload = (bytes: Buffer, name: string, stationName: string) =>
    site.engineer
      .post(`/api/v1/sites/${site.siteId}/climate-imports`)
      .set('Idempotency-Key', id())
      .field('id', id())
      .field('stationName', stationName)
      .attach('file', bytes, name);
  const get = async <T>(path: string) =>
    (await site.engineer.get(`/api/v1/sites/${site.siteId}${path}`).expect(200)).body as T;
  const act = (importId: string, what: string, body: object = {}) =>
    write(site.engineer, `/sites/${site.siteId}/climate-imports/${importId}/${what}`, body);

  let wichitaImport: string;

  it('reads Wichita, 1980 to 2011, month by month, with a preview before anything is stored', async () => {
    wichitaImport = (await upload(wichita, 'wichita.csv', 'Wichita').expect(201)).body.id as string;
    const view = await get<ClimateImportView>(`/climate-imports/${wichitaImport}`);
    expect(view.mapping).toMatchObject({ kind: 'monthly', yearColumn: 0, monthColumn: 1 });
    expect(view.rowCount).toBe(rowsOf(wichita).length);
    expect((await get<ClimateView>('/climate')).months).toEqual([]);
    expect((await act(wichitaImport, 'confirmation').expect(201)).body.writtenCount).toBe(
      rowsOf(wichita).filter((row) => row['prcp_mm'] || row['tmean_c']).length,
    );
    const stored = (await get<ClimateView>('/climate')).months;
    for (const row of rowsOf(wichita).filter((one) => one['prcp_mm'])) {
      const month = `${row['year']}-${row['month']!.padStart(2, '0')}`;
      expect(stored.find((one) => one.month === month)!.precipitationMm, month).toBeCloseTo(
        Number(row['prcp_mm']),
        6,
      );
    }
  });

  it('the same file again is noticed', async () => {
    const again = await upload(wichita, 'wichita-copy.csv', 'Wichita').expect(409);
    expect(again.body.detail).toContain('imported on');
  });

  it.each(['thornthwaite', 'hargreaves'] as const)(
    'runs January 1980 to October 2011, where the series ends, by %s, every line of every step closing',
    async (petMethod) => {
      const { current } = await get<{ current: { values: object } }>('/parameter-sets');
      await write(site.engineer, `/sites/${site.siteId}/parameter-sets`, {
        id: id(),
        name: petMethod,
        values: { ...current.values, petMethod },
      }).expect(201);
      const view = await get<BalanceView>('/balance/2000-06');
      expect(view).toMatchObject({ firstMonth: '1980-01', lastMonth: '2011-10', stopped: null });
      expect(view.run.problem).toBeNull();
      for (const line of view.closure)
        expect(line.residualMm, line.line).toBeLessThanOrEqual(line.toleranceMm);
      const rain = rowsOf(wichita).find((row) => row['year'] === '2000' && row['month'] === '6')!['prcp_mm']!;
      expect(view.site.headLine.rainM3).toBeCloseTo((Number(rain) * 42_000) / 1000, 6);
      const { headLine: h } = view.site;
      expect(
        h.rainM3 + h.otherInM3 - h.runoffM3 - h.evapotranspirationM3 - h.intoStorageM3 - h.leakedM3,
      ).toBeCloseTo(h.leachateM3, 6);
    },
  );

  it('a frozen run keeps its numbers when the inputs change; the working run follows', async () => {
    const before = await get<BalanceView>('/balance/2000-06');
    const runId = (
      await write(site.engineer, `/sites/${site.siteId}/balance-runs`, { id: id(), note: 'before' }).expect(
        201,
      )
    ).body.id as string;
    const { current } = await get<{ current: { values: { runoffFactor: number } } }>('/parameter-sets');
    await write(site.engineer, `/sites/${site.siteId}/parameter-sets`, {
      id: id(),
      name: 'Halved runoff',
      values: { ...current.values, runoffFactor: 0.5 },
    }).expect(201);
    const frozen = await get<BalanceView>(`/balance/2000-06?run=${runId}`);
    const working = await get<BalanceView>('/balance/2000-06');
    expect(frozen.site.headLine).toEqual(before.site.headLine);
    expect(working.site.headLine.leachateM3).not.toBeCloseTo(before.site.headLine.leachateM3, 3);
    expect(working.differsFromWorking).toBe(true);
    const recheck = await get<{ isSame?: boolean; largestDifference?: number }>(
      `/balance-runs/${runId}/recheck`,
    );
    expect(JSON.stringify(recheck)).toMatch(/agree|isSame|true/);
  });

  it('a set that the record cannot serve is refused, and the one in force stays', async () => {
    const { current } = await get<{ current: { id: string; values: object } }>('/parameter-sets');
    const refused = await write(site.engineer, `/sites/${site.siteId}/parameter-sets`, {
      id: id(),
      name: 'Given values',
      values: { ...current.values, petMethod: 'given' },
    }).expect(422);
    expect((refused.body as ProblemDocument).errors).toMatchObject([
      { pointer: '/values/petMethod', detail: expect.stringContaining('has no given PET') as string },
    ]);
    expect((await get<{ current: { id: string } }>('/parameter-sets')).current.id).toBe(current.id);
  });

  it('every figure opens to its working, and the last line of it is the figure', async () => {
    const view = await get<BalanceView>('/balance/2000-06');
    const plot = view.cells[0]!.plots[0]!;
    for (const term of Object.keys(plot.terms)) {
      const working = await get<{ lines: { value: number; unit: string }[] }>(
        `/balance-steps/${plot.stepId}/${term}`,
      );
      const last = working.lines.at(-1)!;
      const depthMm = plot.terms[term as keyof typeof plot.terms];
      expect(last.value, term).toBeCloseTo(last.unit === 'm³' ? (depthMm * plot.areaM2) / 1000 : depthMm, 6);
    }
  });

  it('undo voids every row and leaves the file; the balance says what it lacks', async () => {
    await act(wichitaImport, 'undo').expect(201);
    expect((await get<ClimateView>('/climate')).months).toEqual([]);
    await act(wichitaImport, 'undo').expect(409);
  });

  it('reads the same series from an .xlsx to the same numbers', async () => {
    const [head, ...rest] = parse(wichita) as string[][];
    const bytes = await workbookOf({
      Monthly: [head!, ...rest.map((row) => row.map((cell) => (cell === '' ? null : Number(cell))))],
    });
    const importId = (await upload(bytes, 'wichita.xlsx', 'Wichita').expect(201)).body.id as string;
    await act(importId, 'confirmation').expect(201);
    const stored = (await get<ClimateView>('/climate')).months;
    expect(stored.find((one) => one.month === '1993-07')!.precipitationMm).toBeCloseTo(
      Number(rowsOf(wichita).find((row) => row['year'] === '1993' && row['month'] === '7')!['prcp_mm']),
      6,
    );
    expect(stored).toHaveLength(rowsOf(wichita).filter((row) => row['prcp_mm'] || row['tmean_c']).length);
    await act(importId, 'undo').expect(201);
  });

  it('reads Seattle day by day; a unit corrected on the page reads the kept file again; missing days show', async () => {
    const holed = Buffer.from(
      seattle
        .toString('utf8')
        .split('\n')
        .filter((line) => !line.startsWith('2013-02-1'))
        .join('\n'),
    );
    const importId = (await upload(holed, 'seattle.csv', 'Seattle').expect(201)).body.id as string;
    const view = await get<ClimateImportView>(`/climate-imports/${importId}`);
    expect(view.mapping.kind).toBe('daily');
    const asInches = {
      ...view.mapping,
      columns: view.mapping.columns.map((one) =>
        one.field === 'precipitationMm' ? { ...one, unit: 'mm-tenths' } : one,
      ),
    };
    await act(importId, 'mapping', asInches).expect(201);
    const second = await get<ClimateImportView>(`/climate-imports/${importId}`);
    expect(Number(second.rows[1]!.values.precipitationMm)).toBeCloseTo(1.09, 9);
    await act(importId, 'mapping', view.mapping).expect(201);
    await act(importId, 'confirmation').expect(201);
    const months = (await get<ClimateView>('/climate')).months;
    const february = months.find((one) => one.month === '2013-02')!;
    expect(february).toMatchObject({ rainDayCount: 18, dayCount: 28, isComplete: false });
    const january = rowsOf(seattle)
      .filter((row) => row['date']!.startsWith('2013-01'))
      .reduce((sum, row) => sum + Number(row['prcp_mm']), 0);
    expect(months.find((one) => one.month === '2013-01')!.precipitationMm).toBeCloseTo(january, 6);
    const choice = await write(site.engineer, `/sites/${site.siteId}/climate-gap-choices`, {
      id: id(),
      month: '2013-02',
      choice: 'scale-by-days',
      reason: 'Ten days lost',
    }).expect(201);
    expect(choice.body).toBeDefined();
    expect((await get<ClimateView>('/climate')).months.find((one) => one.month === '2013-02')).toMatchObject({
      choice: 'scale-by-days',
      isSettled: true,
    });
  });
});
