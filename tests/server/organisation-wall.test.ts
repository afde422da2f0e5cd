import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { appendOnlyTables } from '#server/db/wall.ts';
import { openTestRecord, type TestRecord } from '../setup/test-record.ts';

describe('the wall in the database, as the application’s role', () => {
  let record: TestRecord;
  let app: pg.Client;
  let organisationId: string;

  beforeAll(async () => {
    record = await openTestRecord('demo_record');
    app = new pg.Client({ connectionString: record.appUrl });
    await app.connect();
    organisationId = (await record.admin.query<{ id: string }>('select id from organisations')).rows[0]!.id;
  });
  afterAll(async () => {
    await app.end();
    await record.close();
  });

  const ownTables = async () =>
    (
      await record.admin.query<{ name: string }>(
        `select tablename as name from pg_tables where schemaname = 'public' order by 1`,
      )
    ).rows.map((row) => row.name);
  const within = async <T extends object>(
    organisation: string,
    sql: string,
    values: unknown[] = [],
  ): Promise<T[]> => {
    await app.query('begin');
    try {
      await app.query(`select set_config('app.organisation_id', $1, true)`, [organisation]);
      return (await app.query<T>(sql, values)).rows;
    } finally {
      await app.query('rollback');
    }
  };

  it('the role owns nothing, is no superuser and cannot go around row rules', async () => {
    const role = (
      await record.admin.query(
        `select rolsuper, rolbypassrls, rolcreatedb, rolcreaterole from pg_roles where rolname = 'tallyweir_app'`,
      )
    ).rows[0];
    expect(role).toEqual({ rolsuper: false, rolbypassrls: false, rolcreatedb: false, rolcreaterole: false });
    const owned = await record.admin.query(
      `select 1 from pg_class c join pg_roles r on r.oid = c.relowner where r.rolname = 'tallyweir_app'`,
    );
    expect(owned.rowCount).toBe(0);
  });

  it('every table has forced row rules', async () => {
    const open = await record.admin.query(
      `select relname from pg_class c join pg_namespace n on n.oid = c.relnamespace where n.nspname = 'public' and relkind = 'r' and not (relrowsecurity and relforcerowsecurity)`,
    );
    expect(open.rows).toEqual([]);
  });

  it('without an organisation no table shows a row; with another one neither', async () => {
    for (const table of await ownTables()) {
      for (const organisation of ['', crypto.randomUUID()])
        expect(
          await within(organisation, `select 1 from "${table}" limit 1`),
          `${table} for "${organisation}"`,
        ).toEqual([]);
    }
    expect(await within(organisationId, 'select 1 from readings limit 1')).toHaveLength(1);
  });

  it('a row of another organisation cannot be written', async () => {
    const sites = await within<{ id: string }>(organisationId, 'select id from sites');
    const foreign = within(
      crypto.randomUUID(),
      `insert into laboratories (organisation_id, id, name) values ($1, gen_random_uuid(), 'x')`,
      [organisationId],
    );
    await expect(foreign).rejects.toThrow(/row-level security/);
    expect(sites).toHaveLength(1);
  });

  it('recorded facts, entries and the trail can only be added to', async () => {
    for (const table of appendOnlyTables) {
      for (const sql of [
        `update "${table}" set organisation_id = organisation_id`,
        `delete from "${table}"`,
        `truncate "${table}"`,
      ]) {
        await expect(within(organisationId, sql), sql).rejects.toThrow(/permission denied/);
      }
    }
  });

  it('the setting ends with its transaction', async () => {
    await within(organisationId, 'select 1');
    const left = await app.query<{ value: string | null }>(
      `select nullif(current_setting('app.organisation_id', true), '') as value`,
    );
    expect(left.rows[0]!.value).toBeNull();
  });

  it('two covers at once on one plot are refused by the database itself', async () => {
    const [period] = (
      await record.admin.query<{
        organisation_id: string;
        plot_id: string;
        cover_type_id: string;
        from_on: string;
      }>(
        'select organisation_id, plot_id, cover_type_id, from_on::text from cover_periods where to_on is null limit 1',
      )
    ).rows;
    const twice = within(
      organisationId,
      'insert into cover_periods (organisation_id, id, plot_id, cover_type_id, from_on, evidence) values ($1, gen_random_uuid(), $2, $3, $4::date + 30, $5)',
      [organisationId, period!.plot_id, period!.cover_type_id, period!.from_on, 'x'],
    );
    await expect(twice).rejects.toThrow(/exclusion constraint|conflicting key/);
  });

  it('what was entered equals what is posted: every live entry is the day recomputed', async () => {
    const doubled = await within(
      organisationId,
      `select meter_id, site_day, basis, count(*) from entries e where reverses_id is null and meter_id is not null and not exists (select 1 from entries r where r.reverses_id = e.id) group by 1, 2, 3 having count(*) > 1`,
    );
    expect(doubled).toEqual([]);
  });
});
