import { mkdtempSync, mkdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { pino } from 'pino';
import type { TestProject } from 'vitest/node';
import { createDatabase, createPool } from '#server/db/client.ts';
import { migrateDatabase, prepareDatabase } from '#server/db/migrate.ts';
import { loadDemo } from '#server/demo/load-demo.ts';
import { createLocalFileStore } from '#server/files/file-store.ts';
import { createForecastJobs } from '#server/features/forecast/forecast-jobs.ts';
import { createModelPool } from '#server/workers/model-pool.ts';
import { createMailQueue, startQueue } from '#server/mail/mail-queue.ts';
import { demoInstant } from './demo-instant.ts';

const root = fileURLToPath(new URL('../..', import.meta.url));

declare module 'vitest' {
  export interface ProvidedContext {
    adminUrl: string;
    clusterFolder: string;
    filesFolder: string;
  }
}

/** A throw-away cluster with two templates: an empty record, and the demo at a fixed instant. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const { startCluster } = (await import(
    new URL('../../server/start/postgres.mjs', import.meta.url).href
  )) as {
    startCluster: (options: {
      root: string;
      test: boolean;
      folder: string;
    }) => Promise<{ adminUrl: string; stop: () => Promise<void> }>;
  };
  const folder = mkdtempSync(join(process.env['TEST_FOLDER'] ?? tmpdir(), `cluster-${project.name}-`));
  const clusterFolder = join('/var/tmp', `tallyweir-test-${process.pid}-${project.name}`);
  const filesFolder = join(folder, 'files');
  mkdirSync(filesFolder);
  const cluster = await startCluster({ root, test: true, folder: clusterFolder });
  const emptyUrls = await prepareDatabase(cluster.adminUrl, folder, 'empty_record');
  await migrateDatabase(emptyUrls);
  const demoUrls = await prepareDatabase(cluster.adminUrl, folder, 'demo_record');
  await migrateDatabase(demoUrls);
  const log = pino({ level: 'silent' });
  const pool = createPool(demoUrls.appUrl, () => undefined);
  const boss = await startQueue(demoUrls.appUrl, log);
  const models = createModelPool();
  await loadDemo({
    database: createDatabase(pool),
    files: createLocalFileStore(filesFolder),
    mail: createMailQueue(boss),
    log,
    sessionSecret: new Uint8Array(32),
    now: () => demoInstant,
    newId: () => crypto.randomUUID(),
    publicUrl: 'http://127.0.0.1',
    isDemo: true,
    models,
    forecasts: createForecastJobs(models),
  });
  await boss.stop({ graceful: false, close: true });
  await pool.end();
  project.provide('adminUrl', cluster.adminUrl);
  project.provide('clusterFolder', folder);
  project.provide('filesFolder', filesFolder);
  return async () => {
    await cluster.stop();
    rmSync(folder, { recursive: true, force: true });
    rmSync(clusterFolder, { recursive: true, force: true });
  };
}
