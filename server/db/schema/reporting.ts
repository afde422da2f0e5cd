import {
  bigserial,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { belongsTo, day, fact, instant, monthCheck, owned, ownedKey } from './columns.ts';
import { sites } from './sites.ts';

/** A month closed by an engineer or reopened by a manager; the newest row says which. */
export const monthClosings = pgTable(
  'month_closings',
  {
    ...fact,
    siteId: uuid('site_id').notNull(),
    month: text('month').notNull(),
    act: text('act', { enum: ['close', 'reopen'] }).notNull(),
    runId: uuid('run_id'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    monthCheck('month_closings_month', t.month),
  ],
);

export const reports = pgTable(
  'reports',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    quarter: text('quarter').notNull(),
    issue: integer('issue').notNull(),
    fileName: text('file_name').notNull(),
    fileSha256: text('file_sha256').notNull(),
    snapshotSha256: text('snapshot_sha256').notNull(),
    snapshot: jsonb('snapshot').notNull(),
    changes: jsonb('changes').notNull(),
    signedById: uuid('signed_by_id').notNull(),
    signedAt: instant('signed_at').notNull(),
    certification: text('certification').notNull(),
    trailHash: text('trail_hash'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    unique('reports_issue').on(t.organisationId, t.siteId, t.quarter, t.issue),
  ],
);

export const tasks = pgTable(
  'tasks',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    kind: text('kind').notNull(),
    role: text('role').notNull(),
    sentence: text('sentence').notNull(),
    dueOn: day('due_on'),
    subjectId: uuid('subject_id'),
    createdAt: instant('created_at').notNull().defaultNow(),
    doneAt: instant('done_at'),
    doneById: uuid('done_by_id'),
  },
  (t) => [ownedKey(t), belongsTo(t.organisationId, t.siteId, () => sites)],
);

/** Who changed what, when and why. */
export const trailEntries = pgTable(
  'trail_entries',
  {
    ...owned,
    sequence: bigserial('sequence', { mode: 'number' }).notNull(),
    siteId: uuid('site_id'),
    at: instant('at').notNull().defaultNow(),
    personId: uuid('person_id').notNull(),
    action: text('action').notNull(),
    subjectType: text('subject_type').notNull(),
    subjectId: uuid('subject_id').notNull(),
    sentence: text('sentence').notNull(),
    reason: text('reason'),
    before: jsonb('before'),
    after: jsonb('after'),
  },
  (t) => [ownedKey(t), index('trail_entries_sequence').on(t.organisationId, t.sequence)],
);

/** A batch of the trail, chained to the one before by its hash. */
export const trailSeals = pgTable(
  'trail_seals',
  {
    organisationId: uuid('organisation_id').notNull(),
    number: integer('number').notNull(),
    firstSequence: integer('first_sequence').notNull(),
    lastSequence: integer('last_sequence').notNull(),
    rowCount: integer('row_count').notNull(),
    previousHash: text('previous_hash').notNull(),
    hash: text('hash').notNull(),
    sealedAt: instant('sealed_at').notNull().defaultNow(),
  },
  (t) => [primaryKey({ columns: [t.organisationId, t.number] })],
);

/** The first answer to a write, given again when the same write comes again. */
export const idempotencyKeys = pgTable(
  'idempotency_keys',
  {
    organisationId: uuid('organisation_id').notNull(),
    key: text('key').notNull(),
    personId: uuid('person_id').notNull(),
    route: text('route').notNull(),
    payloadSha256: text('payload_sha256').notNull(),
    status: integer('status').notNull(),
    response: jsonb('response'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [primaryKey({ columns: [t.organisationId, t.key] })],
);
