import { mkdirSync } from 'node:fs';
import type { Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { join } from 'node:path';
import pg from 'pg';
import { pino } from 'pino';
import { createApp } from '#server/app.ts';
import { createDatabase, createPool } from '#server/db/client.ts';
import { migrateDatabase, prepareDatabase } from '#server/db/migrate.ts';
import { demoPeople } from '#server/demo/demo-people.ts';
import { loadDemo } from '#server/demo/load-demo.ts';
import { createLocalFileStore } from '#server/files/file-store.ts';
import type { Dependencies } from '#server/http/route.ts';
import { createForecastJobs } from '#server/features/forecast/forecast-jobs.ts';
import { createModelPool } from '#server/workers/model-pool.ts';
import { createMailQueue, startQueue } from '#server/mail/mail-queue.ts';
import type { Role } from '#shared/permissions.ts';
import { demoInstant } from '../setup/demo-instant.ts';

export interface World {
  base: string;
  deps: Dependencies;
  owner: pg.Pool;
  siteId: string;
  cookieOf: (role: Role) => Promise<string>;
  close: () => Promise<void>;
}

/** The demo, served on a port of its own from a database with a record's settings. */
export async function openWorld(): Promise<World> {
  const folder = process.env['BENCH_FOLDER']!;
  const urls = await prepareDatabase(process.env['CLUSTER_ADMIN_URL']!, folder, 'bench');
  await migrateDatabase(urls);
  const files = join(folder, 'files');
  mkdirSync(files);
  const log = pino({ level: 'silent' });
  const pool = createPool(urls.appUrl, () => undefined);
  const boss = await startQueue(urls.appUrl, log);
  const models = createModelPool();
  const deps: Dependencies = {
    database: createDatabase(pool),
    files: createLocalFileStore(files),
    mail: createMailQueue(boss),
    log,
    sessionSecret: new Uint8Array(32).fill(3),
    now: () => demoInstant,
    newId: () => crypto.randomUUID(),
    publicUrl: 'http://127.0.0.1',
    isDemo: true,
    models,
    forecasts: createForecastJobs(models),
  };
  await loadDemo(deps);
  const server: Server = createApp(deps).listen(0, '127.0.0.1');
  await new Promise((resolve) => server.once('listening', resolve));
  const base = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const adminOfDatabase = new URL(process.env['CLUSTER_ADMIN_URL']!);
  adminOfDatabase.pathname = '/bench';
  const owner = new pg.Pool({ connectionString: adminOfDatabase.toString(), max: 10 });
  const cookieOf = async (role: Role) => {
    const answer = await fetch(`${base}/api/v1/demo-sign-in`, {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify({ email: demoPeople.find((one) => one.key === role)!.email }),
    });
    return answer.headers.get('set-cookie')!.split(';')[0]!;
  };
  const siteId = (await owner.query<{ id: string }>('select id from sites')).rows[0]!.id;
  return {
    base,
    deps,
    owner,
    siteId,
    cookieOf,
    close: async () => {
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
      await boss.stop({ graceful: false, close: true });
      await pool.end();
      await models.close();
      await owner.end();
    },
  };
}
