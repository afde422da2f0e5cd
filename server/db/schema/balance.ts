import {
  boolean,
  doublePrecision,
  index,
  integer,
  jsonb,
  pgTable,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { belongsTo, day, instant, monthCheck, owned, ownedKey } from './columns.ts';
import { cells, sites } from './sites.ts';

/** Parameters of the model; a set is immutable once a frozen run uses it: editing makes the next version. */
export const parameterSets = pgTable(
  'parameter_sets',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    name: text('name').notNull(),
    version: integer('version').notNull(),
    values: jsonb('values').notNull(),
    createdAt: instant('created_at').notNull().defaultNow(),
    createdById: uuid('created_by_id').notNull(),
    confirmedById: uuid('confirmed_by_id'),
    confirmedAt: instant('confirmed_at'),
    isCurrent: boolean('is_current').notNull().default(false),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    unique('parameter_sets_version').on(t.organisationId, t.siteId, t.name, t.version),
  ],
);

/** The working run follows its inputs; a frozen run keeps its own for ever. */
export const balanceRuns = pgTable(
  'balance_runs',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    kind: text('kind', { enum: ['working', 'frozen'] }).notNull(),
    number: integer('number'),
    parameterSetId: uuid('parameter_set_id').notNull(),
    engineVersion: text('engine_version').notNull(),
    inputSha256: text('input_sha256').notNull(),
    input: text('input'),
    problem: text('problem'),
    warnings: jsonb('warnings').notNull(),
    computedAt: instant('computed_at').notNull().defaultNow(),
    frozenById: uuid('frozen_by_id'),
    acceptedById: uuid('accepted_by_id'),
    acceptedAt: instant('accepted_at'),
    note: text('note'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.parameterSetId, () => parameterSets),
  ],
);

/** Result of one plot and step: every term in mm, with the area that turns it into m³. */
export const balanceSteps = pgTable(
  'balance_steps',
  {
    ...owned,
    runId: uuid('run_id').notNull(),
    cellId: uuid('cell_id').notNull(),
    plotId: uuid('plot_id').notNull(),
    coverTypeId: uuid('cover_type_id').notNull(),
    month: text('month').notNull(),
    fromOn: day('from_on').notNull(),
    dayCount: integer('day_count').notNull(),
    areaM2: doublePrecision('area_m2').notNull(),
    terms: jsonb('terms').notNull(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.runId, () => balanceRuns),
    index('balance_steps_run').on(t.organisationId, t.runId, t.month),
    monthCheck('balance_steps_month', t.month),
  ],
);

/** What the engineer says about a compared month. */
export const compareNotes = pgTable(
  'compare_notes',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    cellId: uuid('cell_id').notNull(),
    month: text('month').notNull(),
    cause: text('cause').notNull(),
    state: text('state', { enum: ['open', 'explained', 'reconciled'] }).notNull(),
    note: text('note').notNull(),
    writtenAt: instant('written_at').notNull().defaultNow(),
    writtenById: uuid('written_by_id').notNull(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.cellId, () => cells),
    monthCheck('compare_notes_month', t.month),
  ],
);
