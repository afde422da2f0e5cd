import { boolean, index, integer, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import {
  belongsTo,
  day,
  endsAfterStart,
  instant,
  monthCheck,
  notNegative,
  owned,
  ownedKey,
} from './columns.ts';
import { analytes, samplePoints } from './lab.ts';
import { places } from './metering.ts';
import { sites } from './sites.ts';

export const permits = pgTable(
  'permits',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    number: text('number').notNull(),
    authority: text('authority').notNull(),
    regime: text('regime', { enum: ['direct', 'sewer', 'other'] }).notNull(),
    fromOn: day('from_on').notNull(),
    toOn: day('to_on'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    endsAfterStart('permits_dates', t.fromOn, t.toOn),
  ],
);

export const limits = pgTable(
  'limits',
  {
    ...owned,
    permitId: uuid('permit_id').notNull(),
    samplePointId: uuid('sample_point_id').notNull(),
    analyteId: uuid('analyte_id').notNull(),
    fraction: text('fraction').notNull().default(''),
    flowPlaceId: uuid('flow_place_id'),
    statistic: text('statistic', {
      enum: ['daily-maximum', 'daily-minimum', 'monthly-average', 'range'],
    }).notNull(),
    quantity: text('quantity', { enum: ['concentration', 'load'] }).notNull(),
    /** Text, so that the permit's own digits stay: 0.20 is not 0.2. */
    valueText: text('value_text'),
    lowText: text('low_text'),
    highText: text('high_text'),
    unit: text('unit').notNull(),
    isInclusive: boolean('is_inclusive').notNull().default(true),
    samplesMin: integer('samples_min').notNull().default(1),
    belowDetectionRule: text('below_detection_rule', { enum: ['zero', 'half', 'full', 'carried'] })
      .notNull()
      .default('half'),
    roundingMode: text('rounding_mode', { enum: ['half-up', 'half-even'] })
      .notNull()
      .default('half-up'),
    decimals: integer('decimals').notNull(),
    citation: text('citation').notNull(),
    noticeHours: integer('notice_hours'),
    writtenNoticeDays: integer('written_notice_days'),
    resampleDays: integer('resample_days'),
    fromOn: day('from_on').notNull(),
    toOn: day('to_on'),
    confirmedById: uuid('confirmed_by_id'),
    confirmedAt: instant('confirmed_at'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.permitId, () => permits),
    belongsTo(t.organisationId, t.samplePointId, () => samplePoints),
    belongsTo(t.organisationId, t.analyteId, () => analytes),
    belongsTo(t.organisationId, t.flowPlaceId, () => places),
    notNegative('limits_decimals', t.decimals),
    endsAfterStart('limits_dates', t.fromOn, t.toOn),
  ],
);

/** The verdict of a limit for a month as it stood when something was signed or opened because of it. */
export const verdicts = pgTable(
  'verdicts',
  {
    ...owned,
    limitId: uuid('limit_id').notNull(),
    month: text('month').notNull(),
    word: text('word').notNull(),
    working: jsonb('working').notNull(),
    computedAt: instant('computed_at').notNull().defaultNow(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.limitId, () => limits),
    monthCheck('verdicts_month', t.month),
  ],
);

export const exceedances = pgTable(
  'exceedances',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    limitId: uuid('limit_id').notNull(),
    periodKey: text('period_key').notNull(),
    month: text('month').notNull(),
    sentence: text('sentence').notNull(),
    seenAt: instant('seen_at').notNull(),
    seenById: uuid('seen_by_id').notNull(),
    closedAt: instant('closed_at'),
    closedById: uuid('closed_by_id'),
    cause: text('cause'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.limitId, () => limits),
    index('exceedances_site').on(t.organisationId, t.siteId, t.month),
    monthCheck('exceedances_month', t.month),
  ],
);

export const exceedanceClocks = pgTable(
  'exceedance_clocks',
  {
    ...owned,
    exceedanceId: uuid('exceedance_id').notNull(),
    step: text('step').notNull(),
    dueAt: instant('due_at').notNull(),
    citation: text('citation').notNull(),
    doneAt: instant('done_at'),
    doneById: uuid('done_by_id'),
    doneNote: text('done_note'),
  },
  (t) => [ownedKey(t), belongsTo(t.organisationId, t.exceedanceId, () => exceedances)],
);

export const exceedanceNotes = pgTable(
  'exceedance_notes',
  {
    ...owned,
    exceedanceId: uuid('exceedance_id').notNull(),
    note: text('note').notNull(),
    writtenAt: instant('written_at').notNull().defaultNow(),
    writtenById: uuid('written_by_id').notNull(),
  },
  (t) => [ownedKey(t), belongsTo(t.organisationId, t.exceedanceId, () => exceedances)],
);
