import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { LabImportView, LabView, LimitsView } from '#shared/views/lab-view.ts';
import type { ProblemDocument } from '#shared/problems.ts';
import { workbookOf } from '../factories/workbooks.ts';
import { openTestRecord, siteIdOf, write, type Agent, type TestRecord } from '../setup/test-record.ts';

const id = () => crypto.randomUUID();
const head = ['Client ID', 'Sampled', 'Parameter', 'Result', 'Units', 'RL'];

describe('sheets of a laboratory, in the demo', () => {
  let record: TestRecord;
  let lab: Agent;
  let engineer: Agent;
  let siteId: string;
  let laboratoryId: string;
  beforeAll(async () => {
    record = await openTestRecord('demo_record');
    lab = await record.as('lab');
    engineer = await record.as('engineer');
    siteId = await siteIdOf(engineer);
    laboratoryId = ((await lab.get(`/api/v1/sites/${siteId}/lab/2026-03`)).body as LabView).laboratories[0]!
      .id;
  });
  afterAll(() => record.close());

  const upload = (bytes: Buffer, name: string, agent = lab) =>
    agent
      .post(`/api/v1/sites/${siteId}/lab-imports`)
      .set('Idempotency-Key', id())
      .field('id', id())
      .field('laboratoryId', laboratoryId)
      .attach('file', bytes, name);
  const check = async (importId: string, agent = lab) =>
    (await agent.get(`/api/v1/sites/${siteId}/lab-imports/${importId}`).expect(200)).body as LabImportView;
  const act = (importId: string, what: string, body: object = {}) =>
    write(lab, `/sites/${siteId}/lab-imports/${importId}/${what}`, body);
  const results = async () =>
    ((await engineer.get(`/api/v1/sites/${siteId}/lab/2026-03`)).body as LabView).results;
  const resultCount = async () =>
    Number((await record.admin.query<{ n: string }>('select count(*) as n from results')).rows[0]!.n);

  it('shape 1 as a real .xlsx: nothing is stored before it is confirmed, and the counts add up', async () => {
    const before = await resultCount();
    const bytes = await workbookOf({
      Results: [
        ['Pellam Laboratory'],
        [],
        ['Job: 26-0147'],
        [],
        head,
        ['EFF-1', new Date('2026-03-16T00:00:00Z'), 'Ammonia (as N)', 3.2, 'mg/L', 0.1],
        ['EFF-1', new Date('2026-03-16T00:00:00Z'), 'Zinc, Total', '0.05 U', 'mg/L', 0.05],
        ['EFF-1', new Date('2026-03-16T00:00:00Z'), 'BOD5', 'Pending', 'mg/L', 2],
        ['OF-9', new Date('2026-03-16T00:00:00Z'), 'TSS', 14, 'mg/L', 2],
        ['EFF-1', new Date('2026-03-16T00:00:00Z'), 'Phenol', 'ND', 'mg/L', null],
        ['EFF-1', new Date('2026-03-16T00:00:00Z'), 'Chloride', '=2+5', 'mg/L', null],
        [],
        ['U = not detected at RL'],
      ],
    });
    const importId = (await upload(bytes, 'march.xlsx').expect(201)).body.id as string;
    const view = await check(importId);
    expect(view.counts).toMatchObject({ held: 3 });
    expect(view.counts.read).toBe(
      view.counts.ok + view.counts.warned + view.counts.held + view.counts.skipped,
    );
    expect(view.reading).toMatchObject({ jobNumber: '26-0147', headerRow: 5 });
    expect(await resultCount()).toBe(before);
    const done = (await act(importId, 'confirmation').expect(201)).body as {
      writtenCount: number;
      heldCount: number;
    };
    expect(done).toMatchObject({ writtenCount: 3, heldCount: 3 });
    expect(await resultCount()).toBe(before + 3);
    const ammonia = (await results()).find(
      (row) => row.importId === importId && row.analyteName === 'Ammonia',
    )!;
    expect(ammonia).toMatchObject({
      value: expect.stringMatching(/^3\.2/) as string,
      unit: 'mg/L',
      rawText: '3.2',
      sheet: 'Results',
      cell: 'D6',
    });
    const again = (await upload(bytes, 'march again.xlsx').expect(409)).body as ProblemDocument;
    expect(again.detail).toContain('There is nothing to do');
  });

  it('an answer is remembered: the unknown point is asked once, and never again for this laboratory', async () => {
    const sheet = (day: string) =>
      workbookOf({ S: [head, ['OF-9', new Date(`${day}T00:00:00Z`), 'TSS', 15, 'mg/L', 2]] });
    const first = (await upload(await sheet('2026-03-09'), 'a.xlsx').expect(201)).body.id as string;
    const view = await check(first);
    expect(view.rows[0]!.question).toMatchObject({ kind: 'sample-point' });
    const answered = await act(first, 'answers', {
      kind: 'sample-point',
      fromText: 'OF-9',
      toValue: view.points.find((point) => point.code === 'EFF-1')!.id,
    }).expect(201);
    expect(answered.body.counts.held).toBe(0);
    const second = (await upload(await sheet('2026-03-10'), 'b.xlsx').expect(201)).body.id as string;
    expect((await check(second)).counts.held).toBe(0);
  });

  it('shape 3, limits printed for what was not found: one answer for the file, written as below the limit', async () => {
    const day = (text: string) => new Date(`${text}T00:00:00Z`);
    const bytes = await workbookOf({
      S: [
        ['Date', 'Site', 'BOD (mg/l)', 'Zn-T (ug/L)', 'Zn-D (ug/L)', 'Comments'],
        ['RL', null, 2, 5, 5, null],
        [day('2026-03-13'), 'EFF-1', 2, 61, 5, null],
        [day('2026-03-14'), 'EFF-1', 6, 5, 5, 'dup taken'],
      ],
    });
    const importId = (await upload(bytes, 'across.xlsx').expect(201)).body.id as string;
    const view = await check(importId);
    expect(view.reading.shape).toBe('samples-down');
    expect(view.counts).toMatchObject({ read: 7, ok: 2, held: 4, skipped: 1 });
    const kind = 'equal-to-limit';
    await act(importId, 'answers', { kind, fromText: '2', toValue: 'perhaps' }).expect(422);
    const answered = await act(importId, 'answers', { kind, fromText: '2', toValue: 'below' }).expect(201);
    expect(answered.body.counts).toMatchObject({ ok: 2, warned: 4, held: 0 });
    expect((await check(importId)).reading.equalToLimit).toBe('below');
    await act(importId, 'confirmation').expect(201);
    const written = (await results()).filter((row) => row.importId === importId);
    expect(
      written
        .filter((row) => row.comparator === '<')
        .map((row) => `${row.siteDay} ${row.analyteName} ${row.fraction} ${Number(row.value)}`)
        .sort(),
    ).toEqual([
      '2026-03-13 BOD5  2',
      '2026-03-13 Zinc dissolved 0.005',
      '2026-03-14 Zinc dissolved 0.005',
      '2026-03-14 Zinc total 0.005',
    ]);
  });

  it('a later sheet with another value supersedes and keeps the old one; undo voids', async () => {
    const list = (zinc: string) =>
      Buffer.from(
        `Client ID,Sampled,Parameter,Result,Units,RL\nEFF-1,2026-03-12,"Zinc, Total",${zinc},mg/L,0.05\n`,
      );
    const first = (await upload(list('<0.05'), 'rev0.csv').expect(201)).body.id as string;
    await act(first, 'confirmation').expect(201);
    const second = (await upload(list('0.18'), 'rev1.csv').expect(201)).body.id as string;
    const view = await check(second);
    expect(view.rows[0]).toMatchObject({ supersedesWords: 'below 0.05 mg/L', state: 'warned' });
    await act(second, 'confirmation').expect(201);
    const live = (await results()).filter(
      (row) => row.analyteName === 'Zinc' && row.siteDay === '2026-03-12',
    );
    expect(live.map((row) => [Number(row.value), row.isRevision])).toEqual([[0.18, true]]);
    expect(
      (
        await record.admin.query(
          `select 1 from results where site_day = '2026-03-12' and raw_text in ('<0.05', '0.18')`,
        )
      ).rowCount,
    ).toBe(2);
    await act(second, 'undo').expect(201);
    expect(
      (await results()).filter(
        (row) => row.analyteName === 'Zinc' && row.siteDay === '2026-03-12' && Number(row.value) === 0.18,
      ),
    ).toEqual([]);
  });

  it('10.4 mg/L of ammonia opens an exceedance with its clock and an e-mail waiting', async () => {
    const mails = async () =>
      Number(
        (await record.admin.query<{ n: string }>(`select count(*) as n from queue.job where name = 'mail'`))
          .rows[0]!.n,
      );
    const [before, limitsBefore] = [
      await mails(),
      (await engineer.get(`/api/v1/sites/${siteId}/limits/2026-03`)).body as LimitsView,
    ];
    const bytes = Buffer.from(
      'Client ID,Sampled,Parameter,Result,Units,RL\nEFF-1,2026-03-13,Ammonia (as N),12.6,mg/L,0.1\n',
    );
    const importId = (await upload(bytes, 'high.csv').expect(201)).body.id as string;
    expect((await act(importId, 'confirmation').expect(201)).body.exceedanceCount).toBe(1);
    const limits = (await engineer.get(`/api/v1/sites/${siteId}/limits/2026-03`)).body as LimitsView;
    const opened = limits.exceedances.find(
      (one) => !limitsBefore.exceedances.some((known) => known.id === one.id),
    )!;
    expect(opened.sentence).toContain('12.6 mg/L');
    expect(opened.clocks[0]).toMatchObject({ doneAt: null });
    expect(Date.parse(opened.clocks[0]!.dueAt) - Date.parse(opened.seenAt)).toBe(24 * 3_600_000);
    expect(await mails()).toBeGreaterThan(before);
    await write(engineer, `/sites/${siteId}/exceedances/${opened.id}/closing`, { cause: 'Too early' }).expect(
      409,
    );
    for (const clock of opened.clocks)
      await write(engineer, `/sites/${siteId}/exceedances/${opened.id}/clocks/${clock.id}`, {
        note: 'Called the duty desk, spoke to R. Lane',
      }).expect(201);
    await write(engineer, `/sites/${siteId}/exceedances/${opened.id}/closing`, {
      cause: 'Blower off; restarted',
    }).expect(201);
    const after = (
      (await engineer.get(`/api/v1/sites/${siteId}/limits/2026-03`)).body as LimitsView
    ).exceedances.find((one) => one.id === opened.id)!;
    expect(after).toMatchObject({
      cause: 'Blower off; restarted',
      clocks: expect.arrayContaining([
        expect.objectContaining({ doneNote: 'Called the duty desk, spoke to R. Lane' }),
      ]) as unknown,
    });
  });

  it('one file uploaded twice is written once; an upload can be laid aside', async () => {
    const bytes = Buffer.from(
      'Client ID,Sampled,Parameter,Result,Units,RL\nEFF-1,2026-03-05,TSS,14,mg/L,2\n',
    );
    const first = (await upload(bytes, 'twice.csv').expect(201)).body.id as string;
    const second = (await upload(bytes, 'twice.csv').expect(201)).body.id as string;
    await act(second, 'confirmation').expect(201);
    const before = await resultCount();
    expect((await act(first, 'confirmation').expect(409)).body.detail).toContain('imported');
    expect(await resultCount()).toBe(before);
    await act(first, 'discard').expect(201);
    await act(first, 'confirmation').expect(409);
    await act(second, 'discard').expect(409);
  });

  it('an upload read before the record changed is read again before it is written', async () => {
    const list = (tss: string) =>
      Buffer.from(`Client ID,Sampled,Parameter,Result,Units,RL\nEFF-1,2026-03-06,TSS,${tss},mg/L,2\n`);
    const older = (await upload(list('15'), 'older.csv').expect(201)).body.id as string;
    const newer = (await upload(list('16'), 'newer.csv').expect(201)).body.id as string;
    await act(newer, 'confirmation').expect(201);
    await act(older, 'confirmation').expect(412);
    await act(older, 'reading').expect(201);
    expect((await check(older)).rows[0]).toMatchObject({ supersedesWords: '16 mg/L' });
    await act(older, 'confirmation').expect(201);
  });

  it('an exceedance whose result was undone says that it no longer stands', async () => {
    const bytes = Buffer.from(
      'Client ID,Sampled,Parameter,Result,Units,RL\nEFF-1,2026-03-04,Ammonia (as N),11.9,mg/L,0.1\n',
    );
    const importId = (await upload(bytes, 'undone.csv').expect(201)).body.id as string;
    await act(importId, 'confirmation').expect(201);
    const opened = async () =>
      ((await engineer.get(`/api/v1/sites/${siteId}/limits/2026-03`)).body as LimitsView).exceedances.find(
        (one) => one.periodKey === '2026-03-04',
      )!;
    expect((await opened()).isStanding).toBe(true);
    await act(importId, 'undo').expect(201);
    expect((await opened()).isStanding).toBe(false);
  });

  it('a limit is a template until the manager confirms it', async () => {
    const manager = await record.as('manager');
    const limits = (await manager.get(`/api/v1/sites/${siteId}/limits/2026-03`)).body as LimitsView;
    const template = limits.verdicts.find((one) => !one.limit.confirmedAt)!;
    await write(engineer, `/sites/${siteId}/limits/${template.limit.id}/confirmation`, {}).expect(403);
    await write(manager, `/sites/${siteId}/limits/${template.limit.id}/confirmation`, {}).expect(201);
    await write(manager, `/sites/${siteId}/limits/${template.limit.id}/confirmation`, {}).expect(409);
  });

  it('the laboratory sees its own uploads and results and none of the record', async () => {
    await lab.get(`/api/v1/sites/${siteId}/ledger/2026-03`).expect(403);
    const other = crypto.randomUUID();
    await record.admin.query(
      'insert into laboratories (organisation_id, id, name) select organisation_id, $1, $2 from laboratories limit 1',
      [other, 'Another laboratory'],
    );
    const foreign = await engineer
      .post(`/api/v1/sites/${siteId}/lab-imports`)
      .set('Idempotency-Key', id())
      .field('id', id())
      .field('laboratoryId', other)
      .attach(
        'file',
        Buffer.from('Client ID,Sampled,Parameter,Result,Units\nEFF-1,2026-03-11,TSS,9,mg/L\n'),
        'other.csv',
      )
      .expect(201);
    await lab.get(`/api/v1/sites/${siteId}/lab-imports/${foreign.body.id}`).expect(404);
    expect(
      ((await lab.get(`/api/v1/sites/${siteId}/lab/2026-03`)).body as LabView).uploads.some(
        (one) => one.id === foreign.body.id,
      ),
    ).toBe(false);
    await upload(Buffer.from('a,b\n1,2\n'), 'x.csv').field('laboratoryId', other).expect(422);
  });
});
