import { boolean, index, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { instant, owned, ownedKey } from './columns.ts';

export const organisations = pgTable('organisations', {
  id: uuid('id').primaryKey(),
  name: text('name').notNull(),
  isDemo: boolean('is_demo').notNull().default(false),
  createdAt: instant('created_at').notNull().defaultNow(),
});

/** A person is global: one e-mail address, memberships in any number of organisations. */
export const people = pgTable('people', {
  id: uuid('id').primaryKey(),
  email: text('email').notNull().unique(),
  displayName: text('display_name').notNull(),
  passwordHash: text('password_hash'),
  disabledAt: instant('disabled_at'),
  createdAt: instant('created_at').notNull().defaultNow(),
});

/** One role at one site, or at every site of the organisation when site_id is null. */
export const memberships = pgTable(
  'memberships',
  {
    ...owned,
    personId: uuid('person_id')
      .notNull()
      .references(() => people.id),
    siteId: uuid('site_id'),
    laboratoryId: uuid('laboratory_id'),
    role: text('role').notNull(),
    createdAt: instant('created_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
  },
  (t) => [ownedKey(t), index('memberships_person').on(t.personId)],
);

export const sessions = pgTable(
  'sessions',
  {
    ...owned,
    personId: uuid('person_id')
      .notNull()
      .references(() => people.id),
    createdAt: instant('created_at').notNull().defaultNow(),
    lastSeenAt: instant('last_seen_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
    device: text('device'),
  },
  (t) => [ownedKey(t), index('sessions_person').on(t.personId)],
);

/** Single-use links sent by e-mail; only the hash of the secret is stored. */
export const accessLinks = pgTable(
  'access_links',
  {
    ...owned,
    personId: uuid('person_id')
      .notNull()
      .references(() => people.id),
    purpose: text('purpose', { enum: ['invitation', 'password-reset'] }).notNull(),
    secretHash: text('secret_hash').notNull().unique(),
    expiresAt: instant('expires_at').notNull(),
    usedAt: instant('used_at'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [ownedKey(t)],
);
