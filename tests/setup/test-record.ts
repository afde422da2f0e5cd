import { randomBytes } from 'node:crypto';
import { join } from 'node:path';
import type { Express } from 'express';
import pg from 'pg';
import { pino } from 'pino';
import request from 'supertest';
import { inject } from 'vitest';
import { createApp } from '#server/app.ts';
import { createDatabase, createPool } from '#server/db/client.ts';
import { prepareDatabase } from '#server/db/migrate.ts';
import { createLocalFileStore } from '#server/files/file-store.ts';
import { createForecastJobs } from '#server/features/forecast/forecast-jobs.ts';
import type { Dependencies } from '#server/http/route.ts';
import { createModelPool } from '#server/workers/model-pool.ts';
import { createMailQueue, startMailWorker, startQueue } from '#server/mail/mail-queue.ts';
import { startMailCatcher } from '#server/mail/mail-catcher.ts';
import type { MeView } from '#shared/schemas/access.ts';
import { demoPeople } from '#server/demo/demo-people.ts';
import type { Role } from '#shared/permissions.ts';
import { demoInstant } from './demo-instant.ts';

export type Agent = ReturnType<typeof request.agent>;

export interface TestRecord {
  app: Express;
  deps: Dependencies;
  appUrl: string;
  /** Superuser of this database, to look behind the wall. */
  admin: pg.Client;
  /** A browser session; nobody is signed in yet. */
  visitor: () => Agent;
  /** Someone of the demo, signed in. */
  as: (role: Role) => Promise<Agent>;
  setNow: (instant: string) => void;
  close: () => Promise<void>;
}

/** A database of its own, copied from a template, behind the real application. */
export async function openTestRecord(
  template: 'empty_record' | 'demo_record',
  options: { withMail?: boolean } = {},
): Promise<TestRecord> {
  const adminUrl = inject('adminUrl');
  const name = `record_${randomBytes(6).toString('hex')}`;
  const maker = new pg.Client({ connectionString: adminUrl });
  await maker.connect();
  await maker.query(`create database ${name} template ${template} owner tallyweir_owner`);
  await maker.end();
  const { appUrl } = await prepareDatabase(adminUrl, inject('clusterFolder'), name);
  const ofDatabase = new URL(adminUrl);
  ofDatabase.pathname = `/${name}`;
  const admin = new pg.Client({ connectionString: ofDatabase.toString() });
  await admin.connect();
  let now = demoInstant;
  const log = pino({ level: 'silent' });
  const pool = createPool(appUrl, () => undefined);
  const boss = await startQueue(appUrl, log);
  const catcher = options.withMail
    ? await startMailCatcher(join(inject('filesFolder'), name), () => now)
    : undefined;
  if (catcher) await startMailWorker(boss, catcher.url, 'Tallyweir <record@tallyweir.invalid>', log);
  const models = createModelPool();
  const deps: Dependencies = {
    database: createDatabase(pool),
    files: createLocalFileStore(inject('filesFolder')),
    mail: createMailQueue(boss),
    log,
    sessionSecret: new Uint8Array(32).fill(7),
    now: () => now,
    newId: () => crypto.randomUUID(),
    publicUrl: 'http://127.0.0.1:5180',
    isDemo: template === 'demo_record',
    models,
    forecasts: createForecastJobs(models),
    caughtMail: catcher?.list,
  };
  const app = createApp(deps);
  return {
    app,
    deps,
    appUrl,
    admin,
    visitor: () => request.agent(app),
    as: async (role) => {
      const agent = request.agent(app);
      const person = demoPeople.find((one) => one.key === role)!;
      await agent.post('/api/v1/demo-sign-in').send({ email: person.email }).expect(201);
      return agent;
    },
    setNow: (instant) => {
      now = new Date(instant);
    },
    close: async () => {
      await boss.stop({ graceful: false, close: true }).catch(() => undefined);
      await catcher?.stop();
      await models.close();
      await pool.end();
      await admin.end();
    },
  };
}

/** The one site a person sees. */
export async function siteIdOf(agent: Agent): Promise<string> {
  const me = (await agent.get('/api/v1/me').expect(200)).body as MeView;
  return me.sites[0]!.id;
}

/** A write with a key of its own, as the browser sends it. */
export const write = (agent: Agent, path: string, body: object, key: string = crypto.randomUUID()) =>
  agent.post(`/api/v1${path}`).set('Idempotency-Key', key).send(body);
