import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { sealTrail } from '#server/audit/trail-seals.ts';
import { withOrganisation } from '#server/db/transaction.ts';
import type { TrailCheckView, TrailView } from '#shared/views/site-view.ts';
import { openTestRecord, siteIdOf, write, type Agent, type TestRecord } from '../setup/test-record.ts';

describe('the trail', () => {
  let record: TestRecord;
  let auditor: Agent;
  let siteId: string;
  let organisationId: string;
  beforeAll(async () => {
    record = await openTestRecord('demo_record');
    auditor = await record.as('auditor');
    siteId = await siteIdOf(auditor);
    organisationId = (await record.admin.query<{ id: string }>('select id from organisations')).rows[0]!.id;
  });
  afterAll(() => record.close());

  const seal = () =>
    withOrganisation(record.deps.database, { organisationId, personId: null }, (tx) =>
      sealTrail(tx, organisationId),
    );
  const check = async () =>
    (await auditor.get(`/api/v1/sites/${siteId}/trail-check`).expect(200)).body as TrailCheckView;
  const rows = async (query = '') =>
    ((await auditor.get(`/api/v1/sites/${siteId}/trail${query}`).expect(200)).body as TrailView).rows;

  it('a change says who, what, when and why, and can be followed by its subject', async () => {
    const engineer = await record.as('engineer');
    const noteId = crypto.randomUUID();
    const compare = (await engineer.get(`/api/v1/sites/${siteId}/compare/2026-02?cell=C3`).expect(200))
      .body as { cell: { id: string } };
    await write(engineer, `/sites/${siteId}/compare-notes`, {
      id: noteId,
      cellId: compare.cell.id,
      month: '2026-02',
      cause: 'storage of the waste',
      state: 'explained',
      note: 'Second lift still takes up water',
    }).expect(201);
    const [row] = await rows(`?subject=${noteId}`);
    expect(row).toMatchObject({
      by: 'Ines Quarrel',
      action: 'note',
      reason: 'Second lift still takes up water',
    });
  });

  it('unsealed changes are named as such and sealed in order', async () => {
    await seal();
    const sealed = await check();
    expect(sealed).toMatchObject({ unsealedCount: 0, firstFault: null });
    expect(sealed.headHash).toMatch(/^[0-9a-f]{64}$/);
  });

  it('an edit made around the application is found and named', async () => {
    await seal();
    const target = (await rows())[3]!;
    await record.admin.query('update trail_entries set sentence = $1 where id = $2', [
      'Something else was done.',
      target.id,
    ]);
    const [, from, to] = /rows (\d+) to (\d+)/.exec((await check()).firstFault!)!.map(Number);
    expect(target.sequence).toBeGreaterThanOrEqual(from!);
    expect(target.sequence).toBeLessThanOrEqual(to!);
    await record.admin.query('update trail_entries set sentence = $1 where id = $2', [
      target.sentence,
      target.id,
    ]);
    expect((await check()).firstFault).toBeNull();
  });

  it('a deleted row is found too', async () => {
    await seal();
    const gone = (await rows())[2]!;
    await record.admin.query('delete from trail_entries where id = $1', [gone.id]);
    expect((await check()).firstFault).not.toBeNull();
  });
});
