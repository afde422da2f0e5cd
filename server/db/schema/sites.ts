import { boolean, integer, jsonb, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import {
  belongsTo,
  day,
  endsAfterStart,
  exact,
  fraction,
  instant,
  monthCheck,
  notNegative,
  owned,
  ownedKey,
  positive,
} from './columns.ts';

export const sites = pgTable(
  'sites',
  {
    ...owned,
    slug: text('slug').notNull(),
    name: text('name').notNull(),
    latitudeDeg: exact('latitude_deg').notNull(),
    elevationM: exact('elevation_m', 2).notNull(),
    displayUnits: text('display_units', { enum: ['metric', 'us'] })
      .notNull()
      .default('metric'),
    paperSize: text('paper_size', { enum: ['A4', 'Letter'] })
      .notNull()
      .default('A4'),
    reportingYearStartMonth: integer('reporting_year_start_month').notNull().default(1),
    openedOn: day('opened_on').notNull(),
    reportDueDays: integer('report_due_days').notNull().default(60),
    measuredIntervalHoursMax: integer('measured_interval_hours_max').notNull().default(36),
    certificationText: text('certification_text'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [ownedKey(t), unique('sites_slug').on(t.organisationId, t.slug)],
);

/** Time zone and day boundary, valid from a date; a later one never rewrites site days already fixed. */
export const siteDayRules = pgTable(
  'site_day_rules',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    validFromOn: day('valid_from_on').notNull(),
    timeZone: text('time_zone').notNull(),
    dayBoundary: text('day_boundary').notNull(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    unique('site_day_rules_from').on(t.organisationId, t.siteId, t.validFromOn),
  ],
);

export const cells = pgTable(
  'cells',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    code: text('code').notNull(),
    name: text('name').notNull(),
    openedOn: day('opened_on').notNull(),
    lastWasteOn: day('last_waste_on'),
    closedOn: day('closed_on'),
    wasteDepthM: exact('waste_depth_m', 2),
    initialWasteDeficitMm: exact('initial_waste_deficit_mm', 3).notNull().default('0'),
    initialWasteStoreMm: exact('initial_waste_store_mm', 3).notNull().default('0'),
    liner: text('liner').notNull().default('composite'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    unique('cells_code').on(t.organisationId, t.siteId, t.code),
    endsAfterStart('cells_closed_after_opened', t.openedOn, t.closedOn),
  ],
);

/** Lined plan area of a cell, valid from a date. */
export const cellAreas = pgTable(
  'cell_areas',
  {
    ...owned,
    cellId: uuid('cell_id').notNull(),
    validFromOn: day('valid_from_on').notNull(),
    linedAreaM2: exact('lined_area_m2', 3).notNull(),
    evidence: text('evidence'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.cellId, () => cells),
    positive('cell_areas_positive', t.linedAreaM2),
  ],
);

export const coverTypes = pgTable(
  'cover_types',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    kind: text('kind').notNull(),
    name: text('name').notNull(),
    availableWaterMm: exact('available_water_mm', 3).notNull(),
    hasSoilStore: boolean('has_soil_store').notNull(),
    membranePassFraction: exact('membrane_pass_fraction'),
    membraneDefects: jsonb('membrane_defects'),
    runoffCoefficientWet: exact('runoff_coefficient_wet').notNull(),
    runoffCoefficientDry: exact('runoff_coefficient_dry').notNull(),
    curveNumber: exact('curve_number', 2),
    runoffDestination: text('runoff_destination', { enum: ['storm-water', 'leachate'] }).notNull(),
    petFactor: exact('pet_factor').notNull().default('1'),
    source: text('source').notNull(),
    confirmedById: uuid('confirmed_by_id'),
    confirmedAt: instant('confirmed_at'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    unique('cover_types_name').on(t.organisationId, t.siteId, t.name),
    notNegative('cover_types_available_water', t.availableWaterMm),
    fraction('cover_types_runoff_wet', t.runoffCoefficientWet),
    fraction('cover_types_runoff_dry', t.runoffCoefficientDry),
    fraction('cover_types_membrane', t.membranePassFraction),
    notNegative('cover_types_pet_factor', t.petFactor),
  ],
);

export const plots = pgTable(
  'plots',
  {
    ...owned,
    cellId: uuid('cell_id').notNull(),
    parentId: uuid('parent_id'),
    name: text('name').notNull(),
    areaM2: exact('area_m2', 3).notNull(),
    fromOn: day('from_on').notNull(),
    toOn: day('to_on'),
    withdrawnAt: instant('withdrawn_at'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.cellId, () => cells),
    positive('plots_area', t.areaM2),
    endsAfterStart('plots_dates', t.fromOn, t.toOn),
  ],
);

/** One cover type at a time on a plot; the exclusion constraint, blind to withdrawn rows, is in the migrations. */
export const coverPeriods = pgTable(
  'cover_periods',
  {
    ...owned,
    plotId: uuid('plot_id').notNull(),
    coverTypeId: uuid('cover_type_id').notNull(),
    fromOn: day('from_on').notNull(),
    toOn: day('to_on'),
    evidence: text('evidence').notNull(),
    initialSoilStoreMm: exact('initial_soil_store_mm', 3),
    withdrawnAt: instant('withdrawn_at'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.plotId, () => plots),
    belongsTo(t.organisationId, t.coverTypeId, () => coverTypes),
    endsAfterStart('cover_periods_dates', t.fromOn, t.toOn),
  ],
);

export const wastePlaced = pgTable(
  'waste_placed',
  {
    ...owned,
    cellId: uuid('cell_id').notNull(),
    month: text('month').notNull(),
    massT: exact('mass_t', 3).notNull(),
    bulkDensityTPerM3: exact('bulk_density_t_per_m3').notNull(),
    moistureFraction: exact('moisture_fraction').notNull(),
    fieldCapacityFraction: exact('field_capacity_fraction').notNull(),
    source: text('source').notNull(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.cellId, () => cells),
    unique('waste_placed_month').on(t.organisationId, t.cellId, t.month),
    monthCheck('waste_placed_month_text', t.month),
    notNegative('waste_placed_mass', t.massT),
    positive('waste_placed_density', t.bulkDensityTPerM3),
    fraction('waste_placed_moisture', t.moistureFraction),
    fraction('waste_placed_field_capacity', t.fieldCapacityFraction),
  ],
);

/** Walking order of the round: what is read, in which order. */
export const roundPoints = pgTable(
  'round_points',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    position: integer('position').notNull(),
    kind: text('kind', { enum: ['meter', 'level', 'rain', 'load-out'] }).notNull(),
    subjectId: uuid('subject_id').notNull(),
    everyDays: integer('every_days').notNull().default(1),
    settings: jsonb('settings'),
  },
  (t) => [ownedKey(t), belongsTo(t.organisationId, t.siteId, () => sites)],
);
