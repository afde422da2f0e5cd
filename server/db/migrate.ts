import { randomBytes } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import pg from 'pg';
import PgBoss from 'pg-boss';
import { buildWall } from './wall.ts';

const migrationsFolder = fileURLToPath(new URL('../../drizzle', import.meta.url));
const ownerRole = 'tallyweir_owner';
const appRole = 'tallyweir_app';
export const queueNames = ['mail'] as const;

export interface DatabaseUrls {
  ownerUrl: string;
  appUrl: string;
}

async function asClient<T>(url: string, work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    return await work(client);
  } finally {
    await client.end();
  }
}

/** Passwords of the two roles, made once and kept beside the cluster. */
function rolePasswords(folder: string): { owner: string; app: string } {
  const file = join(folder, 'role-passwords.json');
  if (!existsSync(file)) {
    const made = { owner: randomBytes(24).toString('base64url'), app: randomBytes(24).toString('base64url') };
    writeFileSync(file, JSON.stringify(made), { mode: 0o600 });
  }
  return JSON.parse(readFileSync(file, 'utf8')) as { owner: string; app: string };
}

/**
 * Makes the two roles and the database on a cluster of our own.
 * @param folder where the role passwords are kept, mode 0600
 */
export async function prepareDatabase(
  adminUrl: string,
  folder: string,
  database: string,
): Promise<DatabaseUrls> {
  const passwords = rolePasswords(folder);
  await asClient(adminUrl, async (admin) => {
    for (const [role, password] of [
      [ownerRole, passwords.owner],
      [appRole, passwords.app],
    ] as const) {
      const known = await admin.query('select 1 from pg_roles where rolname = $1', [role]);
      const verb = known.rowCount ? 'alter' : 'create';
      await admin.query(
        `${verb} role ${role} login nosuperuser nobypassrls nocreatedb nocreaterole password '${password}'`,
      );
    }
    const exists = await admin.query('select 1 from pg_database where datname = $1', [database]);
    if (!exists.rowCount) await admin.query(`create database ${database} owner ${ownerRole}`);
  });
  const url = (user: string, password: string) => {
    const made = new URL(adminUrl);
    made.username = user;
    made.password = password;
    made.pathname = `/${database}`;
    return made.toString();
  };
  const adminOfDatabase = new URL(adminUrl);
  adminOfDatabase.pathname = `/${database}`;
  await asClient(adminOfDatabase.toString(), (admin) =>
    admin.query('create extension if not exists btree_gist'),
  );
  return { ownerUrl: url(ownerRole, passwords.owner), appUrl: url(appRole, passwords.app) };
}

/** Schema of the queue, with its queues, owned by the owner and used by the application's role. */
async function prepareQueue(ownerUrl: string, role: string): Promise<void> {
  const boss = new PgBoss({ connectionString: ownerUrl, schema: 'queue', supervise: false, schedule: false });
  boss.on('error', () => undefined);
  await boss.start();
  for (const name of queueNames) await boss.createQueue(name);
  await boss.stop({ graceful: false });
  await asClient(ownerUrl, async (owner) => {
    await owner.query(`grant usage on schema queue to "${role}"`);
    await owner.query(`grant select, insert, update, delete on all tables in schema queue to "${role}"`);
    await owner.query(`grant execute on all functions in schema queue to "${role}"`);
  });
}

/** Brings the schema up to date under a lock, so that two servers starting at once do not race. */
export async function migrateDatabase({ ownerUrl, appUrl }: DatabaseUrls): Promise<void> {
  const role = decodeURIComponent(new URL(appUrl).username);
  await asClient(ownerUrl, async (owner) => {
    await owner.query('select pg_advisory_lock(7200)');
    await migrate(drizzle({ client: owner }), { migrationsFolder });
    await buildWall(owner, role);
    await prepareQueue(ownerUrl, role);
  });
}
