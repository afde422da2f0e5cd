import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ProblemDocument } from '#shared/problems.ts';
import type { ForecastStartView, ForecastView, CalibrationView } from '#shared/views/forecast-view.ts';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { openTestRecord, siteIdOf, write, type Agent, type TestRecord } from '../setup/test-record.ts';

const range = (low: string, high: string) => ({ low, high });

describe('forecast and calibration of the demo', () => {
  let record: TestRecord;
  let engineer: Agent;
  let siteId: string;
  let start: ForecastStartView;
  let structure: SiteStructureView;
  beforeAll(async () => {
    record = await openTestRecord('demo_record');
    engineer = await record.as('engineer');
    siteId = await siteIdOf(engineer);
    start = (await engineer.get(`/api/v1/sites/${siteId}/forecasts`).expect(200)).body as ForecastStartView;
    structure = (await engineer.get(`/api/v1/sites/${siteId}`).expect(200)).body as SiteStructureView;
  });
  afterAll(() => record.close());

  const ask = (change: object = {}) => ({
    id: crypto.randomUUID(),
    monthCount: '12',
    memberCount: '100',
    seed: '4182',
    storeId: start.stores[0]!.id,
    plantM3PerDay: '40',
    loadM3: '20.82',
    loadsPerDayMax: '10',
    stormMm: '127',
    stormAreaM2: '16000',
    stormShare: '0.9',
    ranges: {
      runoffFactor: range('0.8', '1.2'),
      petFactor: range('0.85', '1.15'),
      recessionPerMonth: range('0.3', '0.8'),
      channelledFraction: range('0', '0.2'),
    },
    scenarios: [{ name: 'As it is', changes: [] }],
    ...change,
  });
  const done = async (id: string): Promise<ForecastView> => {
    for (;;) {
      const view = (await engineer.get(`/api/v1/sites/${siteId}/forecasts/${id}`).expect(200))
        .body as ForecastView;
      if (view.state !== 'running') return view;
      await new Promise((resolve) => setTimeout(resolve, 50));
    }
  };
  const run = async (body: ReturnType<typeof ask>) => {
    await write(engineer, `/sites/${siteId}/forecasts`, body).expect(201);
    return done(body.id);
  };

  it('runs in threads, puts the months in percentiles, and the same seed gives the same numbers', async () => {
    const [first, second] = [await run(ask()), await run(ask())];
    expect(first).toMatchObject({ state: 'done', doneCount: 100, wantedCount: 100 });
    expect(first.summaries).toEqual(second.summaries);
    expect(first.about.firstMonth).toBe(start.firstMonth);
    for (const month of first.summaries[0]!.months) {
      expect(month.leachateM3.low).toBeLessThanOrEqual(month.leachateM3.middle);
      expect(month.leachateM3.middle).toBeLessThanOrEqual(month.leachateM3.high);
    }
    expect(first.about.cautions.join(' ')).toContain('climate year');
  });

  it('two plans side by side: closing open ground leaves less leachate in the middle', async () => {
    const open = start.plots.find((plot) => plot.coverName.startsWith('working area'))!;
    const cover = structure.coverTypes.find((type) => type.kind === 'final-membrane')!;
    const change = {
      kind: 'cover',
      plotId: open.id,
      onDay: '2026-05-01',
      coverTypeId: cover.id,
      areaM2: open.areaM2,
    };
    const { summaries, about } = await run(
      ask({
        scenarios: [
          { name: 'As it is', changes: [] },
          { name: 'Close in spring', changes: [change] },
        ],
      }),
    );
    expect(summaries[1]!.total.leachateM3.middle).toBeLessThan(summaries[0]!.total.leachateM3.middle);
    expect(about.scenarios[1]!.changes[0]!.sentence).toContain('become final geomembrane');
  });

  it('a plan in the past, too few draws and a range turned round are refused, all at once where they can be', async () => {
    const open = start.plots[0]!;
    const past = {
      kind: 'cover',
      plotId: open.id,
      onDay: '2020-01-01',
      coverTypeId: structure.coverTypes[0]!.id,
      areaM2: '10',
    };
    const late = await write(
      engineer,
      `/sites/${siteId}/forecasts`,
      ask({ scenarios: [{ name: 'A', changes: [past] }] }),
    ).expect(422);
    expect((late.body as ProblemDocument).errors).toMatchObject([
      { pointer: '/scenarios/0/changes/0/onDay' },
    ]);
    const wrong = ask({ memberCount: '3', ranges: { ...ask().ranges, petFactor: range('1.2', '0.8') } });
    const both = await write(engineer, `/sites/${siteId}/forecasts`, wrong).expect(422);
    expect((both.body as ProblemDocument).errors!.map((one) => one.pointer).sort()).toEqual([
      '/memberCount',
      '/ranges/petFactor/high',
    ]);
  });

  it('a running forecast is cancelled; another organisation or id finds nothing', async () => {
    const body = ask({ memberCount: '2000', monthCount: '60' });
    await write(engineer, `/sites/${siteId}/forecasts`, body).expect(201);
    await write(engineer, `/sites/${siteId}/forecasts/${body.id}/cancellation`, {}).expect(201);
    expect((await done(body.id)).state).toBe('cancelled');
    await engineer.get(`/api/v1/sites/${siteId}/forecasts/${crypto.randomUUID()}`).expect(404);
  });

  it('fits the young cell, holds the last quarter back, and says why it should not be trusted yet', async () => {
    const c3 = structure.cells.find((cell) => cell.code === 'C3')!;
    const body = {
      cellId: c3.id,
      choices: [
        { name: 'petFactor', low: '0.6', high: '1.4' },
        { name: 'channelledFraction', low: '0', high: '0.6' },
        { name: 'recessionPerMonth', low: '0.1', high: '2' },
      ],
    };
    const found = (await write(engineer, `/sites/${siteId}/calibrations`, body).expect(201))
      .body as CalibrationView;
    expect(found.fitted.monthCount).toBeGreaterThan(found.heldBack.monthCount);
    expect(found.fitted.after.rmse!).toBeLessThanOrEqual(found.fitted.before.rmse!);
    expect(found.doubts.join(' ')).toContain('Fewer than three years');
    const sets = (await engineer.get(`/api/v1/sites/${siteId}/parameter-sets`).expect(200)).body as {
      current: { name: string };
    };
    expect(sets.current.name).toBe(found.baseSet.name);
  });
});
