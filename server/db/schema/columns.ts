import { sql } from 'drizzle-orm';
import {
  bigserial,
  check,
  date,
  foreignKey,
  numeric,
  primaryKey,
  text,
  timestamp,
  uuid,
  type AnyPgColumn,
} from 'drizzle-orm/pg-core';

/** Columns every table of an organisation begins with; the key is the pair, so that keys between tables carry the wall. */
export const owned = {
  organisationId: uuid('organisation_id').notNull(),
  id: uuid('id').notNull(),
};

/** Columns of a recorded fact: never changed, replaced by a row that names it. */
export const fact = {
  ...owned,
  recordedAt: timestamp('recorded_at', { withTimezone: true, mode: 'string' }).notNull().defaultNow(),
  recordedById: uuid('recorded_by_id').notNull(),
  sequence: bigserial('sequence', { mode: 'number' }).notNull(),
  supersedesId: uuid('supersedes_id'),
  isVoid: text('is_void', { enum: ['yes', 'no'] })
    .notNull()
    .default('no'),
  reason: text('reason'),
};

export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: 'string' });
export const day = (name: string) => date(name, { mode: 'string' });
/** Exact volume, m³: wide enough for a converted US gallon. */
export const volumeM3 = (name: string) => numeric(name, { precision: 18, scale: 6 });
export const exact = (name: string, scale = 6) => numeric(name, { precision: 24, scale });

type OwnedColumns = { organisationId: AnyPgColumn; id: AnyPgColumn };

/** Primary key (organisation_id, id). */
export const ownedKey = (table: OwnedColumns) => primaryKey({ columns: [table.organisationId, table.id] });

/** Foreign key that carries the organisation, because key checks ignore row-level security. */
export function belongsTo(organisationId: AnyPgColumn, column: AnyPgColumn, target: () => OwnedColumns) {
  return foreignKey({
    columns: [organisationId, column],
    foreignColumns: [target().organisationId, target().id],
  });
}

export const monthCheck = (name: string, column: AnyPgColumn) =>
  check(name, sql`${column} ~ '^[0-9]{4}-(0[1-9]|1[0-2])$'`);
export const positive = (name: string, column: AnyPgColumn) => check(name, sql`${column} > 0`);
export const notNegative = (name: string, column: AnyPgColumn) => check(name, sql`${column} >= 0`);
export const fraction = (name: string, column: AnyPgColumn) => check(name, sql`${column} between 0 and 1`);
export const endsAfterStart = (name: string, from: AnyPgColumn, to: AnyPgColumn) =>
  check(name, sql`${to} is null or ${to} > ${from}`);
