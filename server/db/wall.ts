import type pg from 'pg';

/** Tables that only grow: the application's role may read and add, never change or remove. */
export const appendOnlyTables = [
  'readings',
  'levels',
  'not_read',
  'round_notes',
  'adjustments',
  'disputes',
  'entries',
  'loads_out',
  'returns',
  'condensate',
  'climate_days',
  'climate_months',
  'climate_gap_choices',
  'meter_events',
  'pump_tests',
  'results',
  'month_closings',
  'reports',
  'trail_entries',
  'trail_seals',
  'verdicts',
  'exceedance_notes',
  'compare_notes',
  'idempotency_keys',
];

/** Tables that sign-in reads before an organisation is known, through functions that run as the owner. */
const signInTables = ['organisations', 'people', 'memberships', 'sessions', 'access_links'];

const quote = (name: string) => `"${name.replaceAll('"', '""')}"`;
const currentOrganisation = `nullif(current_setting('app.organisation_id', true), '')::uuid`;
const currentPerson = `nullif(current_setting('app.person_id', true), '')::uuid`;

/** Row rule of the few tables that do not carry an organisation's id, or are a person's own. */
const specialRules: Record<string, string> = {
  organisations: `id = ${currentOrganisation}`,
  people: `id = ${currentPerson} or exists (select 1 from memberships m where m.person_id = people.id)`,
  sessions: `person_id = ${currentPerson} or organisation_id = ${currentOrganisation}`,
};

/**
 * Puts the organisation wall around every table and gives the application's role its rights.
 * Runs after each migration, as the owner; doing it twice changes nothing.
 */
export async function buildWall(owner: pg.Client, appRole: string): Promise<void> {
  const app = quote(appRole);
  const tables = await owner.query<{ name: string }>(
    `select tablename as name from pg_tables where schemaname = 'public' order by tablename`,
  );
  await owner.query(`grant usage on schema public to ${app}`);
  for (const { name } of tables.rows) {
    const table = quote(name);
    const rule = specialRules[name] ?? `organisation_id = ${currentOrganisation}`;
    const rights = appendOnlyTables.includes(name)
      ? 'select, insert'
      : name === 'people' || name === 'organisations'
        ? 'select, update'
        : 'select, insert, update, delete';
    await owner.query(`alter table ${table} enable row level security`);
    await owner.query(`alter table ${table} force row level security`);
    await owner.query(`drop policy if exists organisation_wall on ${table}`);
    await owner.query(
      `create policy organisation_wall on ${table} to ${app} using (${rule}) with check (${rule})`,
    );
    await owner.query(`drop policy if exists owner_lookup on ${table}`);
    if (signInTables.includes(name)) {
      await owner.query(
        `create policy owner_lookup on ${table} to current_user using (true) with check (true)`,
      );
    }
    await owner.query(`revoke all on ${table} from ${app}, public`);
    await owner.query(`grant ${rights} on ${table} to ${app}`);
  }
  await owner.query(`grant usage on all sequences in schema public to ${app}`);
  await owner.query(`revoke execute on all functions in schema public from public`);
  const functions = await owner.query<{ signature: string }>(
    `select p.oid::regprocedure::text as signature from pg_proc p join pg_namespace n on n.oid = p.pronamespace
     where n.nspname = 'public' and p.prosecdef`,
  );
  for (const { signature } of functions.rows)
    await owner.query(`grant execute on function ${signature} to ${app}`);
}
