import type { Request } from 'express';
import type { Logger } from 'pino';
import type * as z from 'zod';
import type { Permission, Role } from '#shared/permissions.ts';
import type { Database } from '../db/client.ts';
import type { Transaction } from '../db/transaction.ts';
import type { FileStore } from '../files/file-store.ts';
import type { ForecastJobs } from '../features/forecast/forecast-jobs.ts';
import type { MailQueue } from '../mail/mail-queue.ts';
import type { ModelPool } from '../workers/model-pool.ts';

/** What the application is made of; the parts that touch the outside are handed in. */
export interface Dependencies {
  database: Database;
  files: FileStore;
  mail: MailQueue;
  log: Logger;
  sessionSecret: Uint8Array;
  now: () => Date;
  newId: () => string;
  publicUrl: string;
  isDemo: boolean;
  models: ModelPool;
  forecasts: ForecastJobs;
  caughtMail?: (() => Promise<unknown[]>) | undefined;
}

/** Who asks, where, and with which roles at that place. */
export interface Context {
  organisationId: string;
  personId: string;
  sessionId: string;
  siteId: string | null;
  roles: Role[];
  /** Laboratory of a person who is here only for a laboratory; their uploads and results are all they see. */
  laboratoryId: string | null;
  requestId: string;
}

export interface UploadedFile {
  name: string;
  bytes: Buffer;
}

export interface Call<Params, Query, Body> {
  tx: Transaction;
  context: Context;
  params: Params;
  query: Query;
  body: Body;
  file: UploadedFile | undefined;
  deps: Dependencies;
  request: Request;
}

/** An answer that is a file. */
export class FileAnswer {
  constructor(
    readonly bytes: Buffer,
    readonly fileName: string,
    readonly contentType: string,
  ) {}
}

export interface Route {
  method: 'get' | 'post' | 'put';
  path: string;
  permission: Permission | 'signed-in';
  params?: z.ZodType | undefined;
  query?: z.ZodType | undefined;
  body?: z.ZodType | undefined;
  takesFile?: boolean | undefined;
  handle: (call: Call<never, never, never>) => Promise<unknown>;
}

type Parsed<T> = T extends z.ZodType<infer Output> ? Output : undefined;

/** Declares one route: what it needs, what it checks, and the service call it makes. */
export function route<
  P extends z.ZodType | undefined,
  Q extends z.ZodType | undefined,
  B extends z.ZodType | undefined,
>(definition: {
  method: Route['method'];
  path: string;
  permission: Route['permission'];
  params?: P;
  query?: Q;
  body?: B;
  takesFile?: boolean;
  handle: (call: Call<Parsed<P>, Parsed<Q>, Parsed<B>>) => Promise<unknown>;
}): Route {
  return definition as unknown as Route;
}
