import { integer, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import { belongsTo, day, exact, fact, monthCheck, notNegative, owned, ownedKey } from './columns.ts';
import { sites } from './sites.ts';

export const stations = pgTable(
  'stations',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    name: text('name').notNull(),
    kind: text('kind', { enum: ['site-gauge', 'file'] }).notNull(),
    priority: integer('priority').notNull().default(1),
    source: text('source').notNull(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    unique('stations_name').on(t.organisationId, t.siteId, t.name),
  ],
);

const values = {
  precipitationMm: exact('precipitation_mm', 3),
  tMinC: exact('t_min_c', 3),
  tMaxC: exact('t_max_c', 3),
  tMeanC: exact('t_mean_c', 3),
  petMm: exact('pet_mm', 3),
  panMm: exact('pan_mm', 3),
  windMPerS: exact('wind_m_per_s', 3),
  relativeHumidityPercent: exact('relative_humidity_percent', 3),
  sunshineHours: exact('sunshine_hours', 3),
};

/** One day of a station. A missing value is null; a trace is zero with its kind. */
export const climateDays = pgTable(
  'climate_days',
  {
    ...fact,
    stationId: uuid('station_id').notNull(),
    siteDay: day('site_day').notNull(),
    kind: text('kind', { enum: ['measured', 'trace', 'accumulated', 'snow-water', 'estimated', 'missing'] })
      .notNull()
      .default('measured'),
    accumulatedDays: integer('accumulated_days'),
    typedText: text('typed_text'),
    importId: uuid('import_id'),
    ...values,
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.stationId, () => stations),
    notNegative('climate_days_precipitation', t.precipitationMm),
  ],
);

/** One month of a station whose record is monthly. */
export const climateMonths = pgTable(
  'climate_months',
  {
    ...fact,
    stationId: uuid('station_id').notNull(),
    month: text('month').notNull(),
    importId: uuid('import_id'),
    ...values,
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.stationId, () => stations),
    monthCheck('climate_months_month', t.month),
    notNegative('climate_months_precipitation', t.precipitationMm),
  ],
);

/** What the engineer chose for a month with missing climate: stored, dated, printed. */
export const climateGapChoices = pgTable(
  'climate_gap_choices',
  {
    ...fact,
    siteId: uuid('site_id').notNull(),
    month: text('month').notNull(),
    variable: text('variable', { enum: ['precipitation', 'temperature', 'pet'] }).notNull(),
    choice: text('choice', {
      enum: ['leave-out', 'scale-by-days', 'other-station', 'station-normal'],
    }).notNull(),
    otherStationId: uuid('other_station_id'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    monthCheck('climate_gap_choices_month', t.month),
  ],
);
