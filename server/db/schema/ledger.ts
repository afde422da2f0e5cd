import { index, jsonb, pgTable, smallint, text, uuid } from 'drizzle-orm/pg-core';
import {
  belongsTo,
  day,
  exact,
  fact,
  instant,
  monthCheck,
  notNegative,
  owned,
  ownedKey,
  volumeM3,
} from './columns.ts';
import { meters, places, stores, sumps } from './metering.ts';
import { cells, sites } from './sites.ts';

/** When something was seen: the instant, the offset on the clock that day, and the site day fixed at entry. */
const observed = {
  observedAt: instant('observed_at').notNull(),
  observedOffsetMinutes: smallint('observed_offset_minutes').notNull(),
  siteDay: day('site_day').notNull(),
  source: text('source', { enum: ['typed', 'historian', 'import'] })
    .notNull()
    .default('typed'),
  deviceId: text('device_id'),
};

/** A register as it was seen. */
export const readings = pgTable(
  'readings',
  {
    ...fact,
    meterId: uuid('meter_id').notNull(),
    ...observed,
    typedText: text('typed_text').notNull(),
    registerValue: exact('register_value', 3).notNull(),
    /** What the reader said about an unlikely value: nothing, a confirmed rollover, or held until answered. */
    answer: text('answer', { enum: ['none', 'rollover', 'confirmed', 'held'] })
      .notNull()
      .default('none'),
    note: text('note'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.meterId, () => meters),
    index('readings_meter_time').on(t.organisationId, t.meterId, t.observedAt),
    notNegative('readings_register', t.registerValue),
  ],
);

/** A level as the gauge or sensor shows it: level is not head. */
export const levels = pgTable(
  'levels',
  {
    ...fact,
    storeId: uuid('store_id'),
    sumpId: uuid('sump_id'),
    ...observed,
    typedText: text('typed_text').notNull(),
    levelM: exact('level_m', 3).notNull(),
    note: text('note'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.storeId, () => stores),
    belongsTo(t.organisationId, t.sumpId, () => sumps),
    index('levels_day').on(t.organisationId, t.siteDay),
  ],
);

/** "Not read" with its reason: not a zero, not a blank. */
export const notRead = pgTable(
  'not_read',
  {
    ...fact,
    siteId: uuid('site_id').notNull(),
    roundPointId: uuid('round_point_id').notNull(),
    siteDay: day('site_day').notNull(),
    reasonCode: text('reason_code').notNull(),
    note: text('note'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    index('not_read_day').on(t.organisationId, t.siteId, t.siteDay),
  ],
);

export const roundNotes = pgTable(
  'round_notes',
  {
    ...fact,
    siteId: uuid('site_id').notNull(),
    siteDay: day('site_day').notNull(),
    note: text('note').notNull(),
  },
  (t) => [ownedKey(t), belongsTo(t.organisationId, t.siteId, () => sites)],
);

/** A layer over raw readings: an estimate for a span, a calibration, a span under suspicion. */
export const adjustments = pgTable(
  'adjustments',
  {
    ...fact,
    meterId: uuid('meter_id').notNull(),
    kind: text('kind', { enum: ['estimate', 'calibration', 'suspect'] }).notNull(),
    fromAt: instant('from_at').notNull(),
    toAt: instant('to_at').notNull(),
    volumeM3: volumeM3('volume_m3'),
    /** What the raw volume is divided by: 1 + the as-found error. */
    divisor: exact('divisor', 9),
    method: text('method', {
      enum: [
        'second-meter',
        'hours-times-rate',
        'tank-balance',
        'neighbour-days',
        'judgement',
        'as-found-error',
      ],
    }),
    inputs: jsonb('inputs'),
    acceptedById: uuid('accepted_by_id'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.meterId, () => meters),
    notNegative('adjustments_volume', t.volumeM3),
  ],
);

/** Which of two live readings of one instant counts. */
export const disputes = pgTable(
  'disputes',
  {
    ...fact,
    meterId: uuid('meter_id').notNull(),
    observedAt: instant('observed_at').notNull(),
    chosenReadingId: uuid('chosen_reading_id').notNull(),
  },
  (t) => [ownedKey(t), belongsTo(t.organisationId, t.meterId, () => meters)],
);

/** One movement of water from place to place on a site day. Never changed: reversed and replaced. */
export const entries = pgTable(
  'entries',
  {
    ...fact,
    siteId: uuid('site_id').notNull(),
    siteDay: day('site_day').notNull(),
    fromPlaceId: uuid('from_place_id').notNull(),
    toPlaceId: uuid('to_place_id').notNull(),
    volumeM3: volumeM3('volume_m3').notNull(),
    basis: text('basis', { enum: ['measured', 'apportioned', 'estimated', 'calculated'] }).notNull(),
    meterId: uuid('meter_id'),
    loadOutId: uuid('load_out_id'),
    returnId: uuid('return_id'),
    factIds: jsonb('fact_ids').notNull(),
    reversesId: uuid('reverses_id'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.fromPlaceId, () => places),
    belongsTo(t.organisationId, t.toPlaceId, () => places),
    belongsTo(t.organisationId, t.meterId, () => meters),
    index('entries_site_day').on(t.organisationId, t.siteId, t.siteDay),
    index('entries_meter_day').on(t.organisationId, t.meterId, t.siteDay),
  ],
);

/** A change that arrived for a closed month: kept, and posted when a manager reopens the month. */
export const pendingChanges = pgTable(
  'pending_changes',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    month: text('month').notNull(),
    meterId: uuid('meter_id'),
    factId: uuid('fact_id').notNull(),
    sentence: text('sentence').notNull(),
    recordedAt: instant('recorded_at').notNull().defaultNow(),
    postedAt: instant('posted_at'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    monthCheck('pending_changes_month', t.month),
  ],
);

export const loadsOut = pgTable(
  'loads_out',
  {
    ...fact,
    siteId: uuid('site_id').notNull(),
    ticket: text('ticket').notNull(),
    hauler: text('hauler').notNull(),
    truck: text('truck'),
    fromPlaceId: uuid('from_place_id').notNull(),
    toPlaceId: uuid('to_place_id').notNull(),
    ...observed,
    nominalVolumeM3: volumeM3('nominal_volume_m3'),
    grossMassKg: exact('gross_mass_kg', 1),
    tareMassKg: exact('tare_mass_kg', 1),
    densityKgPerM3: exact('density_kg_per_m3', 2),
    receivedVolumeM3: volumeM3('received_volume_m3'),
    officialVolume: text('official_volume', { enum: ['nominal', 'weighed', 'received'] })
      .notNull()
      .default('nominal'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.fromPlaceId, () => places),
    belongsTo(t.organisationId, t.toPlaceId, () => places),
    notNegative('loads_out_nominal', t.nominalVolumeM3),
  ],
);

/** Liquid put back into a cell. */
export const returns = pgTable(
  'returns',
  {
    ...fact,
    siteId: uuid('site_id').notNull(),
    fromPlaceId: uuid('from_place_id').notNull(),
    cellId: uuid('cell_id').notNull(),
    method: text('method', { enum: ['surface', 'trench', 'well', 'tanker-at-face'] }).notNull(),
    volumeM3: volumeM3('volume_m3').notNull(),
    plotIds: jsonb('plot_ids').notNull(),
    ...observed,
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.cellId, () => cells),
    notNegative('returns_volume', t.volumeM3),
  ],
);

/** Gas condensate or wash-down that reaches a sump, or condensate led to the drainage layer above it. */
export const condensate = pgTable(
  'condensate',
  {
    ...fact,
    sumpId: uuid('sump_id').notNull(),
    month: text('month').notNull(),
    volumeM3: volumeM3('volume_m3').notNull(),
    kind: text('kind', { enum: ['condensate', 'wash-down', 'condensate-to-layer'] }).notNull(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.sumpId, () => sumps),
    monthCheck('condensate_month', t.month),
    notNegative('condensate_volume', t.volumeM3),
  ],
);
