import { createHash } from 'node:crypto';
import ExcelJS from 'exceljs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { LedgerView, MonthView } from '#shared/views/month-view.ts';
import type { LabView, ReportView } from '#shared/views/lab-view.ts';
import type { ProblemDocument } from '#shared/problems.ts';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { openTestRecord, siteIdOf, write, type Agent, type TestRecord } from '../setup/test-record.ts';

const id = () => crypto.randomUUID();

describe('closing, reopening, signing, and what arrives late', () => {
  let record: TestRecord;
  let engineer: Agent;
  let manager: Agent;
  let supervisor: Agent;
  let siteId: string;
  let s3: string;
  beforeAll(async () => {
    record = await openTestRecord('demo_record');
    [engineer, manager, supervisor] = [
      await record.as('engineer'),
      await record.as('manager'),
      await record.as('supervisor'),
    ];
    siteId = await siteIdOf(engineer);
    s3 = ((await engineer.get(`/api/v1/sites/${siteId}`)).body as SiteStructureView).meters.find(
      (meter) => meter.code === 'S3',
    )!.id;
  });
  afterAll(() => record.close());

  const get = async <T>(path: string, agent = engineer) =>
    (await agent.get(`/api/v1/sites/${siteId}${path}`).expect(200)).body as T;
  const post = (agent: Agent, path: string, body: object = {}) =>
    write(agent, `/sites/${siteId}${path}`, { id: id(), ...body });
  const report = (quarter: string) => get<ReportView>(`/reports/${quarter}`);
  const file = async (path: string, agent = manager) => {
    const answer = await agent
      .get(`/api/v1/sites/${siteId}${path}`)
      .buffer(true)
      .parse((response, done) => {
        const chunks: Buffer[] = [];
        response.on('data', (chunk: Buffer) => chunks.push(chunk));
        response.on('end', () => done(null, Buffer.concat(chunks)));
      })
      .expect(200);
    return answer.body as Buffer;
  };

  it('a closed month posts nothing: a late reading waits as pending and is not lost', async () => {
    const before = await get<LedgerView>('/ledger/2026-01');
    expect(before.act).toBe('close');
    await post(supervisor, '/adjustments', {
      meterId: s3,
      fromAt: '2026-01-10T08:00:00Z',
      toAt: '2026-01-11T08:00:00Z',
      volumeM3: '31.5',
      method: 'judgement',
      inputs: 'compared with the days around',
      reason: 'Register looked stuck',
    }).expect(201);
    const after = await get<LedgerView>('/ledger/2026-01');
    expect(after.entries).toEqual(before.entries);
    expect(after.pending.length).toBe(before.pending.length + 1);
    const last = await record.admin.query<{ register_value: string }>(
      `select register_value from readings where meter_id = $1 and observed_at < '2026-01-20T14:00Z'
       order by observed_at desc limit 1`,
      [s3],
    );
    const late = await post(supervisor, '/readings', {
      meterId: s3,
      registerText: String(Number(last.rows[0]!.register_value) + 1),
      observedLocal: '2026-01-20T14:00',
    }).expect(201);
    expect((late.body as { warning: string }).warning).toContain('January 2026 is closed');
  });

  it('reopening needs the manager and a reason; the waiting change is posted as reversal and replacement', async () => {
    await post(engineer, '/months/2026-01/reopening', { reason: 'try' }).expect(403);
    expect(
      ((await post(manager, '/months/2026-01/reopening', { reason: '' }).expect(422)).body as ProblemDocument)
        .detail,
    ).toBe('Enter the reason for reopening.');
    const before = await get<LedgerView>('/ledger/2026-01');
    await post(manager, '/months/2026-01/reopening', { reason: 'Estimate for S3 arrived' }).expect(201);
    const after = await get<LedgerView>('/ledger/2026-01');
    expect(after.pending).toEqual([]);
    const added = after.entries.filter((entry) => !before.entries.some((known) => known.id === entry.id));
    expect(added.some((entry) => entry.reversesId !== null)).toBe(true);
    expect(added.some((entry) => entry.basis === 'estimated')).toBe(true);
    expect(before.entries.every((entry) => after.entries.some((known) => known.id === entry.id))).toBe(true);
  });

  it('the quarter cannot be signed while a month is open; the lines say which', async () => {
    const view = await report('2026-Q1');
    expect(view.readiness.filter((line) => line.state === 'stops').map((line) => line.sentence)).toEqual(
      expect.arrayContaining(['January 2026 is not closed.', 'March 2026 is not closed.']) as unknown,
    );
    const refused = await post(manager, '/reports/2026-Q1', { isConfirmed: true }).expect(409);
    expect((refused.body as ProblemDocument).detail).toContain('January 2026 is not closed.');
  });

  it('closing the month again and signing a whole quarter: the certification, a reason, the exact bytes kept', async () => {
    await post(engineer, '/months/2026-01/closing', { reason: 'Estimate checked by the supervisor' }).expect(
      201,
    );
    const closings = await get<MonthView>('/months/2025-10');
    expect(closings.act?.act).toBe('close');
    const unconfirmed = await post(manager, '/reports/2025-Q3', { isConfirmed: false }).expect(422);
    expect((unconfirmed.body as ProblemDocument).errors![0]!.pointer).toBe('/isConfirmed');
    const open = (await report('2025-Q3')).readiness.some((line) => line.state === 'ask');
    if (open)
      expect(
        ((await post(manager, '/reports/2025-Q3', { isConfirmed: true }).expect(422)).body as ProblemDocument)
          .errors![0]!.pointer,
      ).toBe('/reason');
    const signed = await post(manager, '/reports/2025-Q3', {
      isConfirmed: true,
      reason: 'Open lines are explained in the notes',
    }).expect(201);
    expect(signed.body).toMatchObject({ issue: 0 });
    const issue = (await report('2025-Q3')).issues.find((one) => one.quarter === '2025-Q3')!;
    const bytes = await file(`/report-files/${issue.id}`);
    expect(createHash('sha256').update(bytes).digest('hex')).toBe(issue.fileSha256);
    await post(manager, '/reports/2025-Q3', { isConfirmed: true, reason: 'again' }).expect(409);
  });

  it('25: a result that arrives after the issue leaves it as it was, marks it stale, and is re-issued with its changes', async () => {
    const first = (await report('2025-Q3')).issues.find((one) => one.quarter === '2025-Q3')!;
    const issued = await file(`/report-files/${first.id}`);
    const laboratoryId = (await get<LabView>('/lab/2025-09')).laboratories[0]!.id;
    const upload = await engineer
      .post(`/api/v1/sites/${siteId}/lab-imports`)
      .set('Idempotency-Key', id())
      .field('id', id())
      .field('laboratoryId', laboratoryId)
      .attach(
        'file',
        Buffer.from(
          'Client ID,Sampled,Parameter,Result,Units,RL\nEFF-1,2025-09-19,"Zinc, Total",0.19,mg/L,0.05\n',
        ),
        'late.csv',
      )
      .expect(201);
    await write(engineer, `/sites/${siteId}/lab-imports/${upload.body.id}/confirmation`, {}).expect(201);
    const stale = await report('2025-Q3');
    expect(stale.issues.find((one) => one.id === first.id)).toMatchObject({ isStale: true });
    expect(stale.changes.map((one) => one.name).join()).toContain('Zinc');
    expect((await file(`/report-files/${first.id}`)).equals(issued)).toBe(true);
    await post(manager, '/reports/2025-Q3', { isConfirmed: true, reason: 'Late zinc result' }).expect(201);
    const again = await report('2025-Q3');
    expect(
      again.issues
        .filter((one) => one.quarter === '2025-Q3')
        .map((one) => [one.issue, one.isStale, one.isLast]),
    ).toEqual([
      [0, false, false],
      [1, false, true],
    ]);
    expect((await file(`/report-files/${first.id}`)).equals(issued)).toBe(true);
    const second = new ExcelJS.Workbook();
    await second.xlsx.load(
      (await file(
        `/report-files/${again.issues.find((one) => one.quarter === '2025-Q3' && one.issue === 1)!.id}`,
      )) as never,
    );
    expect(JSON.stringify(second.getWorksheet('About')!.getSheetValues())).toContain('Zinc');
  });

  it('whoever made an estimate in a month closes it only with a note', async () => {
    await post(engineer, '/adjustments', {
      meterId: s3,
      fromAt: '2026-03-05T08:00:00Z',
      toAt: '2026-03-06T08:00:00Z',
      volumeM3: '80',
      method: 'judgement',
      inputs: 'days around',
      reason: 'Cable off',
    }).expect(201);
    record.setNow('2026-04-03T09:00:00Z');
    const refused = await post(engineer, '/months/2026-03/closing');
    expect(refused.status).toBeGreaterThanOrEqual(409);
    expect((refused.body as ProblemDocument).detail).toMatch(/note|estimate|reason/i);
    record.setNow('2026-03-18T09:30:00Z');
  });

  it('a month that is still running cannot be closed', async () => {
    const refused = await post(engineer, '/months/2026-03/closing', { reason: 'early' });
    expect([409, 422]).toContain(refused.status);
  });
});
