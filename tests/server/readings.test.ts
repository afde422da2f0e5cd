import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { LedgerView } from '#shared/views/month-view.ts';
import type { RoundView } from '#shared/views/round-view.ts';
import type { ProblemDocument } from '#shared/problems.ts';
import { addCell, addMeteredSump, id, makeSite, type NewSite } from '../factories/new-site.ts';
import { openTestRecord, write, type TestRecord } from '../setup/test-record.ts';

describe('the round, over HTTP', () => {
  let record: TestRecord;
  let site: NewSite;
  let meterId: string;
  let otherMeterId: string;
  let stationId: string;
  let storeId: string;
  beforeAll(async () => {
    record = await openTestRecord('empty_record');
    site = await makeSite(record, { timeZone: 'Europe/London', openedOn: '2025-01-01' });
    const { cellId } = await addCell(site, 'working-area', { openedOn: '2025-01-01' });
    ({ meterId } = await addMeteredSump(site, cellId));
    otherMeterId = id();
    await write(site.engineer, `/sites/${site.siteId}/meters`, {
      id: otherMeterId,
      code: 'X6',
      name: 'Six digits',
      fromPlaceId: await site.placeId('treatment'),
      toPlaceId: await site.placeId('outfall'),
      digits: '6',
      decimals: '0',
      unit: 'm3',
      multiplier: '1',
      rateM3PerDayMax: '400',
      installedOn: '2026-01-01',
    }).expect(201);
    storeId = id();
    await write(site.engineer, `/sites/${site.siteId}/stores`, {
      id: storeId,
      placeId: id(),
      code: 'P',
      name: 'Pond',
      isCovered: false,
      linedAreaM2: '3500',
      crestLevelM: '3.45',
      operatingLevelM: '2.8',
      strapping: [
        { levelM: '0', volumeM3: '0', surfaceM2: '3000' },
        { levelM: '3.45', volumeM3: '11000', surfaceM2: '3500' },
      ],
    }).expect(201);
    stationId = (await site.view()).stations[0]!.id;
  });
  afterAll(() => record.close());

  const save = (path: string, body: object, key?: string) =>
    write(site.engineer, `/sites/${site.siteId}${path}`, { id: key ?? id(), ...body }, key);
  const read = (registerText: string, observedLocal: string, extra: object = {}, key?: string) =>
    save('/readings', { meterId, registerText, observedLocal, ...extra }, key);
  const ledger = async (month: string) =>
    (await site.engineer.get(`/api/v1/sites/${site.siteId}/ledger/${month}`).expect(200)).body as LedgerView;
  const live = async (month: string) =>
    (await ledger(month)).entries
      .filter(
        (entry, _index, all) => !entry.reversesId && !all.some((other) => other.reversesId === entry.id),
      )
      .map((entry) => [entry.siteDay, entry.basis, Number(entry.volumeM3)])
      .reverse();
  const sentence = async (call: ReturnType<typeof save>) =>
    ((await call.expect(422)).body as ProblemDocument).detail;

  it('1, 8: a plain day and a weekend hole become entries with their basis', async () => {
    await read('0184212', '2026-03-03T08:00').expect(201);
    const plain = await read('184298', '2026-03-04T08:00').expect(201);
    expect(plain.body).toMatchObject({
      state: 'stored',
      check: { kind: 'plain', volumeM3: '86', hours: 24 },
    });
    await read('184400', '2026-03-06T08:00').expect(201);
    await read('184673', '2026-03-09T08:00').expect(201);
    expect(await live('2026-03')).toEqual([
      ['2026-03-03', 'measured', 86],
      ['2026-03-04', 'apportioned', 51],
      ['2026-03-05', 'apportioned', 51],
      ['2026-03-06', 'apportioned', 91],
      ['2026-03-07', 'apportioned', 91],
      ['2026-03-08', 'apportioned', 91],
    ]);
  });

  it('a retry with the same key is one record; another payload under it is refused; without a key nothing is written', async () => {
    const key = id();
    const body = { registerText: '184760', at: '2026-03-10T08:00' };
    const answers = [];
    for (let index = 0; index < 5; index += 1) answers.push(await read(body.registerText, body.at, {}, key));
    for (const again of answers)
      expect([again.status, again.body]).toEqual([answers[0]!.status, answers[0]!.body]);
    expect((await record.admin.query('select 1 from readings where id = $1', [key])).rowCount).toBe(1);
    expect(((await read('184999', body.at, {}, key)).body as ProblemDocument).type).toBe(
      '/problems/key-used-for-other-content',
    );
    const without = await site.engineer
      .post(`/api/v1/sites/${site.siteId}/readings`)
      .send({ id: id(), meterId, registerText: '1', observedLocal: body.at });
    expect(without.status).toBe(400);
  });

  it('five sends at once of one packet make one record', async () => {
    const key = id();
    const statuses = (
      await Promise.all(Array.from({ length: 5 }, () => read('184850', '2026-03-11T08:00', {}, key)))
    ).map((one) => one.status);
    expect(statuses.filter((status) => status === 201).length).toBeGreaterThanOrEqual(1);
    expect(statuses.every((status) => status === 201 || status === 409)).toBe(true);
    expect((await record.admin.query('select 1 from readings where id = $1', [key])).rowCount).toBe(1);
  });

  it('5: a rollover takes one tap; a reading below the last one is held, books nothing and blocks nothing', async () => {
    const six = (registerText: string, observedLocal: string, answer?: string) =>
      save('/readings', {
        meterId: otherMeterId,
        registerText,
        observedLocal,
        ...(answer ? { answer } : {}),
      });
    await six('999950', '2026-03-03T08:00').expect(201);
    const asked = await six('41', '2026-03-04T08:00').expect(201);
    expect(asked.body).toMatchObject({ state: 'held', check: { kind: 'rollover', volumeM3: '91' } });
    const taken = await six('41', '2026-03-04T08:00', 'rollover').expect(201);
    expect(taken.body.state).toBe('stored');
    const down = await six('30', '2026-03-05T08:00').expect(201);
    expect(down.body).toMatchObject({ state: 'held', check: { kind: 'went-down' } });
    const after = await six('120', '2026-03-06T08:00').expect(201);
    expect(after.body.state).toBe('stored');
    const mine = (await ledger('2026-03')).entries.filter((entry) => entry.meterCode === 'X6');
    expect(mine.every((entry) => Number(entry.volumeM3) >= 0 || entry.reversesId)).toBe(true);
  });

  it('6: a swap to US gal × 100 counts 40 + 66.24 m³, and later days follow the new register', async () => {
    await read('318402', '2026-03-12T08:00', { answer: 'confirmed' });
    const low = await save('/meter-events', {
      meterId,
      kind: 'replace',
      observedLocal: '2026-03-12T10:30',
      registerBefore: '300000',
      registerAfter: '12',
    });
    expect(low.status).toBe(422);
    expect((low.body as ProblemDocument).detail).toContain('showed 318402 before');
    await save('/meter-events', {
      meterId,
      kind: 'replace',
      observedLocal: '2026-03-12T10:30',
      registerBefore: '318442',
      registerAfter: '12',
      unitAfter: 'gal-us',
      multiplierAfter: '100',
    }).expect(201);
    await read('187', '2026-03-13T08:00').expect(201);
    const day = (await live('2026-03')).find(([siteDay]) => siteDay === '2026-03-12')!;
    expect(day[2]).toBeCloseTo(106.24, 2);
    const round = (await site.engineer.get(`/api/v1/sites/${site.siteId}/round/2026-03-14`))
      .body as RoundView;
    expect(round.points.find((point) => point.subjectId === meterId)!.register).toMatchObject({
      unit: 'gal-us',
    });
    expect(Number(round.points.find((point) => point.subjectId === meterId)!.register!.multiplier)).toBe(100);
  });

  it('10: two readings of one time are a dispute, out of totals until one is chosen with a reason', async () => {
    const [a, b] = [id(), id()];
    await read('300', '2026-03-14T08:00', {}, a).expect(201);
    await read('310', '2026-03-14T08:00', {}, b).expect(201);
    await read('420', '2026-03-15T08:00').expect(201);
    expect(
      (await live('2026-03')).filter(([siteDay]) => siteDay === '2026-03-13' || siteDay === '2026-03-14'),
    ).toEqual([]);
    await save('/disputes', { chosenReadingId: a, reason: 'Photo of the register' }).expect(201);
    const days = (await live('2026-03')).filter(
      ([siteDay]) => siteDay === '2026-03-13' || siteDay === '2026-03-14',
    );
    expect(days.map(([siteDay]) => siteDay)).toEqual(['2026-03-13', '2026-03-14']);
  });

  it('not read needs a reason and no number; “another reason” needs words', async () => {
    const round = (await site.engineer.get(`/api/v1/sites/${site.siteId}/round/2026-03-16`))
      .body as RoundView;
    const roundPointId = round.points.find((point) => point.subjectId === meterId)!.id;
    await save('/not-read', { roundPointId, siteDay: '2026-03-16', reasonCode: 'no-access' }).expect(201);
    expect(
      await sentence(save('/not-read', { roundPointId, siteDay: '2026-03-16', reasonCode: 'other' })),
    ).toBe('Write down the reason.');
    const after = (await site.engineer.get(`/api/v1/sites/${site.siteId}/round/2026-03-16`))
      .body as RoundView;
    expect(after.points.find((point) => point.id === roundPointId)!.notRead).toMatchObject({
      reasonCode: 'no-access',
    });
  });

  describe('the bad-input table', () => {
    it('a letter O in the register is named', async () => {
      expect(await sentence(read('O184298', '2026-03-16T08:00'))).toContain('"O" is not part of a number');
    });
    it('184.298 on a register of whole units asks', async () => {
      expect(await sentence(read('184.298', '2026-03-16T08:00'))).toContain('184298 or 184.298?');
    });
    it.each([
      ['2026-03-19T08:00', 'to come'],
      ['2026-02-31T08:00', 'Enter the day and time'],
      ['1926-01-01T08:00', 'installed'],
    ])('a reading of %s is refused', async (at, words) => {
      expect(await sentence(read('500', at))).toContain(words);
    });
    it('an hour that the clock skips is refused with the hour after it', async () => {
      record.setNow('2026-04-02T09:30:00Z');
      expect(await sentence(read('500', '2026-03-29T01:30'))).toContain('The clock skipped 01:30');
      record.setNow('2026-03-18T09:30:00Z');
    });
    it('2,10 is shown back and takes one tap, and is never 210', async () => {
      expect(
        await sentence(save('/levels', { storeId, levelText: '2,10', observedLocal: '2026-03-16T08:00' })),
      ).toContain('2.10 m?');
      await save('/levels', {
        storeId,
        levelText: '2,10',
        isConfirmed: true,
        observedLocal: '2026-03-16T08:00',
      }).expect(201);
      expect(
        (
          await record.admin.query<{ level_m: string }>(
            'select level_m from levels order by sequence desc limit 1',
          )
        ).rows[0]!.level_m,
      ).toMatch(/^2\.10/);
    });
    it('14: a level above the crest is refused', async () => {
      expect(
        await sentence(save('/levels', { storeId, levelText: '22.0', observedLocal: '2026-03-16T08:00' })),
      ).toContain('3.45 m or less');
    });
    it('254 in of rain is refused and offered as mm; below zero and snow depth are refused', async () => {
      const rain = (depthText: string, extra: object = {}) =>
        save('/rain-days', { stationId, depthText, observedLocal: '2026-03-16T07:00', ...extra });
      expect(await sentence(rain('254', { unit: 'in' }))).toContain('254 mm?');
      expect(await sentence(rain('-2'))).toContain('0 or more');
      expect(await sentence(rain('12 cm'))).toContain('a depth of snow is not rain');
    });
    it('tare above gross is refused, an unknown kind of volume too', async () => {
      const load = {
        ticket: '004417',
        hauler: 'Dunmere',
        fromPlaceId: await site.placeId('treatment'),
        toPlaceId: await site.placeId('haulage'),
        observedLocal: '2026-03-16T10:00',
      };
      expect(
        await sentence(
          save('/loads-out', {
            ...load,
            officialVolume: 'weighed',
            grossMassKg: '20000',
            tareMassKg: '30000',
          }),
        ),
      ).toContain('must be less than the gross mass');
      expect(await sentence(save('/loads-out', { ...load, nominalVolumeM3: '' }))).toContain(
        'Enter the nominal volume in m³.',
      );
    });
  });

  it('15: rain read at 07:00 on 5 March counts for 4 March; trace is present and zero', async () => {
    await save('/rain-days', { stationId, depthText: '31.2', observedLocal: '2026-03-05T09:00' }).expect(201);
    await save('/rain-days', { stationId, kind: 'trace', observedLocal: '2026-03-06T09:00' }).expect(201);
    const days = (
      await record.admin.query<{ day: string; mm: string; kind: string }>(
        'select site_day::text as day, precipitation_mm as mm, kind from climate_days order by site_day',
      )
    ).rows;
    expect(
      days.filter((row) => row.day < '2026-03-10').map((row) => [row.day, Number(row.mm), row.kind]),
    ).toEqual([
      ['2026-03-04', 31.2, 'measured'],
      ['2026-03-05', 0, 'trace'],
    ]);
  });

  it('22: a ticket entered twice is refused as a duplicate, leading zeros kept', async () => {
    const load = async (ticket: string, hauler = 'Dunmere') =>
      save('/loads-out', {
        ticket,
        hauler,
        fromPlaceId: await site.placeId('treatment'),
        toPlaceId: await site.placeId('haulage'),
        nominalVolumeM3: '20.8',
        observedLocal: '2026-03-17T10:00',
      });
    expect((await load('004417')).status).toBe(201);
    const twice = await load('004417');
    expect(twice.status).toBeGreaterThanOrEqual(400);
    expect((twice.body as ProblemDocument).detail).toContain('004417');
    expect((await load('004417', ' dunmere ')).status).toBe(422);
    expect((await ledger('2026-03')).loads).toMatchObject({ count: 1, nominalM3: 20.8 });
  });

  it('an entry opens to the readings and intervals behind it', async () => {
    const entry = (await ledger('2026-03')).entries.find(
      (one) => one.siteDay === '2026-03-03' && one.meterCode === 'S1',
    )!;
    const source = (await site.engineer.get(`/api/v1/sites/${site.siteId}/entries/${entry.id}`).expect(200))
      .body as { facts: { words: string }[]; intervals: { volumeM3: string }[] };
    expect(source.facts.map((fact) => fact.words)).toEqual(['0184212 m³', '184298 m³']);
    expect(Number(source.intervals[0]!.volumeM3)).toBe(86);
  });
});
