import { qualifierMeanings } from '#shared/lab/qualifier-meanings.ts';
import { boolean, integer, jsonb, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import { belongsTo, day, exact, fact, instant, owned, ownedKey } from './columns.ts';
import { places } from './metering.ts';
import { sites } from './sites.ts';

export const samplePoints = pgTable(
  'sample_points',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    placeId: uuid('place_id'),
    code: text('code').notNull(),
    name: text('name').notNull(),
    kind: text('kind', {
      enum: ['raw-leachate', 'leak-detection', 'influent', 'effluent', 'storm-water', 'groundwater'],
    }).notNull(),
    aliases: jsonb('aliases').$type<string[]>().notNull(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.placeId, () => places),
    unique('sample_points_code').on(t.organisationId, t.siteId, t.code),
  ],
);

export const analytes = pgTable(
  'analytes',
  {
    ...owned,
    code: text('code').notNull(),
    name: text('name').notNull(),
    cas: text('cas'),
    basis: text('basis'),
    defaultFraction: text('default_fraction'),
    standardUnit: text('standard_unit').notNull(),
    aliases: jsonb('aliases').$type<string[]>().notNull(),
  },
  (t) => [ownedKey(t), unique('analytes_code').on(t.organisationId, t.code)],
);

export const laboratories = pgTable(
  'laboratories',
  {
    ...owned,
    name: text('name').notNull(),
    limitCited: text('limit_cited', { enum: ['reporting', 'detection'] })
      .notNull()
      .default('reporting'),
  },
  (t) => [ownedKey(t), unique('laboratories_name').on(t.organisationId, t.name)],
);

/** What a laboratory's own letters mean. */
export const labQualifiers = pgTable(
  'lab_qualifiers',
  {
    ...owned,
    laboratoryId: uuid('laboratory_id').notNull(),
    letter: text('letter').notNull(),
    meaning: text('meaning', {
      enum: qualifierMeanings,
    }).notNull(),
    wording: text('wording'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.laboratoryId, () => laboratories),
    unique('lab_qualifiers_letter').on(t.organisationId, t.laboratoryId, t.letter),
  ],
);

/** Answers remembered per laboratory: names it uses for points and analytes, units it leaves out. */
export const labMappings = pgTable(
  'lab_mappings',
  {
    ...owned,
    laboratoryId: uuid('laboratory_id').notNull(),
    kind: text('kind', { enum: ['sample-point', 'analyte', 'unit', 'gallon', 'layout'] }).notNull(),
    fromText: text('from_text').notNull(),
    toValue: text('to_value').notNull(),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.laboratoryId, () => laboratories),
    unique('lab_mappings_text').on(t.organisationId, t.laboratoryId, t.kind, t.fromText),
  ],
);

export const samplingPlanItems = pgTable(
  'sampling_plan_items',
  {
    ...owned,
    samplePointId: uuid('sample_point_id').notNull(),
    analyteId: uuid('analyte_id').notNull(),
    fraction: text('fraction').notNull().default(''),
    samplesPerMonth: integer('samples_per_month').notNull(),
    turnaroundDays: integer('turnaround_days').notNull().default(21),
    fromOn: day('from_on').notNull(),
    toOn: day('to_on'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.samplePointId, () => samplePoints),
    belongsTo(t.organisationId, t.analyteId, () => analytes),
  ],
);

/** An uploaded sheet: kept byte for byte, staged, confirmed or undone. */
export const imports = pgTable(
  'imports',
  {
    ...owned,
    siteId: uuid('site_id').notNull(),
    kind: text('kind', { enum: ['lab', 'climate'] }).notNull(),
    laboratoryId: uuid('laboratory_id'),
    stationId: uuid('station_id'),
    fileName: text('file_name').notNull(),
    fileSha256: text('file_sha256').notNull(),
    byteCount: integer('byte_count').notNull(),
    jobNumber: text('job_number'),
    reading: jsonb('reading').notNull(),
    counts: jsonb('counts').notNull(),
    uploadedById: uuid('uploaded_by_id').notNull(),
    uploadedAt: instant('uploaded_at').notNull().defaultNow(),
    confirmedById: uuid('confirmed_by_id'),
    confirmedAt: instant('confirmed_at'),
    undoneById: uuid('undone_by_id'),
    undoneAt: instant('undone_at'),
  },
  (t) => [ownedKey(t), belongsTo(t.organisationId, t.siteId, () => sites)],
);

/** Rows waiting for confirmation; free to change until then. */
export const importRows = pgTable(
  'import_rows',
  {
    ...owned,
    importId: uuid('import_id').notNull(),
    position: integer('position').notNull(),
    sheet: text('sheet').notNull(),
    rowNumber: integer('row_number').notNull(),
    state: text('state', { enum: ['ok', 'warned', 'held', 'skipped'] }).notNull(),
    payload: jsonb('payload').notNull(),
  },
  (t) => [ownedKey(t), belongsTo(t.organisationId, t.importId, () => imports)],
);

export const results = pgTable(
  'results',
  {
    ...fact,
    siteId: uuid('site_id').notNull(),
    samplePointId: uuid('sample_point_id').notNull(),
    analyteId: uuid('analyte_id').notNull(),
    fraction: text('fraction').notNull().default(''),
    laboratoryId: uuid('laboratory_id').notNull(),
    importId: uuid('import_id'),
    sheet: text('sheet'),
    cell: text('cell'),
    sampledAt: instant('sampled_at'),
    sampledOn: day('sampled_on').notNull(),
    siteDay: day('site_day').notNull(),
    rawText: text('raw_text').notNull(),
    rawUnit: text('raw_unit'),
    comparator: text('comparator', { enum: ['=', '<', '>', '~'] }).notNull(),
    value: exact('value', 9),
    unit: text('unit').notNull(),
    reportingLimit: exact('reporting_limit', 9),
    detectionLimit: exact('detection_limit', 9),
    dilutionFactor: exact('dilution_factor', 3),
    qualifier: text('qualifier'),
    qualifierMeaning: text('qualifier_meaning'),
    missingReason: text('missing_reason'),
    isCounted: boolean('is_counted').notNull().default(true),
    notCountedReason: text('not_counted_reason'),
    printedDecimals: integer('printed_decimals'),
  },
  (t) => [
    ownedKey(t),
    belongsTo(t.organisationId, t.siteId, () => sites),
    belongsTo(t.organisationId, t.samplePointId, () => samplePoints),
    belongsTo(t.organisationId, t.analyteId, () => analytes),
    belongsTo(t.organisationId, t.laboratoryId, () => laboratories),
  ],
);
