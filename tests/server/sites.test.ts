import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ProblemDocument } from '#shared/problems.ts';
import { addCell, id, makeSite, type NewSite } from '../factories/new-site.ts';
import { openTestRecord, write, type TestRecord } from '../setup/test-record.ts';

describe('a site and what it is made of', () => {
  let record: TestRecord;
  let site: NewSite;
  let plotId: string;
  beforeAll(async () => {
    record = await openTestRecord('empty_record');
    site = await makeSite(record, { openedOn: '2024-01-01' });
    plotId = (await addCell(site, 'working-area', { openedOn: '2025-01-01' })).plotId;
  });
  afterAll(() => record.close());

  const refused = async (path: string, body: object) =>
    (await write(site.engineer, `/sites/${site.siteId}${path}`, body).expect(422)).body as ProblemDocument;
  const fields = (problem: ProblemDocument) => (problem.errors ?? []).map((error) => error.pointer);

  it('starts with cover types as templates, its places and its own rain gauge on the round', async () => {
    const view = await site.view();
    expect(view.coverTypes).toHaveLength(8);
    expect(view.coverTypes.every((type) => type.confirmedAt === null && type.source !== '')).toBe(true);
    expect(view.roundPoints).toMatchObject([{ kind: 'rain', position: 1 }]);
  });

  it('says everything that is wrong at once, as problem+json, and writes nothing', async () => {
    const answer = await write(site.engineer, '/sites', {
      id: id(),
      name: '',
      latitudeDeg: '95',
      elevationM: 'high',
      timeZone: 'Mars/Olympus',
      dayBoundary: '25:00',
      openedOn: '2026-02-30',
      displayUnits: 'metric',
    }).expect(422);
    expect(answer.type).toBe('application/problem+json');
    expect(fields(answer.body as ProblemDocument).sort()).toEqual([
      '/dayBoundary',
      '/elevationM',
      '/latitudeDeg',
      '/name',
      '/openedOn',
      '/timeZone',
    ]);
    expect((await record.admin.query('select 1 from sites')).rowCount).toBe(1);
  });

  it('plots of 4.6 ha on a lined area of 4.2 are refused with the percentage', async () => {
    const coverTypeId = await site.coverTypeId('working-area');
    const problem = await refused('/cells', {
      id: id(),
      code: 'C2',
      name: 'Far',
      linedAreaM2: '42000',
      openedOn: '2025-01-01',
      evidence: 'survey',
      plots: [
        { id: id(), name: 'A', areaM2: '40000', coverTypeId },
        { id: id(), name: 'B', areaM2: '6000', coverTypeId },
      ],
    });
    expect(problem.detail).toContain('+9.5 %');
  });

  it('covering part of a plot in mid-month ends it; children add exactly to it', async () => {
    const body = {
      plotId,
      onDay: '2026-01-12',
      coverTypeId: await site.coverTypeId('intermediate-soil'),
      areaM2: '8000.5',
      newPlotId: id(),
      restPlotId: id(),
      newPlotName: 'Bench',
      evidence: 'survey of 12 January',
    };
    await write(site.engineer, `/sites/${site.siteId}/cover-periods`, body).expect(201);
    const plots = (await site.view()).plots;
    expect(plots.find((plot) => plot.id === plotId)!.toOn).toBe('2026-01-12');
    expect(
      plots
        .filter((plot) => plot.parentId === plotId)
        .map((plot) => plot.areaM2)
        .sort(),
    ).toEqual(['33999.5', '8000.5']);
    const again = await refused('/cover-periods', { ...body, newPlotId: id(), restPlotId: id() });
    expect(again.detail).toContain('ended on 12 January 2026');
  });

  it('a second cover from the same day, a day to come and too large an area are refused with the reason', async () => {
    const rest = (await site.view()).plots.find(
      (plot) => plot.parentId === plotId && plot.areaM2 === '33999.5',
    )!;
    const body = {
      plotId: rest.id,
      onDay: '2026-02-01',
      coverTypeId: await site.coverTypeId('daily-cover'),
      areaM2: '33999.5',
      newPlotId: id(),
      restPlotId: id(),
      newPlotName: 'All',
      evidence: 'photo',
    };
    await write(site.engineer, `/sites/${site.siteId}/cover-periods`, body).expect(201);
    const soil = {
      ...body,
      onDay: '2026-02-10',
      coverTypeId: await site.coverTypeId('intermediate-soil'),
      initialSoilStoreMm: '900',
    };
    expect((await refused('/cover-periods', soil)).detail).toMatch(/holds at most \d+ mm/);
    expect((await refused('/cover-periods', { ...body, onDay: '2026-02-10' })).detail).toContain('already');
    expect((await refused('/cover-periods', { ...body, onDay: '2026-01-20' })).detail).toContain(
      'Two covers cannot lie on one plot at once',
    );
    expect((await refused('/cover-periods', { ...body, onDay: '2026-12-01' })).detail).toContain(
      'still to come',
    );
    expect(
      (await refused('/cover-periods', { ...body, onDay: '2026-03-01', areaM2: '40000' })).detail,
    ).toContain('cannot be covered on it');
  });

  it('a cover entry made in error is taken out, last one first; a split plot goes on whole again', async () => {
    const correct = (coverPeriodId: string, coverTypeId: string) => ({
      coverPeriodId,
      coverTypeId,
      reason: 'the survey was of another bench',
    });
    const path = `/sites/${site.siteId}/cover-corrections`;
    const periodOf = async (name: string, fromOn: string) => {
      const { plots, coverPeriods } = await site.view();
      const ids = plots.filter((plot) => plot.name === name).map((plot) => plot.id);
      return coverPeriods.find((one) => ids.includes(one.plotId) && one.fromOn === fromOn)!.id;
    };
    const split = await periodOf('Bench', '2026-01-12');
    expect((await refused('/cover-corrections', correct(split, 'none'))).detail).toContain(
      'covered again on 1 February 2026',
    );
    const opening = await periodOf('Whole', '2025-01-01');
    expect((await refused('/cover-corrections', correct(opening, 'none'))).detail).toContain(
      'began under this cover',
    );
    const daily = await periodOf('Whole', '2026-02-01');
    const same = correct(daily, await site.coverTypeId('working-area'));
    expect((await refused('/cover-corrections', same)).detail).toContain('right before or after');
    await write(site.engineer, path, correct(daily, await site.coverTypeId('final-soil'))).expect(201);
    expect(await site.view()).toMatchObject({
      coverPeriods: expect.arrayContaining([
        expect.objectContaining({ fromOn: '2026-02-01', coverTypeId: await site.coverTypeId('final-soil') }),
      ]),
    });
    await write(site.engineer, path, correct(await periodOf('Whole', '2026-02-01'), 'none')).expect(201);
    await write(site.engineer, path, correct(split, 'none')).expect(201);
    const { plots, coverPeriods } = await site.view();
    expect(plots).toEqual([expect.objectContaining({ id: plotId, toOn: null, areaM2: '42000' })]);
    expect(coverPeriods).toEqual([expect.objectContaining({ id: opening, toOn: null })]);
    const kept = await record.admin.query(
      'select count(*)::int as n from cover_periods where withdrawn_at is not null',
    );
    expect(kept.rows).toEqual([{ n: 4 }]);
  });

  it('the values of a cover are changed with a reason, confirmed by it, and not below water that was placed', async () => {
    const type = (await site.view()).coverTypes.find((one) => one.kind === 'intermediate-soil')!;
    const values = {
      name: type.name,
      availableWaterMm: '95',
      membranePassFraction: '',
      runoffCoefficientWet: '0.22',
      runoffCoefficientDry: '0.18',
      curveNumber: '84',
      runoffDestination: 'storm-water',
      petFactor: '1',
      source: 'our own infiltrometer tests',
    };
    const put = (body: object) =>
      site.engineer
        .put(`/api/v1/sites/${site.siteId}/cover-types/${type.id}`)
        .set('Idempotency-Key', id())
        .send(body);
    const without = await put(values).expect(422);
    expect(fields(without.body as ProblemDocument)).toEqual(['/reason']);
    await put({ ...values, reason: 'measured' }).expect(200);
    const changed = (await site.view()).coverTypes.find((one) => one.id === type.id)!;
    expect(changed).toMatchObject({ availableWaterMm: '95', curveNumber: '84', membranePassFraction: null });
    expect(changed.confirmedAt).not.toBeNull();
    const same = await put({ ...values, name: 'daily cover', reason: 'a slip' }).expect(422);
    expect((same.body as ProblemDocument).detail).toContain('already a cover daily cover');
  });

  it('a cell is renamed, but not to a code that stands', async () => {
    const [cell] = (await site.view()).cells;
    const rename = (code: string) => ({ cellId: cell!.id, code, name: 'North rim' });
    await write(site.engineer, `/sites/${site.siteId}/cell-names`, rename('C7')).expect(201);
    expect((await site.view()).cells).toMatchObject([{ code: 'C7', name: 'North rim' }]);
    await write(site.engineer, `/sites/${site.siteId}/cell-names`, rename('C1')).expect(201);
  });

  it('settings changed meanwhile are noticed; the record may begin earlier, not after its first cell', async () => {
    const { settingsTag } = await site.view();
    const put = (name: string, tag: string, openedOn = '2023-06-01') =>
      site.engineer
        .put(`/api/v1/sites/${site.siteId}`)
        .set('Idempotency-Key', id())
        .set('If-Match', tag)
        .send({
          name,
          latitudeDeg: '37.6475',
          elevationM: '402',
          openedOn,
          displayUnits: 'metric',
          reportDueDays: '60',
          certificationText: '',
        });
    await put('Northcote East', settingsTag).expect(200);
    const late = await put('Northcote West', settingsTag).expect(412);
    expect((late.body as ProblemDocument).type).toBe('/problems/changed-meanwhile');
    const view = await site.view();
    expect(view.site).toMatchObject({ name: 'Northcote East', openedOn: '2023-06-01' });
    expect(view.dayRules).toMatchObject([{ validFromOn: '2023-06-01' }]);
    const after = await put('Northcote East', view.settingsTag, '2025-02-01').expect(422);
    expect((after.body as ProblemDocument).detail).toContain('opened on 1 January 2025');
  });

  it('codes that stand already, a meter to itself and a store that shrinks are refused', async () => {
    const treatment = await site.placeId('treatment');
    const meter = {
      id: id(),
      code: 'M1',
      name: 'M1',
      fromPlaceId: treatment,
      toPlaceId: treatment,
      digits: '3',
      decimals: '4',
      unit: 'm3',
      multiplier: '1',
      rateM3PerDayMax: '400',
      installedOn: '2026-01-01',
    };
    expect(fields(await refused('/meters', meter)).sort()).toEqual(['/decimals', '/toPlaceId'].sort());
    const store = {
      id: id(),
      placeId: id(),
      code: 'P',
      name: 'Pond',
      isCovered: false,
      linedAreaM2: '3500',
      crestLevelM: '3',
      operatingLevelM: '2.5',
      strapping: [
        { levelM: '0', volumeM3: '100', surfaceM2: '1000' },
        { levelM: '3', volumeM3: '50', surfaceM2: '1000' },
      ],
    };
    expect((await refused('/stores', store)).errors!.length).toBeGreaterThan(0);
  });
});
