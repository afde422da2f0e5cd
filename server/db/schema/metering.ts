import { boolean, integer, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import {
  belongsTo,
  day,
  endsAfterStart,
  exact,
  fraction,
  instant,
  fact,
  notNegative,
  owned,
  ownedKey,
  positive,
} from './columns.ts';
import { cells, sites } from './sites.ts';

/** Where water is or goes: the ends of every ledger entry. */
export const places = pgTable(
  'places',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    kind: text('kind', {
      enum: [
        'sump',
        'header',
        'store',
        'treatment',
        'outfall',
        'sewer',
        'haulage',
        'cell',
        'rain',
        'air',
        'truck',
      ],
    }).notNull(),
    name: text('name').notNull(),
    cellId: uuid('cell_id'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.cellId, () => cells),
    unique('places_name').on(t.organisationId, t.siteId, t.name),
  ],
);

export const sumps = pgTable(
  'sumps',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    placeId: uuid('place_id').notNull(),
    cellId: uuid('cell_id').notNull(),
    code: text('code').notNull(),
    kind: text('kind', { enum: ['primary', 'leak-detection'] }).notNull(),
    areaServedM2: exact('area_served_m2', 3).notNull(),
    linerLowPointAboveFloorM: exact('liner_low_point_above_floor_m', 3).notNull().default('0'),
    sensorAboveFloorM: exact('sensor_above_floor_m', 3).notNull().default('0'),
    headLimitM: exact('head_limit_m', 3),
    actionRateLPerHaDay: exact('action_rate_l_per_ha_day', 3),
    sumpAreaM2: exact('sump_area_m2', 3),
    stonePorosityFraction: exact('stone_porosity_fraction'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.placeId, () => places),
    belongsTo(t.organisationId, t.cellId, () => cells),
    unique('sumps_code').on(t.organisationId, t.siteId, t.code),
    positive('sumps_area_served', t.areaServedM2),
    fraction('sumps_porosity', t.stonePorosityFraction),
  ],
);

export const pumps = pgTable(
  'pumps',
  {
    ...owned,
    sumpId: uuid('sump_id').notNull(),
    name: text('name').notNull(),
    designRateLPerS: exact('design_rate_l_per_s', 3),
  },
  (t) => [ownedKey(t), belongsTo(t.organisationId, t.sumpId, () => sumps)],
);

/** Draw-down test of a pump: the rate that an hours-based estimate uses. */
export const pumpTests = pgTable(
  'pump_tests',
  {
    ...fact,
    pumpId: uuid('pump_id').notNull(),
    testedOn: day('tested_on').notNull(),
    rateLPerS: exact('rate_l_per_s', 3).notNull(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.pumpId, () => pumps),
    positive('pump_tests_rate', t.rateLPerS),
  ],
);

/** A volume register. What it shows is multiplied and converted; the register itself is never rewritten. */
export const meters = pgTable(
  'meters',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    code: text('code').notNull(),
    name: text('name').notNull(),
    fromPlaceId: uuid('from_place_id').notNull(),
    toPlaceId: uuid('to_place_id').notNull(),
    sumpId: uuid('sump_id'),
    digits: integer('digits').notNull(),
    decimals: integer('decimals').notNull().default(0),
    unit: text('unit').notNull(),
    multiplier: exact('multiplier').notNull().default('1'),
    rateM3PerDayMax: exact('rate_m3_per_day_max', 3).notNull(),
    accuracyFraction: exact('accuracy_fraction').notNull().default('0.02'),
    installedOn: day('installed_on').notNull(),
    isActive: boolean('is_active').notNull().default(true),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.fromPlaceId, () => places),
    belongsTo(t.organisationId, t.toPlaceId, () => places),
    belongsTo(t.organisationId, t.sumpId, () => sumps),
    unique('meters_code').on(t.organisationId, t.siteId, t.code),
    positive('meters_digits', t.digits),
    positive('meters_multiplier', t.multiplier),
    positive('meters_rate', t.rateM3PerDayMax),
  ],
);

export const meterEvents = pgTable(
  'meter_events',
  {
    ...fact,
    meterId: uuid('meter_id').notNull(),
    kind: text('kind', {
      enum: [
        'install',
        'remove',
        'replace',
        'rollover',
        'reset',
        'power-loss',
        'recalibrate',
        'multiplier-changed',
        'bypassed',
        'suspect',
      ],
    }).notNull(),
    observedAt: instant('observed_at').notNull(),
    siteDay: day('site_day').notNull(),
    registerBefore: text('register_before'),
    registerAfter: text('register_after'),
    digitsAfter: integer('digits_after'),
    unitAfter: text('unit_after'),
    multiplierAfter: exact('multiplier_after'),
    asFoundErrorFraction: exact('as_found_error_fraction'),
    note: text('note'),
  },
  (t) => [ownedKey(t), belongsTo(t.organisationId, t.meterId, () => meters)],
);

export const stores = pgTable(
  'stores',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    placeId: uuid('place_id').notNull(),
    code: text('code').notNull(),
    isCovered: boolean('is_covered').notNull(),
    linedAreaM2: exact('lined_area_m2', 3).notNull().default('0'),
    crestLevelM: exact('crest_level_m', 3).notNull(),
    operatingLevelM: exact('operating_level_m', 3).notNull(),
    levelResolutionM: exact('level_resolution_m', 4).notNull().default('0.01'),
    evaporationFactor: exact('evaporation_factor').notNull().default('1'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.placeId, () => places),
    unique('stores_code').on(t.organisationId, t.siteId, t.code),
    notNegative('stores_lined_area', t.linedAreaM2),
    positive('stores_crest', t.crestLevelM),
  ],
);

/** Strapping table of a store: volume and water surface by level. */
export const storeLevels = pgTable(
  'store_levels',
  {
    ...owned,
    storeId: uuid('store_id').notNull(),
    levelM: exact('level_m', 3).notNull(),
    volumeM3: exact('volume_m3', 3).notNull(),
    surfaceM2: exact('surface_m2', 3).notNull(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.storeId, () => stores),
    unique('store_levels_level').on(t.organisationId, t.storeId, t.levelM),
    notNegative('store_levels_volume', t.volumeM3),
    notNegative('store_levels_surface', t.surfaceM2),
  ],
);

/** Share of a header's volume that belongs to a cell; null share means in proportion to prediction. */
export const headerShares = pgTable(
  'header_shares',
  {
    ...owned,
    placeId: uuid('place_id').notNull(),
    cellId: uuid('cell_id').notNull(),
    shareFraction: exact('share_fraction'),
    fromOn: day('from_on').notNull(),
    toOn: day('to_on'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.placeId, () => places),
    belongsTo(t.organisationId, t.cellId, () => cells),
    fraction('header_shares_fraction', t.shareFraction),
    endsAfterStart('header_shares_dates', t.fromOn, t.toOn),
  ],
);
