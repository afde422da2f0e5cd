import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import type { Server } from 'node:http';
import { join } from 'node:path';
import { pino } from 'pino';
import { createApp } from './app.ts';
import { buildClient } from './build-client.ts';
import { createDatabase, createPool } from './db/client.ts';
import { migrateDatabase, prepareDatabase, type DatabaseUrls } from './db/migrate.ts';
import { readEnv, type Env } from './env.ts';
import { installationState, listDemoPeople } from './features/access/access-service.ts';
import { createForecastJobs } from './features/forecast/forecast-jobs.ts';
import { createLocalFileStore } from './files/file-store.ts';
import type { Dependencies } from './http/route.ts';
import { startMailCatcher } from './mail/mail-catcher.ts';
import { createMailQueue, startMailWorker, startQueue } from './mail/mail-queue.ts';
import { startSealing } from './audit/start-sealing.ts';
import { loadDemo } from './demo/load-demo.ts';
import { createModelPool } from './workers/model-pool.ts';

function secretIn(folder: string): Uint8Array {
  const file = join(folder, 'session-secret');
  if (!existsSync(file)) writeFileSync(file, randomBytes(32).toString('base64url'), { mode: 0o600 });
  return new TextEncoder().encode(readFileSync(file, 'utf8'));
}

async function databaseUrls(env: Env): Promise<DatabaseUrls> {
  if (env.DATABASE_URL && env.APP_DATABASE_URL)
    return { ownerUrl: env.DATABASE_URL, appUrl: env.APP_DATABASE_URL };
  if (env.CLUSTER_ADMIN_URL) return prepareDatabase(env.CLUSTER_ADMIN_URL, env.DATA_FOLDER, 'tallyweir');
  throw new Error('No database was named. Start with npm start, or set DATABASE_URL and APP_DATABASE_URL.');
}

function listen(app: ReturnType<typeof createApp>, port: number): Promise<Server> {
  return new Promise((resolve, reject) => {
    // Express calls back on failure too, with the error.
    const server = app.listen(port, '127.0.0.1', (error?: Error) =>
      error ? reject(error) : resolve(server),
    );
  });
}

async function announce(deps: Dependencies, port: number): Promise<void> {
  console.log(`\nTallyweir is at http://127.0.0.1:${port}`);
  const { hasDemo } = await installationState(deps);
  if (!hasDemo) return;
  console.log('Demo sign-ins, no password, chosen on the first page:');
  for (const person of await listDemoPeople(deps))
    console.log(`  ${person.displayName}, ${person.role} (${person.email})`);
}

async function main(): Promise<void> {
  const env = readEnv(process.env);
  mkdirSync(env.DATA_FOLDER, { recursive: true });
  const log = pino({
    level: env.NODE_ENV === 'production' ? 'warn' : 'info',
    redact: ['req.headers.cookie', 'req.headers.authorization'],
  });
  const urls = await databaseUrls(env);
  await migrateDatabase(urls);
  const pool = createPool(urls.appUrl, (error) => log.warn({ err: error }, 'database connection'));
  const boss = await startQueue(urls.appUrl, log);
  const now = () => new Date();
  const catcher = env.SMTP_URL ? undefined : await startMailCatcher(join(env.DATA_FOLDER, 'mail'), now);
  await startMailWorker(boss, env.SMTP_URL ?? catcher!.url, env.MAIL_FROM, log);
  const models = createModelPool();
  const deps: Dependencies = {
    database: createDatabase(pool),
    files: createLocalFileStore(join(env.DATA_FOLDER, 'files')),
    mail: createMailQueue(boss),
    log,
    sessionSecret: secretIn(env.DATA_FOLDER),
    now,
    newId: () => crypto.randomUUID(),
    publicUrl: env.PUBLIC_URL ?? `http://127.0.0.1:${env.PORT}`,
    isDemo: env.LOAD_DEMO ? env.LOAD_DEMO === 'yes' : !env.DATABASE_URL,
    models,
    forecasts: createForecastJobs(models),
    caughtMail: catcher?.list,
  };
  if (deps.isDemo) await loadDemo(deps);
  await buildClient(env);
  const server = await listen(createApp(deps), env.PORT).catch((error: NodeJS.ErrnoException) => {
    throw error.code === 'EADDRINUSE'
      ? new Error(`Port ${env.PORT} is taken by another program. Stop it, or start with PORT=5181 npm start.`)
      : error;
  });
  const sealing = startSealing(deps);
  await announce(deps, env.PORT);

  let stopping = false;
  const stop = async () => {
    if (stopping) return;
    stopping = true;
    server.close();
    server.closeIdleConnections();
    setTimeout(() => server.closeAllConnections(), 5_000).unref();
    await sealing.stop();
    await boss.stop({ graceful: false, close: true }).catch(() => undefined);
    await catcher?.stop();
    await pool.end();
    await models.close();
    process.exit(0);
  };
  process.on('SIGINT', () => void stop());
  process.on('SIGTERM', () => void stop());
}

main().catch((error: Error) => {
  console.error(error.message);
  process.exit(1);
});
